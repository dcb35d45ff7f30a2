import type { PossiblePlace } from './timetable/places';
import type { Place, Problem } from './timetable/problem';
import { addDays } from '../../lib/time';
import { foldCase } from '../../lib/text';

/** What somebody typed to say where a talk should go: `thu 9`, `9 july 11:25 ivar`, `tue great`. */
export interface MoveQuery {
  /** Day numbers that a word named; empty when none did. */
  days: number[];
  /** Minutes of the day. A bare number may mean an hour as well as a day of the month. */
  starts: number[];
  /** The time was typed with minutes, so it is meant exactly. */
  exact: boolean;
  rooms: string[];
  /** Words that mean nothing here. */
  unknown: string[];
}

const weekdays = ['sunday', 'monday', 'tuesday', 'wednesday', 'thursday', 'friday', 'saturday'];
const months = 'january february march april may june july august september october november december'.split(
  ' ',
);

/** Reads words in any order. Nothing is an error: what is not understood is told in `unknown`. */
export function parseMove(problem: Problem, text: string): MoveQuery {
  const found: MoveQuery = { days: [], starts: [], exact: false, rooms: [], unknown: [] };
  for (const word of foldCase(text).replace(/,/g, ' ').split(/\s+/).filter(Boolean))
    readWord(problem, word, found);
  return found;
}

function readWord(problem: Problem, word: string, found: MoveQuery): void {
  const time = /^(\d{1,2})[:.](\d{2})$/.exec(word);
  if (time) {
    found.starts = [Number(time[1]) * 60 + Number(time[2])];
    found.exact = true;
    return;
  }
  const days = daysNamed(problem, word);
  if (/^\d{1,2}\.?$/.test(word)) return readNumber(Number.parseInt(word, 10), days, found);
  if (days.length > 0) {
    found.days = found.days.length > 0 ? found.days.filter((day) => days.includes(day)) : days;
    return;
  }
  if (word.length >= 3 && months.some((month) => month.startsWith(word))) return;
  const rooms = problem.rooms.filter((room) => isNamed(room.name, word) || foldCase(room.shortName) === word);
  if (rooms.length > 0) found.rooms = rooms.map((room) => room.id);
  else found.unknown.push(word);
}

/** After a weekday a number narrows to that date where it can; as an hour it counts too: `thu 9` is both. */
function readNumber(number: number, days: number[], found: MoveQuery): void {
  const narrowed = found.days.filter((day) => days.includes(day));
  if (narrowed.length > 0) found.days = narrowed;
  else if (found.days.length === 0) found.days = days;
  if (number < 24 && !found.exact) found.starts = [number * 60];
}

function daysNamed(problem: Problem, word: string): number[] {
  const all = Array.from({ length: problem.days }, (_, day) => day);
  if (!problem.startsOn) return all.filter((day) => word === String(day + 1));
  const dates = all.map((day) => new Date(`${addDays(problem.startsOn as string, day)}T00:00:00Z`));
  const weekday =
    word.length >= 2 && /^[a-z]+$/.test(word) ? weekdays.findIndex((name) => name.startsWith(word)) : -1;
  return all.filter((day) => {
    const date = dates[day] as Date;
    return weekday >= 0 ? date.getUTCDay() === weekday : date.getUTCDate() === Number.parseInt(word, 10);
  });
}

const isNamed = (name: string, word: string): boolean =>
  word.length >= 2 &&
  foldCase(name)
    .split(/\s+/)
    .some((part) => part.startsWith(word));

/** Places that a typed time adds: that very minute on the days meant, in the rooms meant. */
export function typedPlaces(problem: Problem, query: MoveQuery): Place[] {
  const start = query.starts[0];
  if (!query.exact || start === undefined || start >= 1440) return [];
  const rooms = query.rooms.length > 0 ? query.rooms : problem.rooms.map((room) => room.id);
  const snapped = Math.round(start / problem.gridMinutes) * problem.gridMinutes;
  return query.days.flatMap((day) => rooms.map((room) => ({ day, start: snapped, room })));
}

/** How well a place answers: a day, an hour, a room each count one. */
export function answers(place: Place, query: MoveQuery): number {
  const hour = (minute: number): boolean =>
    query.exact ? place.start === minute : Math.floor(place.start / 60) === Math.floor(minute / 60);
  return (
    Number(query.days.includes(place.day)) +
    Number(query.starts.some(hour)) +
    Number(query.rooms.includes(place.room))
  );
}

/** The places in the order of how well they answer; within that, as they came (those that fit first, the nearest first). */
export function rankPlaces(places: readonly PossiblePlace[], query: MoveQuery): PossiblePlace[] {
  const asked = query.days.length + query.starts.length + query.rooms.length > 0;
  if (!asked) return [...places];
  return places
    .map((place, i) => ({ place, i, score: answers(place.to, query) }))
    .filter((entry) => entry.score > 0)
    .sort((a, b) => b.score - a.score || a.i - b.i)
    .map((entry) => entry.place);
}
