import type {
  Block,
  Item,
  Person,
  Placement,
  Problem,
  Room,
} from '@shared/features/programme/timetable/problem';
import { minuteOf } from '@shared/lib/time';

/** `9:00` or `09:00` -> minutes of the day; `24:00` too. */
export const at = (time: string): number => minuteOf(time.padStart(5, '0'));

export const room = (id: string, given: Partial<Room> = {}): Room => ({
  id,
  name: id,
  shortName: id.slice(0, 3),
  capacity: 60,
  features: [],
  closed: [],
  ...given,
});

export const person = (id: string, given: Partial<Person> = {}): Person => ({
  id,
  name: id,
  shortName: id,
  arrival: null,
  departure: null,
  blocked: [],
  dislikes: [],
  ...given,
});

export const item = (id: string, given: Partial<Item> = {}): Item => ({
  id,
  label: id,
  kind: 'talk',
  minutes: 60,
  persons: [],
  audience: 20,
  features: [],
  course: null,
  number: null,
  exerciseOf: null,
  pinned: null,
  ...given,
});

export const block = (day: number, start: string, end: string, kind: Block['kind'] = 'session'): Block => ({
  id: `d${day}-${start}`,
  day,
  start: at(start),
  end: at(end),
  kind,
});

export const put = (id: string, day: number, start: string, where = 'Hall', minutes = 60): Placement => ({
  item: id,
  day,
  start: at(start),
  room: where,
  minutes,
});

/** Three days from Mon 6 July, blocks in the morning and the afternoon, two rooms. */
export const problem = (given: Partial<Problem> = {}): Problem => ({
  name: 'test',
  startsOn: '2026-07-06',
  days: 3,
  gridMinutes: 5,
  blocks: [0, 1, 2].flatMap((day) => [block(day, '9:00', '12:30'), block(day, '14:00', '18:00')]),
  rooms: [room('Hall', { capacity: 180 }), room('Ivar', { capacity: 56 })],
  persons: [],
  items: [],
  courses: [],
  prerequisites: [],
  ...given,
});
