import { describe, expect, it } from 'vitest';
import { checkAll, moveChecker } from '@shared/features/programme/timetable/check';
import type { Placement, Problem } from '@shared/features/programme/timetable/problem';
import { at, block, item, person, problem, put, room } from '../../unit/programme/build-problem';

/** Source of every expected value here: own instances, proven by exhaustive search. */

/**
 * All timetables of a problem, by trying every start on the grid for one item after the other. `hopeless` cuts
 * branches that can't become good enough: costs only grow with every item placed.
 */
function* timetables(
  given: Problem,
  hopeless: (placed: Placement[]) => boolean = () => false,
  placed: Placement[] = [],
): Generator<Placement[]> {
  const next = given.items[placed.length];
  if (!next) {
    yield placed;
    return;
  }
  const clashesAt = moveChecker(given, placed, next.id);
  for (const { day, start, end } of given.blocks) {
    for (let minute = start; minute + next.minutes <= end; minute += given.gridMinutes) {
      for (const { id } of given.rooms) {
        const to = { item: next.id, day, start: minute, room: id, minutes: next.minutes };
        const more = [...placed, to];
        if (!hopeless(more) && clashesAt(to).length === 0) yield* timetables(given, hopeless, more);
      }
    }
  }
}

function best(given: Problem, cost: (placements: Placement[]) => number): { optimum: number; ways: number } {
  let optimum = Infinity;
  let ways = 0;
  for (const timetable of timetables(given, (placed) => cost(placed) > optimum)) {
    const value = cost(timetable);
    if (value < optimum) [optimum, ways] = [value, 0];
    ways++;
  }
  return { optimum, ways };
}

const dislikes = (given: Problem, placements: Placement[]): number =>
  placements.reduce((sum, p) => {
    const half = p.start < at('13:00') ? 'am' : 'pm';
    const people = given.items.find((one) => one.id === p.item)?.persons ?? [];
    const wishes = given.persons.filter((one) => people.includes(one.id)).flatMap((one) => one.dislikes);
    return sum + wishes.filter((d) => d.day === p.day && d.half === half).reduce((s, d) => s + d.weight, 0);
  }, 0);

const talk = (id: string, who: string, minutes = 60) => item(id, { persons: [who], minutes });
const dislike = (day: number, half: 'am' | 'pm', weight: number) => ({ day, half, weight });

describe('one room, stays and dislikes', () => {
  const given = problem({
    days: 2,
    gridMinutes: 30,
    blocks: [
      block(0, '9:00', '10:30'),
      block(0, '11:00', '12:30'),
      block(1, '9:00', '10:30'),
      block(1, '14:00', '15:30'),
    ],
    rooms: [room('Aula', { features: ['blackboard'] })],
    persons: [
      person('Abel', { dislikes: [dislike(0, 'am', 3)] }),
      person('Bose', { arrival: { day: 0, minute: at('11:00') }, dislikes: [dislike(1, 'am', 2)] }),
      person('Cho', { departure: { day: 0, minute: at('24:00') } }),
      person('Diaz', { dislikes: [dislike(1, 'pm', 4), dislike(0, 'am', 1)] }),
      person('Ekman', { dislikes: [dislike(1, 'am', 2), dislike(1, 'pm', 1)] }),
      person('Faro', { dislikes: [dislike(0, 'am', 5), dislike(1, 'pm', 2)] }),
    ],
    items: [
      talk('T1', 'Abel'),
      talk('T2', 'Bose'),
      talk('T3', 'Cho'),
      talk('T4', 'Diaz', 30),
      talk('T5', 'Ekman'),
      talk('T6', 'Faro', 30),
    ],
  });
  it('has optimum 1, reached by 64 timetables', () => {
    expect(best(given, (placements) => dislikes(given, placements))).toEqual({ optimum: 1, ways: 64 });
  });
});

describe('a plenary talk, features, blocked hours, pairs of interest', () => {
  const given = problem({
    days: 1,
    gridMinutes: 45,
    blocks: [block(0, '9:00', '10:30'), block(0, '11:00', '12:30'), block(0, '14:00', '15:30')],
    rooms: [
      room('R1', { capacity: 80, features: ['blackboard', 'projector'] }),
      room('R2', { capacity: 30, features: ['blackboard'] }),
    ],
    persons: [
      person('Abel'),
      person('Bose', { blocked: [{ day: 0, start: at('14:00'), end: at('15:30') }] }),
      person('Cho'),
      person('Diaz', { dislikes: [dislike(0, 'am', 2)] }),
      person('Ekman'),
      person('Faro'),
      person('Gao', { arrival: { day: 0, minute: at('11:00') } }),
      person('Hoss'),
    ],
    items: [
      item('P', { kind: 'plenary', minutes: 45, persons: ['Abel'], audience: 70, features: ['projector'] }),
      talk('T1', 'Bose', 45),
      item('T2', { minutes: 45, persons: ['Cho'], features: ['projector'] }),
      talk('T3', 'Diaz', 45),
      talk('T4', 'Ekman', 45),
      talk('T5', 'Faro', 90),
      item('T6', { minutes: 45, persons: ['Gao'], audience: 50 }),
      talk('T7', 'Gao', 45),
      talk('T8', 'Hoss', 45),
    ],
  });
  const interest = [
    ['T5', 'T6', 5],
    ['T5', 'T7', 4],
    ['T5', 'T8', 3],
    ['T5', 'T1', 2],
    ['T1', 'T2', 3],
    ['T1', 'T4', 2],
    ['T2', 'T5', 4],
    ['T3', 'T5', 3],
    ['T4', 'T5', 1],
    ['T6', 'T3', 2],
    ['T4', 'T3', 2],
  ] as const;
  const blockOf = (p: Placement): string | undefined =>
    given.blocks.find((b) => b.start <= p.start && p.start < b.end)?.id;
  const cost = (placements: Placement[]): number => {
    const where = new Map(placements.map((p) => [p.item, p]));
    const parallel = interest.filter(([a, b]) => {
      const [p, q] = [where.get(a), where.get(b)];
      return p && q && blockOf(p) === blockOf(q) && p.room !== q.room;
    });
    return dislikes(given, placements) + parallel.reduce((sum, [, , weight]) => sum + weight, 0);
  };
  it('has optimum 1, reached by 160 timetables', () => {
    expect(best(given, cost)).toEqual({ optimum: 1, ways: 160 });
  });
});

describe('three people who all leave on the first day', () => {
  const all = problem({
    days: 3,
    gridMinutes: 30,
    blocks: [
      block(0, '9:00', '10:30'),
      block(0, '11:00', '12:30'),
      block(1, '9:00', '10:30'),
      block(1, '11:00', '12:30'),
      block(2, '9:00', '10:30'),
    ],
    rooms: [room('Aula')],
    persons: [
      person('Abel', { departure: { day: 0, minute: at('24:00') } }),
      person('Bose', { departure: { day: 0, minute: at('24:00') } }),
      person('Cho', { departure: { day: 0, minute: at('12:30') } }),
      person('Diaz'),
      person('Ekman', { arrival: { day: 1, minute: at('9:00') } }),
    ],
    items: [
      talk('T1', 'Abel'),
      talk('T2', 'Bose'),
      talk('T3', 'Cho'),
      talk('T4', 'Diaz'),
      talk('T5', 'Ekman'),
    ],
  });
  const free = (who: string): Problem => ({
    ...all,
    persons: all.persons.map((one) => (one.id === who ? { ...one, arrival: null, departure: null } : one)),
  });
  const feasible = (given: Problem): boolean => !timetables(given).next().done;
  it('has no timetable', () => expect(feasible(all)).toBe(false));
  it.each(['Abel', 'Bose', 'Cho'])('has one without presence:%s', (who) =>
    expect(feasible(free(who))).toBe(true),
  );
  it('has none without presence:Ekman only', () => expect(feasible(free('Ekman'))).toBe(false));
});

describe('two who arrive late, with a published programme', () => {
  const given = problem({
    days: 2,
    gridMinutes: 60,
    blocks: [block(0, '9:00', '11:00'), block(0, '14:00', '15:00'), block(1, '9:00', '11:00')],
    rooms: [room('Aula')],
    persons: [
      person('Abel', { arrival: { day: 1, minute: at('8:00') } }),
      person('Bose'),
      person('Cho', { blocked: [{ day: 0, start: at('9:00'), end: at('11:00') }] }),
      person('Diaz', { arrival: { day: 1, minute: at('8:00') } }),
    ],
    items: [talk('T1', 'Abel'), talk('T2', 'Bose'), talk('T3', 'Cho'), talk('T4', 'Diaz')],
  });
  const published = [
    put('T1', 0, '9:00', 'Aula'),
    put('T2', 0, '10:00', 'Aula'),
    put('T3', 1, '9:00', 'Aula'),
    put('T4', 1, '10:00', 'Aula'),
  ];
  it('clashes as published', () => {
    expect(checkAll(given, published).map((clash) => clash.rule)).toEqual(['presence:Abel']);
  });
  it('is repaired by two moves at cost 20, in one way', () => {
    const moved = (placements: Placement[]): number =>
      placements.filter((p, i) => p.day !== published[i]?.day || p.start !== published[i]?.start).length * 10;
    expect(best(given, moved)).toEqual({ optimum: 20, ways: 1 });
  });
});
