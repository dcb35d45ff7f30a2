import type { Placement } from './timetable/problem';
import type {
  DraftPlacement,
  ProgrammeChange,
  ProgrammeKind,
  ProgrammePerson,
  Spot,
} from './programme.contract';
import { plainLatex } from '../../lib/latex';
import { excerpt } from '../../lib/text';
import { addDays, daysBetween } from '../../lib/time';

/** The word on a tile for each kind; courses and exercises add letter and number. */
export const kindWords: Record<ProgrammeKind, string> = {
  plenary: 'Plenary',
  invited: 'Invited',
  contributed: 'Contributed',
  course_lecture: 'Course',
  exercise: 'Exercises',
  poster: 'Posters',
  discussion: 'Discussion',
  social: 'Social',
};

/** `Course B 4`, `Exercises B 3`, `Invited`. */
export function talkWord(kind: ProgrammeKind, letter: string | null, number: number | null): string {
  const part = (kind === 'course_lecture' || kind === 'exercise') && letter ? ` ${letter}` : '';
  return `${kindWords[kind]}${part}${part && number ? ` ${number}` : ''}`;
}

/** How sentences name a talk: `B 4`, `Exercises B 3`, `the talk by Abubakar`, `the social “Opening”`. */
export function talkLabel(
  talk: { kind: ProgrammeKind; title: string },
  letter: string | null,
  number: number | null,
  speaker: string | null,
): string {
  if (talk.kind === 'course_lecture' && letter) return number ? `${letter} ${number}` : `Course ${letter}`;
  if (talk.kind === 'exercise' && letter) return talkWord('exercise', letter, number);
  if (speaker && talk.kind === 'plenary') return `the plenary talk by ${speaker}`;
  if (speaker && (talk.kind === 'invited' || talk.kind === 'contributed')) return `the talk by ${speaker}`;
  return talk.title
    ? `“${excerpt(plainLatex(talk.title), 60)}”`
    : `the ${kindWords[talk.kind].toLowerCase()}`;
}

/** May a talk stand on the calendar? What was declined or withdrawn drops out; a contributed talk must be accepted. */
export function isPlaceable(talk: { kind: ProgrammeKind; state: string }): boolean {
  if (talk.state === 'declined' || talk.state === 'withdrawn') return false;
  return talk.state === 'accepted' || talk.kind !== 'contributed';
}

/** A draft placement in the timetable's own terms: day numbers from the event's first day. */
export function toTimetable(placement: DraftPlacement, startsOn: string): Placement {
  return {
    item: placement.talkId,
    day: daysBetween(startsOn, placement.day),
    start: placement.startMinute,
    room: placement.roomId,
    minutes: placement.minutes,
  };
}

/** And back. */
export function fromTimetable(placement: Placement, startsOn: string): Omit<DraftPlacement, 'fixed'> {
  const { item, day, start, room, minutes } = placement;
  return { talkId: item, roomId: room, day: addDays(startsOn, day), startMinute: start, minutes };
}

/** What a comparison looks at: a placed talk with its people. */
export interface Snapshot {
  talkId: string;
  kind: ProgrammeKind;
  word: string;
  title: string;
  spot: Spot;
  people: ProgrammePerson[];
}

/** What changed between two programmes, by the day and hour of the newer place. Pure, so revision or draft is the same. */
export function compareProgrammes(
  before: readonly Snapshot[],
  after: readonly Snapshot[],
): ProgrammeChange[] {
  const earlier = new Map(before.map((one) => [one.talkId, one]));
  const later = new Map(after.map((one) => [one.talkId, one]));
  const ids = [...new Set([...later.keys(), ...earlier.keys()])];
  return ids
    .flatMap((id) => changeOf(earlier.get(id), later.get(id)))
    .sort((a, b) => whenKey(a).localeCompare(whenKey(b)));
}

function changeOf(before: Snapshot | undefined, after: Snapshot | undefined): ProgrammeChange[] {
  const what = whatChanged(before, after);
  const shown = after ?? before;
  if (!what || !shown) return [];
  const everybody = [...(after?.people ?? []), ...(before?.people ?? [])];
  return [
    {
      talkId: shown.talkId,
      kind: shown.kind,
      word: shown.word,
      title: shown.title,
      what,
      before: before?.spot ?? null,
      after: after?.spot ?? null,
      affected: [...new Map(everybody.map((one) => [`${one.accountId} ${one.part}`, one])).values()],
    },
  ];
}

function whatChanged(
  before: Snapshot | undefined,
  after: Snapshot | undefined,
): ProgrammeChange['what'] | null {
  if (!before) return after ? 'placed' : null;
  if (!after) return 'taken_off';
  const time = before.spot.day !== after.spot.day || before.spot.startMinute !== after.spot.startMinute;
  const room = before.spot.roomId !== after.spot.roomId;
  if (time) return room ? 'time_and_room' : 'time';
  if (room) return 'room';
  if (before.spot.minutes !== after.spot.minutes) return 'length';
  return sameSet(partsOf(before), partsOf(after)) ? null : 'people';
}

const partsOf = (one: Snapshot): string[] => one.people.map((person) => `${person.accountId} ${person.part}`);
const sameSet = (a: string[], b: string[]): boolean => [...a].sort().join() === [...b].sort().join();

const whenKey = (change: ProgrammeChange): string => {
  const spot = change.after ?? change.before;
  return `${spot?.day} ${String(spot?.startMinute).padStart(4, '0')} ${change.talkId}`;
};

/** Different people in some changes. */
export const peopleIn = (changes: readonly ProgrammeChange[]): number =>
  new Set(changes.flatMap((change) => change.affected.map((person) => person.accountId))).size;

/** Number of placements that differ, for the line "Draft: 11 changes since revision 3". */
export function countChanges(before: readonly DraftPlacement[], after: readonly DraftPlacement[]): number {
  const spot = (one: DraftPlacement): string => `${one.roomId} ${one.day} ${one.startMinute} ${one.minutes}`;
  const earlier = new Map(before.map((one) => [one.talkId, spot(one)]));
  const later = new Map(after.map((one) => [one.talkId, spot(one)]));
  return [...new Set([...earlier.keys(), ...later.keys()])].filter((id) => earlier.get(id) !== later.get(id))
    .length;
}
