import { describe, expect, it } from 'vitest';
import { checkAll } from '@shared/features/programme/timetable/check';
import type { Clash } from '@shared/features/programme/timetable/clash';
import type { Placement, Problem } from '@shared/features/programme/timetable/problem';
import { at, block, item, person, problem, put, room } from './build-problem';

type Row = [what: string, given: Partial<Problem>, placements: Placement[], broken: string[]];

const table = (rule: string, rows: Row[]): void => {
  describe(rule, () => {
    it.each(rows)('%s', (_what, given, placements, broken) => {
      const clashes = checkAll(problem(given), placements).filter(
        (clash) => clash.rule.split(':')[0] === rule,
      );
      expect(clashes.map(name)).toEqual(broken);
      for (const clash of clashes) expect(clash.sentence.startsWith(clash.title)).toBe(true);
    });
  });
};
const name = (clash: Clash): string => `${clash.rule} ${clash.items.join(' ')}`;
const two = { items: [item('A'), item('B')] };

table('roomOnce', [
  ['overlapping in one room', two, [put('A', 0, '9:00'), put('B', 0, '9:55')], ['roomOnce A B']],
  ['back to back', two, [put('A', 0, '9:00'), put('B', 0, '10:00')], []],
  ['at once in two rooms', two, [put('A', 0, '9:00'), put('B', 0, '9:00', 'Ivar')], []],
  ['same hour on another day', two, [put('A', 0, '9:00'), put('B', 1, '9:00')], []],
  [
    'three at once are three pairs',
    { items: [item('A'), item('B'), item('C')] },
    [put('A', 0, '9:00'), put('B', 0, '9:10'), put('C', 0, '9:20')],
    ['roomOnce A B', 'roomOnce B C', 'roomOnce A C'],
  ],
]);

const ngo = (a: Placement, b: Placement, given: Partial<Problem> = {}): [Partial<Problem>, Placement[]] => [
  {
    persons: [person('Ngo')],
    items: [item('A', { persons: ['Ngo'] }), item('B', { persons: ['Ngo'] })],
    ...given,
  },
  [a, b],
];
table('onePlace', [
  [
    'speaks and chairs at once',
    ...ngo(put('A', 0, '9:00'), put('B', 0, '9:30', 'Ivar')),
    ['onePlace:Ngo A B'],
  ],
  ['one after the other', ...ngo(put('A', 0, '9:00'), put('B', 0, '10:00', 'Ivar')), []],
  ['other people', { ...two }, [put('A', 0, '9:00'), put('B', 0, '9:30', 'Ivar')], []],
]);

table('insideBlock', [
  ['fills a block to its end', two, [put('A', 0, '11:30')], []],
  ['runs into lunch', two, [put('A', 0, '11:35')], ['insideBlock A']],
  [
    'across two adjoining blocks',
    { ...two, blocks: [block(0, '9:00', '10:00'), block(0, '10:00', '12:00')] },
    [put('A', 0, '9:30')],
    ['insideBlock A'],
  ],
  ['a day without blocks', { ...two, days: 9 }, [put('A', 8, '9:00')], ['insideBlock A']],
  [
    'a talk in a social block',
    { ...two, blocks: [block(0, '18:00', '22:00', 'social')] },
    [put('A', 0, '19:00')],
    ['insideBlock A'],
  ],
  [
    'a dinner in a social block',
    { items: [item('A', { kind: 'social' })], blocks: [block(0, '18:00', '22:00', 'social')] },
    [put('A', 0, '19:00')],
    [],
  ],
]);

const guest = (stay: Parameters<typeof person>[1]): Partial<Problem> => ({
  persons: [person('Ngo', stay)],
  items: [item('A', { persons: ['Ngo'] })],
});
const arrives = guest({ arrival: { day: 1, minute: at('9:30') } });
const leaves = guest({ departure: { day: 1, minute: at('10:30') } });
const busy = guest({ blocked: [{ day: 0, start: at('10:00'), end: at('11:00') }] });
table('presence', [
  ['a day before the arrival', arrives, [put('A', 0, '14:00')], ['presence:Ngo A']],
  ['half an hour before the arrival', arrives, [put('A', 1, '9:00')], ['presence:Ngo A']],
  ['at the arrival', arrives, [put('A', 1, '9:30')], []],
  ['ends with the departure', leaves, [put('A', 1, '9:30')], []],
  ['ends after the departure', leaves, [put('A', 1, '9:35')], ['presence:Ngo A']],
  ['the day after', leaves, [put('A', 2, '9:00')], ['presence:Ngo A']],
  ['in a blocked hour', busy, [put('A', 0, '9:30')], ['presence:Ngo A']],
  ['until a blocked hour', busy, [put('A', 0, '9:00')], []],
  ['after a blocked hour', busy, [put('A', 0, '11:00')], []],
]);

const course = (minNights: number, maxPerDay: number): Partial<Problem> => ({
  courses: [{ id: 'B', label: 'Course B', minNights, maxPerDay }],
  items: [1, 2, 3].map((number) => item(`B${number}`, { kind: 'lecture', course: 'B', number })),
});
table('order', [
  ['in order', course(0, 9), [put('B1', 0, '9:00'), put('B2', 0, '10:00'), put('B3', 1, '9:00')], []],
  ['turned round', course(0, 9), [put('B1', 0, '10:00'), put('B2', 0, '9:00')], ['order:B B1 B2']],
  [
    'overlapping in two rooms',
    course(0, 9),
    [put('B1', 0, '9:00'), put('B2', 0, '9:30', 'Ivar')],
    ['order:B B1 B2'],
  ],
  [
    'the middle one in the tray',
    course(0, 9),
    [put('B1', 1, '9:00'), put('B3', 0, '9:00')],
    ['order:B B1 B3'],
  ],
]);
table('nights', [
  ['one night, next day', course(1, 9), [put('B1', 0, '17:00'), put('B2', 1, '9:00')], []],
  ['one night, same day', course(1, 9), [put('B1', 0, '9:00'), put('B2', 0, '14:00')], ['nights:B B1 B2']],
  ['two nights, next day', course(2, 9), [put('B1', 0, '9:00'), put('B2', 1, '9:00')], ['nights:B B1 B2']],
  ['two nights, two days', course(2, 9), [put('B1', 0, '9:00'), put('B2', 2, '9:00')], []],
]);
table('perDay', [
  ['one of one', course(0, 1), [put('B1', 0, '9:00'), put('B2', 1, '9:00')], []],
  ['two of one', course(0, 1), [put('B1', 0, '9:00'), put('B2', 0, '10:00')], ['perDay:B B1 B2']],
  [
    'three of two',
    course(0, 2),
    [put('B1', 0, '9:00'), put('B2', 0, '10:00'), put('B3', 0, '14:00')],
    ['perDay:B B1 B2 B3'],
  ],
]);

const exercises = {
  items: [item('L', { kind: 'lecture' }), item('E', { kind: 'exercise', exerciseOf: 'L' })],
};
table('exercise', [
  ['same day', exercises, [put('L', 0, '9:00'), put('E', 0, '14:00')], []],
  ['right after', exercises, [put('L', 0, '9:00'), put('E', 0, '10:00')], []],
  [
    'before the lecture has ended',
    exercises,
    [put('L', 0, '9:00'), put('E', 0, '9:55', 'Ivar')],
    ['exercise:E L E'],
  ],
  ['next day', exercises, [put('L', 0, '9:00'), put('E', 1, '9:00')], []],
  ['two days later', exercises, [put('L', 0, '9:00'), put('E', 2, '9:00')], ['exercise:E L E']],
  ['the day before', exercises, [put('L', 1, '9:00'), put('E', 0, '9:00')], ['exercise:E L E']],
  ['lecture in the tray', exercises, [put('E', 0, '9:00')], []],
]);

const needs = { ...two, prerequisites: [{ before: 'A', after: 'B' }] };
table('prereq', [
  ['after', needs, [put('A', 0, '9:00'), put('B', 0, '10:00')], []],
  ['before', needs, [put('A', 0, '10:00'), put('B', 0, '9:00')], ['prereq:A>B A B']],
  ['at once', needs, [put('A', 0, '9:00'), put('B', 0, '9:30', 'Ivar')], ['prereq:A>B A B']],
]);

const crowd = { items: [item('A', { audience: 57, features: ['projector', 'camera'] })] };
table('capacity', [
  ['one too many', crowd, [put('A', 0, '9:00', 'Ivar')], ['capacity:A A']],
  ['room enough', crowd, [put('A', 0, '9:00', 'Hall')], []],
  ['exactly full', { items: [item('A', { audience: 56 })] }, [put('A', 0, '9:00', 'Ivar')], []],
]);
const beamer = {
  ...crowd,
  rooms: [
    room('Hall', { capacity: 180, features: ['projector', 'camera'] }),
    room('Ivar', { features: ['projector'] }),
  ],
};
table('features', [
  ['all there', beamer, [put('A', 0, '9:00')], []],
  ['one missing', beamer, [put('A', 0, '9:00', 'Ivar')], ['features:A A']],
]);
const closed = {
  ...two,
  rooms: [room('Hall', { closed: [{ day: 0, start: at('14:00'), end: at('16:00') }] })],
};
table('roomClosed', [
  ['before it closes', closed, [put('A', 0, '11:30')], []],
  ['while it is closed', closed, [put('A', 0, '15:30')], ['roomClosed:Hall A']],
  ['when it opens again', closed, [put('A', 0, '16:00')], []],
]);
const plenary = { items: [item('P', { kind: 'plenary' }), item('B')] };
table('plenaryAlone', [
  [
    'something beside it',
    plenary,
    [put('P', 0, '9:00'), put('B', 0, '9:30', 'Ivar')],
    ['plenaryAlone:P P B'],
  ],
  ['nothing beside it', plenary, [put('P', 0, '9:00'), put('B', 0, '10:00', 'Ivar')], []],
]);
const pinned = { items: [item('A', { pinned: { day: 0, start: at('9:00'), room: 'Hall' } })] };
table('pin', [
  ['where it was fixed', pinned, [put('A', 0, '9:00')], []],
  ['another time', pinned, [put('A', 0, '9:05')], ['pin:A A']],
  ['another room', pinned, [put('A', 0, '9:00', 'Ivar')], ['pin:A A']],
]);

describe('sentences', () => {
  it('say who, when and why', () => {
    const clashes = checkAll(problem(leaves), [put('A', 1, '11:25', 'Hall', 50)]);
    expect(clashes.map((clash) => clash.sentence)).toEqual([
      'Ngo has left. A is on Tue 7 July, 11:25–12:15; the stay ends Tue 7 July at 10:30.',
    ]);
  });
  it('name what a room lacks', () => {
    const [clash] = checkAll(problem(crowd), [put('A', 0, '9:00', 'Hall')]);
    expect(clash?.sentence).toBe('Hall has no projector and no camera. A needs them.');
  });
  it('say nothing about items or rooms that are not known', () => {
    expect(checkAll(problem(two), [put('ghost', 0, '9:00'), put('A', 0, '9:00', 'Nowhere')])).toEqual([]);
  });
});
