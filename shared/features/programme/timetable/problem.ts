import { z } from 'zod';

/**
 * A timetable problem as plain data. Days count from 0, times are minutes of the day in the event's zone, and every
 * interval is half-open: what ends at 10:00 does not meet what begins at 10:00.
 */

const key = z.string().min(1).max(80);
const day = z.number().int().min(0).max(400);
const minute = z.number().int().min(0).max(1440);

/** A moment: day number and minute of the day. */
export const momentSchema = z.strictObject({ day, minute });
export type Moment = z.infer<typeof momentSchema>;

/** A window within one day, half-open. */
export const windowSchema = z.strictObject({ day, start: minute, end: minute });
export type Window = z.infer<typeof windowSchema>;

export const blockSchema = z.strictObject({
  id: key,
  day,
  start: minute,
  end: minute,
  /** `session` takes everything; `social` only what is social (an excursion, a reception). */
  kind: z.enum(['session', 'social']),
});
export type Block = z.infer<typeof blockSchema>;

export const roomSchema = z.strictObject({
  id: key,
  name: z.string().min(1).max(80),
  shortName: z.string().min(1).max(20),
  /** Persons, as permitted by the local fire authority. */
  capacity: z.number().int().min(0).max(100_000),
  features: z.array(z.string().max(40)).max(20),
  closed: z.array(windowSchema).max(400),
});
export type Room = z.infer<typeof roomSchema>;

export const personSchema = z.strictObject({
  id: key,
  name: z.string().min(1).max(200),
  /** Family name, for narrow places. */
  shortName: z.string().min(1).max(200),
  /** Null: there from the first day's start, or to the last day's end. */
  arrival: momentSchema.nullable(),
  departure: momentSchema.nullable(),
  blocked: z.array(windowSchema).max(200),
  /** Half days that the person would rather not speak on; `am` is a start before 13:00. */
  dislikes: z
    .array(z.strictObject({ day, half: z.enum(['am', 'pm']), weight: z.number().int().min(0).max(100) }))
    .max(200),
});
export type Person = z.infer<typeof personSchema>;

/** A place on the timetable without the item that stands there. */
export const placeSchema = z.strictObject({ day, start: minute, room: key });
export type Place = z.infer<typeof placeSchema>;

export const itemKinds = [
  'plenary',
  'talk',
  'lecture',
  'exercise',
  'poster',
  'discussion',
  'social',
] as const;

export const itemSchema = z.strictObject({
  id: key,
  /** How sentences name it: `B 4`, `Exercises B 3`, `the talk by Abubakar`. */
  label: z.string().min(1).max(240),
  kind: z.enum(itemKinds),
  /** Length with questions. */
  minutes: z.number().int().min(5).max(1440),
  /** Speakers, lecturers, tutors and chairs. */
  persons: z.array(key).max(60),
  audience: z.number().int().min(0).max(100_000),
  features: z.array(z.string().max(40)).max(20),
  course: key.nullable(),
  /** Place within the course, from 1. */
  number: z.number().int().min(1).max(400).nullable(),
  /** The lecture whose exercises these are. */
  exerciseOf: key.nullable(),
  pinned: placeSchema.nullable(),
});
export type Item = z.infer<typeof itemSchema>;

export const courseSchema = z.strictObject({
  id: key,
  label: z.string().min(1).max(80),
  /** Lecture k + 1 at least this many days after lecture k. */
  minNights: z.number().int().min(0).max(60),
  maxPerDay: z.number().int().min(1).max(20),
});
export type Course = z.infer<typeof courseSchema>;

export const problemSchema = z.strictObject({
  name: z.string().max(200),
  /** Date of day 0, only for wording; null gives `day 1`. */
  startsOn: z.string().nullable(),
  days: z.number().int().min(1).max(400),
  gridMinutes: z.number().int().min(1).max(120),
  blocks: z.array(blockSchema).max(4000),
  rooms: z.array(roomSchema).max(200),
  persons: z.array(personSchema).max(5000),
  items: z.array(itemSchema).max(5000),
  courses: z.array(courseSchema).max(200),
  /** `after` begins when `before` has ended, or later. */
  prerequisites: z.array(z.strictObject({ before: key, after: key })).max(5000),
});
export type Problem = z.infer<typeof problemSchema>;

/** An item in a room at a time. Its length stands here, because an organiser may give it more or less than it asked for. */
export interface Placement extends Place {
  item: string;
  minutes: number;
}

/** One change of a timetable: an item gets a placement, or none. */
export interface Move {
  item: string;
  to: Placement | null;
}

export const endOf = (placement: { start: number; minutes: number }): number =>
  placement.start + placement.minutes;

export const samePlace = (a: Place, b: Place): boolean =>
  a.day === b.day && a.start === b.start && a.room === b.room;

/** The placements after some moves. The order of the others is kept. */
export function applyMoves(placements: readonly Placement[], moves: readonly Move[]): Placement[] {
  const moved = new Map(moves.map((move) => [move.item, move.to]));
  const kept = placements.filter((placement) => !moved.has(placement.item));
  return [...kept, ...[...moved.values()].filter((placement) => placement !== null)];
}
