import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { applyChanges, inverseOf } from '@/features/programme/draft-changes';
import { columnsOf, fromStandIn, toStandIn, weeksOf } from '@/features/programme/calendar-columns';
import type { DraftChange, DraftPlacement } from '@shared/features/programme/programme.contract';
import { block, problem, put } from './build-problem';

const talks = ['a', 'b', 'c', 'd'];
const spot = fc.record({
  roomId: fc.constantFrom('Hall', 'Ivar'),
  day: fc.constantFrom('2026-07-06', '2026-07-07'),
  startMinute: fc.integer({ min: 100, max: 200 }).map((n) => n * 5),
  minutes: fc.constantFrom(20, 50),
});
const drafts: fc.Arbitrary<DraftPlacement[]> = fc
  .tuple(
    ...talks.map((talkId) =>
      fc.option(
        fc
          .record({ talkId: fc.constant(talkId), fixed: fc.boolean() })
          .chain((head) => spot.map((at) => ({ ...head, ...at }))),
      ),
    ),
  )
  .map((list) => list.filter((one) => one !== null));
const changes: fc.Arbitrary<DraftChange[]> = fc
  .subarray(talks, { minLength: 1 })
  .chain((ids) =>
    fc.tuple(
      ...ids.map((talkId) =>
        fc.record({ talkId: fc.constant(talkId), to: fc.option(spot), fixed: fc.boolean() }),
      ),
    ),
  );

const sorted = (list: DraftPlacement[]) => [...list].sort((a, b) => a.talkId.localeCompare(b.talkId));

describe('undoing', () => {
  it('brings back exactly what was, for any changes of any draft', () => {
    fc.assert(
      fc.property(drafts, changes, (draft, wanted) => {
        const after = applyChanges(draft, wanted);
        expect(sorted(applyChanges(after, inverseOf(draft, wanted)))).toEqual(sorted(draft));
      }),
    );
  });
  it('leaves fixed what was fixed when a change does not speak of it', () => {
    const draft: DraftPlacement[] = [
      { talkId: 'a', roomId: 'Hall', day: '2026-07-06', startMinute: 540, minutes: 50, fixed: true },
    ];
    const [after] = applyChanges(draft, [
      { talkId: 'a', to: { roomId: 'Hall', day: '2026-07-06', startMinute: 540, minutes: 60 } },
    ]);
    expect(after).toMatchObject({ minutes: 60, fixed: true });
  });
});

describe('columns of a week', () => {
  /** Two weeks from Mon 6 July 2026. */
  const given = problem({
    days: 12,
    blocks: [0, 1, 2, 3, 4, 7, 8].map((day) => block(day, '9:00', '12:00')),
  });
  it('gives weeks from Monday, weekends only where something stands', () => {
    expect(weeksOf(given, new Set([0, 1, 5]))).toEqual([
      [0, 1, 2, 3, 4, 5],
      [7, 8, 9, 10, 11],
    ]);
  });
  it('gives the lens day a lane per room', () => {
    expect(columnsOf(given, [0, 1, 2], 1).map(({ day, room }) => [day, room])).toEqual([
      [0, null],
      [1, 'Hall'],
      [1, 'Ivar'],
      [2, null],
    ]);
  });
  it('takes every placement there and back', () => {
    const columns = columnsOf(given, [0, 1, 2, 3, 4], 3);
    for (const at of [
      put('A', 0, '9:00'),
      put('A', 3, '11:25', 'Hall', 50),
      put('A', 3, '11:25', 'Ivar'),
      put('A', 4, '17:30'),
    ]) {
      const span = toStandIn(columns, at);
      const found = fromStandIn(columns, new Date(span?.start ?? ''));
      expect([found?.column.day, found?.start]).toEqual([at.day, at.start]);
      expect([null, at.room]).toContain(found?.column.room);
    }
    expect(toStandIn(columns, put('A', 9, '9:00'))).toBeUndefined();
  });
});
