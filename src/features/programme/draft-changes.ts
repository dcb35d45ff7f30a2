import type { DraftChange, DraftPlacement } from '@shared/features/programme/programme.contract';
import { fromTimetable } from '@shared/features/programme/programme.rules';
import type { Move } from '@shared/features/programme/timetable/problem';

/** The placements as they are when some changes have been made. */
export function applyChanges(
  placements: readonly DraftPlacement[],
  changes: readonly DraftChange[],
): DraftPlacement[] {
  const byTalk = new Map(placements.map((one) => [one.talkId, one]));
  for (const { talkId, to, fixed } of changes) {
    const before = byTalk.get(talkId);
    if (to) byTalk.set(talkId, { talkId, ...to, fixed: fixed ?? before?.fixed ?? false });
    else byTalk.delete(talkId);
  }
  return [...byTalk.values()];
}

/** The changes that take others back. `fixed` is always said, so that undoing releases and fixes as it was. */
export function inverseOf(
  placements: readonly DraftPlacement[],
  changes: readonly DraftChange[],
): DraftChange[] {
  const byTalk = new Map(placements.map((one) => [one.talkId, one]));
  return changes.map(({ talkId }) => {
    const before = byTalk.get(talkId);
    if (!before) return { talkId, to: null, fixed: false };
    const { roomId, day, startMinute, minutes, fixed } = before;
    return { talkId, to: { roomId, day, startMinute, minutes }, fixed };
  });
}

/** Moves of the timetable as changes of the draft. */
export function changesOf(moves: readonly Move[], startsOn: string): DraftChange[] {
  return moves.map(({ item, to }) => {
    if (!to) return { talkId: item, to: null };
    const { roomId, day, startMinute, minutes } = fromTimetable(to, startsOn);
    return { talkId: item, to: { roomId, day, startMinute, minutes } };
  });
}
