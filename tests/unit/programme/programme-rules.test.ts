import { describe, expect, it } from 'vitest';
import type { ProgrammePerson } from '@shared/features/programme/programme.contract';
import {
  cardsOf,
  pinFixed,
  problemOf,
  type ProgrammeSource,
} from '@shared/features/programme/programme-problem.rules';
import {
  compareProgrammes,
  countChanges,
  fromTimetable,
  isPlaceable,
  peopleIn,
  talkLabel,
  talkWord,
  toTimetable,
  type Snapshot,
} from '@shared/features/programme/programme.rules';

const person = (accountId: string, part: ProgrammePerson['part'] = 'speaker'): ProgrammePerson => ({
  accountId,
  part,
  printedName: `Dr ${accountId}`,
  shortName: accountId,
});
const snapshot = (
  talkId: string,
  given: Partial<Snapshot['spot']> = {},
  people = [person('Ngô')],
): Snapshot => ({
  talkId,
  kind: 'invited',
  word: 'Invited',
  title: talkId,
  spot: {
    roomId: 'hall',
    roomName: 'Great Hall',
    day: '2026-07-06',
    startMinute: 540,
    minutes: 50,
    ...given,
  },
  people,
});

describe('compareProgrammes', () => {
  it.each([
    ['nothing', [snapshot('a')], [snapshot('a')], []],
    ['a new talk', [], [snapshot('a')], ['placed']],
    ['a talk taken off', [snapshot('a')], [], ['taken_off']],
    ['another hour', [snapshot('a')], [snapshot('a', { startMinute: 545 })], ['time']],
    [
      'another day and room',
      [snapshot('a')],
      [snapshot('a', { day: '2026-07-07', roomId: 'ivar' })],
      ['time_and_room'],
    ],
    ['another room', [snapshot('a')], [snapshot('a', { roomId: 'ivar' })], ['room']],
    ['another length', [snapshot('a')], [snapshot('a', { minutes: 60 })], ['length']],
    ['another speaker', [snapshot('a')], [snapshot('a', {}, [person('Lie')])], ['people']],
    ['a renamed room', [snapshot('a')], [snapshot('a', { roomName: 'Hall' })], []],
  ])('%s', (_what, before, after, wanted) => {
    expect(compareProgrammes(before, after).map((change) => change.what)).toEqual(wanted);
  });
  it('names everybody who takes part before or after, each once', () => {
    const [change] = compareProgrammes(
      [snapshot('a')],
      [snapshot('a', { startMinute: 600 }, [person('Ngô'), person('Lie', 'chair')])],
    );
    expect(change?.affected.map((one) => one.accountId)).toEqual(['Ngô', 'Lie']);
    expect(peopleIn(compareProgrammes([], [snapshot('a'), snapshot('b')]))).toBe(1);
  });
});

describe('words', () => {
  it.each([
    ['course_lecture', 'B', 4, 'Course B 4', 'B 4'],
    ['exercise', 'B', 3, 'Exercises B 3', 'Exercises B 3'],
    ['invited', null, null, 'Invited', 'the talk by Ngô'],
    ['plenary', null, null, 'Plenary', 'the plenary talk by Ngô'],
    ['social', null, null, 'Social', '“Opening”'],
  ] as const)('%s', (kind, letter, number, word, label) => {
    expect(talkWord(kind, letter, number)).toBe(word);
    expect(talkLabel({ kind, title: 'Opening' }, letter, number, 'Ngô')).toBe(label);
  });
  it.each([
    ['contributed', 'submitted', false],
    ['contributed', 'accepted', true],
    ['invited', 'draft', true],
    ['invited', 'withdrawn', false],
    ['course_lecture', 'declined', false],
  ] as const)('%s, %s: placeable %s', (kind, state, wanted) =>
    expect(isPlaceable({ kind, state })).toBe(wanted),
  );
});

const source: ProgrammeSource = {
  event: { title: 'School', startsOn: '2026-07-06', endsOn: '2026-07-10' },
  rooms: [{ id: 'hall', name: 'Great Hall', shortName: 'G', capacity: 180, features: ['projector'] }],
  blocks: [
    { id: 'b1', day: '2026-07-06', startsAt: '09:00', endsAt: '12:30', kind: 'session' },
    { id: 'b2', day: '2026-07-06', startsAt: '12:30', endsAt: '13:30', kind: 'lunch' },
    { id: 'b3', day: '2026-07-08', startsAt: '18:00', endsAt: '22:00', kind: 'social' },
  ],
  courses: [{ id: 'c', letter: 'B', minNights: 1, maxPerDay: 1 }],
  talks: [
    {
      id: 'l1',
      kind: 'course_lecture',
      title: 'Knots',
      minutes: 50,
      courseId: 'c',
      number: 1,
      exerciseOf: null,
      needs: ['projector'],
      expectedAudience: 120,
      people: [person('Ngô')],
    },
    {
      id: 'e1',
      kind: 'exercise',
      title: 'Sheet',
      minutes: 88,
      courseId: 'c',
      number: 1,
      exerciseOf: 'l1',
      needs: [],
      expectedAudience: null,
      people: [person('Lie', 'tutor')],
    },
  ],
  prerequisites: [
    { before: 'l1', after: 'e1' },
    { before: 'l1', after: 'gone' },
  ],
  presences: [
    {
      accountId: 'Ngô',
      arrivesAt: '2026-07-05T17:20',
      leavesAt: '2026-07-09T10:20',
      blocked: [{ from: '2026-07-06T22:00', to: '2026-07-08T08:00' }],
    },
    { accountId: 'Lie', arrivesAt: null, leavesAt: '2026-07-20T10:00', blocked: [] },
  ],
};

describe('problemOf', () => {
  const made = problemOf(source, cardsOf(source));
  it('counts days from the first and keeps only blocks for talks and social events', () => {
    expect(made.days).toBe(5);
    expect(made.blocks.map(({ id, day, start, end, kind }) => [id, day, start, end, kind])).toEqual([
      ['b1', 0, 540, 750, 'session'],
      ['b3', 2, 1080, 1320, 'social'],
    ]);
  });
  it('takes stays as far as they matter, and splits blocked times by days', () => {
    const [ngo, lie] = made.persons;
    expect(ngo).toMatchObject({ arrival: null, departure: { day: 3, minute: 620 } });
    expect(ngo?.blocked).toEqual([
      { day: 0, start: 1320, end: 1440 },
      { day: 1, start: 0, end: 1440 },
      { day: 2, start: 0, end: 480 },
    ]);
    expect(lie).toMatchObject({ arrival: null, departure: null });
  });
  it('knows lectures, exercises and prerequisites; an unknown audience fits everywhere; lengths go up to the grid', () => {
    expect(made.items[0]).toMatchObject({
      label: 'B 1',
      kind: 'lecture',
      course: 'c',
      number: 1,
      audience: 120,
    });
    expect(made.items[1]).toMatchObject({
      label: 'Exercises B 1',
      kind: 'exercise',
      course: null,
      exerciseOf: 'l1',
      audience: 0,
      minutes: 90,
    });
    expect(made.prerequisites).toEqual([{ before: 'l1', after: 'e1' }]);
  });
  it('pins what is fixed', () => {
    const at = toTimetable(
      { talkId: 'l1', roomId: 'hall', day: '2026-07-08', startMinute: 545, minutes: 50, fixed: true },
      '2026-07-06',
    );
    expect(at).toEqual({ item: 'l1', room: 'hall', day: 2, start: 545, minutes: 50 });
    expect(fromTimetable(at, '2026-07-06')).toMatchObject({
      talkId: 'l1',
      day: '2026-07-08',
      startMinute: 545,
    });
    expect(pinFixed(made, [{ ...at, fixed: true }]).items[0]?.pinned).toEqual({
      day: 2,
      start: 545,
      room: 'hall',
    });
    expect(pinFixed(made, [{ ...at, fixed: false }])).toBe(made);
  });
});

describe('countChanges', () => {
  it('counts talks that stand elsewhere, are new or gone', () => {
    const at = (talkId: string, startMinute: number) => ({
      talkId,
      roomId: 'hall',
      day: '2026-07-06',
      startMinute,
      minutes: 50,
      fixed: false,
    });
    expect(
      countChanges([at('a', 540), at('b', 600), at('c', 700)], [at('a', 540), at('b', 605), at('d', 700)]),
    ).toBe(3);
  });
});
