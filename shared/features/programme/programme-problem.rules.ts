import type { ProgrammeKind, ProgrammePerson, TalkCard } from './programme.contract';
import { talkLabel, talkWord } from './programme.rules';
import type { Block, Item, Moment, Person, Place, Placement, Problem, Window } from './timetable/problem';
import { addDays, daysBetween, minuteOf } from '../../lib/time';

/** What the database knows, as plain data; the events and talks features deliver it. */
export interface ProgrammeSource {
  event: { title: string; startsOn: string; endsOn: string };
  rooms: { id: string; name: string; shortName: string; capacity: number; features: readonly string[] }[];
  blocks: { id: string; day: string; startsAt: string; endsAt: string; kind: string }[];
  courses: { id: string; letter: string; minNights: number; maxPerDay: number }[];
  talks: SourceTalk[];
  prerequisites: { before: string; after: string }[];
  presences: SourcePresence[];
}

export interface SourceTalk {
  id: string;
  kind: ProgrammeKind;
  title: string;
  /** Whole length, questions included. */
  minutes: number;
  courseId: string | null;
  number: number | null;
  exerciseOf: string | null;
  needs: readonly string[];
  /** Null: not known, so no room is too small. */
  expectedAudience: number | null;
  people: ProgrammePerson[];
}

export interface SourcePresence {
  accountId: string;
  /** Local, `2026-07-06T17:20`. */
  arrivesAt: string | null;
  leavesAt: string | null;
  blocked: readonly { from: string; to: string }[];
}

const kinds: Record<ProgrammeKind, Item['kind']> = {
  plenary: 'plenary',
  invited: 'talk',
  contributed: 'talk',
  course_lecture: 'lecture',
  exercise: 'exercise',
  poster: 'poster',
  discussion: 'discussion',
  social: 'social',
};

/** Co-authors need not be there; everybody else who takes part must. */
const mustBeThere = (person: ProgrammePerson): boolean => person.part !== 'co_author';

export const gridMinutes = 5;

/** The talks as tiles show them, in the order given. */
export function cardsOf(source: ProgrammeSource): TalkCard[] {
  const letters = new Map(source.courses.map((course) => [course.id, course.letter]));
  const byId = new Map(source.talks.map((talk) => [talk.id, talk]));
  return source.talks.map((talk) => {
    const lecture = talk.exerciseOf === null ? undefined : byId.get(talk.exerciseOf);
    const courseId = talk.courseId ?? lecture?.courseId ?? null;
    const letter = courseId === null ? null : (letters.get(courseId) ?? null);
    const number = lecture?.number ?? talk.number;
    const speaker = talk.people.find((person) => person.part === 'speaker')?.shortName ?? null;
    return {
      talkId: talk.id,
      kind: talk.kind,
      word: talkWord(talk.kind, letter, number),
      label: talkLabel(talk, letter, number, speaker),
      title: talk.title,
      minutes: roundUp(talk.minutes),
      expectedAudience: talk.expectedAudience,
      needs: [...talk.needs],
      courseLetter: letter,
      number,
      people: talk.people,
    };
  });
}

const roundUp = (minutes: number): number =>
  Math.max(gridMinutes, Math.ceil(minutes / gridMinutes) * gridMinutes);

/** The event as a timetable problem. Windows outside the event's days are cut off; nothing is fixed (see `pinFixed`). */
export function problemOf(source: ProgrammeSource, cards: readonly TalkCard[]): Problem {
  const { startsOn, endsOn, title } = source.event;
  const days = daysBetween(startsOn, endsOn) + 1;
  const known = new Set(source.talks.map((talk) => talk.id));
  const byId = new Map(source.talks.map((talk) => [talk.id, talk]));
  return {
    name: title,
    startsOn,
    days,
    gridMinutes,
    blocks: source.blocks.flatMap((block) => blockOf(block, startsOn)),
    rooms: source.rooms.map(({ id, name, shortName, capacity, features }) => ({
      id,
      name,
      shortName,
      capacity,
      features: [...features],
      closed: [],
    })),
    persons: personsOf(source, days),
    items: cards.map((card) => itemOf(card, byId.get(card.talkId) as SourceTalk, known)),
    courses: source.courses.map(({ id, letter, minNights, maxPerDay }) => ({
      id,
      label: `course ${letter}`,
      minNights,
      maxPerDay,
    })),
    prerequisites: source.prerequisites.filter((pair) => known.has(pair.before) && known.has(pair.after)),
  };
}

function blockOf(block: ProgrammeSource['blocks'][number], startsOn: string): Block[] {
  if (block.kind !== 'session' && block.kind !== 'social') return [];
  const { id, day, startsAt, endsAt, kind } = block;
  return [{ id, day: daysBetween(startsOn, day), start: minuteOf(startsAt), end: minuteOf(endsAt), kind }];
}

function itemOf(card: TalkCard, talk: SourceTalk, known: ReadonlySet<string>): Item {
  return {
    id: card.talkId,
    label: card.label.slice(0, 240),
    kind: kinds[card.kind],
    minutes: card.minutes,
    persons: [...new Set(talk.people.filter(mustBeThere).map((person) => person.accountId))],
    audience: card.expectedAudience ?? 0,
    features: card.needs,
    course: card.kind === 'course_lecture' ? talk.courseId : null,
    number: card.kind === 'course_lecture' ? talk.number : null,
    exerciseOf: talk.exerciseOf !== null && known.has(talk.exerciseOf) ? talk.exerciseOf : null,
    pinned: null,
  };
}

function personsOf(source: ProgrammeSource, days: number): Person[] {
  const people = new Map(
    source.talks.flatMap((talk) => talk.people).map((person) => [person.accountId, person]),
  );
  const stays = new Map(source.presences.map((presence) => [presence.accountId, presence]));
  return [...people.values()].map(({ accountId, printedName, shortName }) => {
    const stay = stays.get(accountId);
    return {
      id: accountId,
      name: printedName,
      shortName,
      arrival: momentOf(stay?.arrivesAt, source.event.startsOn, days, 'before'),
      departure: momentOf(stay?.leavesAt, source.event.startsOn, days, 'after'),
      blocked: (stay?.blocked ?? []).flatMap((span) => windowsOf(span, source.event.startsOn, days)),
      dislikes: [],
    };
  });
}

/**
 * A local date and time as day number and minute. Null where it says nothing: not known, an arrival before the event,
 * a departure after it. An arrival after the event, or a departure before it, leaves no time at all.
 */
function momentOf(
  local: string | null | undefined,
  startsOn: string,
  days: number,
  harmless: 'before' | 'after',
): Moment | null {
  if (!local) return null;
  const day = daysBetween(startsOn, local.slice(0, 10));
  if (day < 0) return harmless === 'before' ? null : { day: 0, minute: 0 };
  if (day >= days) return harmless === 'after' ? null : { day: days - 1, minute: 1440 };
  return { day, minute: minuteOf(local.slice(11, 16)) };
}

/** A span of local time as one window per day. */
function windowsOf({ from, to }: { from: string; to: string }, startsOn: string, days: number): Window[] {
  const first = Math.max(0, daysBetween(startsOn, from.slice(0, 10)));
  const last = Math.min(days - 1, daysBetween(startsOn, to.slice(0, 10)));
  const windows: Window[] = [];
  for (let day = first; day <= last; day++) {
    const date = addDays(startsOn, day);
    const start = date === from.slice(0, 10) ? minuteOf(from.slice(11, 16)) : 0;
    const end = date === to.slice(0, 10) ? minuteOf(to.slice(11, 16)) : 1440;
    if (start < end) windows.push({ day, start, end });
  }
  return windows;
}

/** The problem with the fixed placements as pins. */
export function pinFixed(problem: Problem, placements: readonly (Placement & { fixed: boolean })[]): Problem {
  const pins = new Map<string, Place>(
    placements.filter((p) => p.fixed).map(({ item, day, start, room }) => [item, { day, start, room }]),
  );
  if (pins.size === 0) return problem;
  return { ...problem, items: problem.items.map((item) => ({ ...item, pinned: pins.get(item.id) ?? null })) };
}
