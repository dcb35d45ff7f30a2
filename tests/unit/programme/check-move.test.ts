import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkAll, checkMove } from '@shared/features/programme/timetable/check';
import { clashKey, newClashes } from '@shared/features/programme/timetable/clash';
import { applyMoves, type Placement, type Problem } from '@shared/features/programme/timetable/problem';
import { remediesFor } from '@shared/features/programme/timetable/remedies';
import { item, person, problem, room } from './build-problem';

const ids = Array.from({ length: 12 }, (_, i) => `i${i}`);
const rooms = ['Hall', 'Ivar', 'Vey'];

const placementOf = (id: string): fc.Arbitrary<Placement> =>
  fc.record({
    item: fc.constant(id),
    day: fc.integer({ min: 0, max: 2 }),
    start: fc.integer({ min: 8 * 12, max: 17 * 12 }).map((slot) => slot * 5),
    room: fc.constantFrom(...rooms),
    minutes: fc.constantFrom(20, 50, 90),
  });

/** Lectures of two courses, exercises, prerequisites, a plenary, short stays, a closed room: every rule can break. */
const problems: fc.Arbitrary<Problem> = fc
  .record({
    persons: fc.array(fc.subarray(['p0', 'p1', 'p2', 'p3'], { maxLength: 2 }), {
      minLength: 12,
      maxLength: 12,
    }),
    audience: fc.array(fc.integer({ min: 1, max: 80 }), { minLength: 12, maxLength: 12 }),
    nights: fc.integer({ min: 0, max: 2 }),
    perDay: fc.integer({ min: 1, max: 3 }),
    pairs: fc.array(fc.tuple(fc.constantFrom(...ids), fc.constantFrom(...ids)), { maxLength: 4 }),
  })
  .map(({ persons, audience, nights, perDay, pairs }) =>
    problem({
      rooms: [
        room('Hall', { capacity: 100, features: ['projector'] }),
        room('Ivar', { capacity: 50 }),
        room('Vey', { capacity: 30, closed: [{ day: 1, start: 600, end: 720 }] }),
      ],
      persons: [
        person('p0'),
        person('p1', { arrival: { day: 1, minute: 600 } }),
        person('p2', { departure: { day: 1, minute: 900 } }),
        person('p3', { blocked: [{ day: 0, start: 600, end: 660 }] }),
      ],
      courses: [
        { id: 'A', label: 'Course A', minNights: nights, maxPerDay: perDay },
        { id: 'B', label: 'Course B', minNights: 0, maxPerDay: 1 },
      ],
      items: ids.map((id, i) =>
        item(id, {
          persons: persons[i] ?? [],
          audience: audience[i] ?? 1,
          kind: i === 11 ? 'plenary' : i < 7 ? 'lecture' : i < 9 ? 'exercise' : 'talk',
          course: i < 4 ? 'A' : i < 7 ? 'B' : null,
          number: i < 4 ? i + 1 : i < 7 ? i - 3 : null,
          exerciseOf: i === 7 ? 'i0' : i === 8 ? 'i4' : null,
          features: i === 9 ? ['projector'] : [],
          pinned: i === 10 ? { day: 0, start: 540, room: 'Hall' } : null,
        }),
      ),
      prerequisites: pairs.filter(([a, b]) => a !== b).map(([before, after]) => ({ before, after })),
    }),
  );

const timetables = fc
  .tuple(...ids.map((id) => fc.option(placementOf(id), { freq: 4 })))
  .map((list) => list.filter((p) => p !== null));
const keys = (clashes: { rule: string; items: string[] }[]): string[] =>
  clashes.map((clash) => clashKey(clash as never)).sort();

describe('checkMove', () => {
  it('says the same as checkAll about the item that moves', () => {
    let seen = 0;
    fc.assert(
      fc.property(
        problems,
        timetables,
        fc.constantFrom(...ids).chain((id) => placementOf(id)),
        (given, placements, to) => {
          const after = applyMoves(placements, [{ item: to.item, to }]);
          const wanted = checkAll(given, after).filter((clash) => clash.items.includes(to.item));
          seen += wanted.length;
          expect(keys(checkMove(given, placements, to.item, to))).toEqual(keys(wanted));
        },
      ),
      { numRuns: 400 },
    );
    expect(seen).toBeGreaterThan(400);
  });

  it('gives every clash an identity of its own', () => {
    fc.assert(
      fc.property(problems, timetables, (given, placements) => {
        const all = keys(checkAll(given, placements));
        const prerequisitesTwice =
          new Set(given.prerequisites.map((p) => `${p.before}>${p.after}`)).size < given.prerequisites.length;
        if (!prerequisitesTwice) expect(new Set(all).size).toBe(all.length);
      }),
    );
  });
});

describe('remediesFor', () => {
  it('offers only what settles the clash and makes no other, judged by the whole timetable', () => {
    let offered = 0;
    fc.assert(
      fc.property(problems, timetables, (given, placements) => {
        const before = checkAll(given, placements);
        for (const clash of before.slice(0, 3)) {
          for (const remedy of remediesFor(given, placements, clash)) {
            offered++;
            const after = checkAll(given, applyMoves(placements, remedy.moves));
            expect(keys(after)).not.toContain(clashKey(clash));
            expect(newClashes(before, after)).toEqual([]);
          }
        }
      }),
      { numRuns: 60 },
    );
    expect(offered).toBeGreaterThan(100);
  });
});
