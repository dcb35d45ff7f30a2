import type { TalkKind, TalkState } from './talks.contract';

export const talkKindNames: Record<TalkKind, string> = {
  plenary: 'Plenary talk',
  invited: 'Invited talk',
  contributed: 'Contributed talk',
  course_lecture: 'Course lecture',
  exercise: 'Exercise session',
  poster: 'Poster session',
  discussion: 'Discussion',
  social: 'Social',
};

export const talkStateNames: Record<TalkState, string> = {
  draft: 'Draft',
  submitted: 'Submitted',
  accepted: 'Accepted',
  declined: 'Declined',
  withdrawn: 'Withdrawn',
};

/** Usual length and question time in minutes (common practice). */
export const usualMinutes: Record<TalkKind, { minutes: number; questionMinutes: number }> = {
  plenary: { minutes: 60, questionMinutes: 10 },
  invited: { minutes: 50, questionMinutes: 5 },
  contributed: { minutes: 25, questionMinutes: 5 },
  course_lecture: { minutes: 60, questionMinutes: 5 },
  exercise: { minutes: 90, questionMinutes: 0 },
  poster: { minutes: 60, questionMinutes: 0 },
  discussion: { minutes: 60, questionMinutes: 0 },
  social: { minutes: 60, questionMinutes: 0 },
};

const STEPS: Record<TalkState, readonly TalkState[]> = {
  draft: ['submitted', 'accepted', 'declined', 'withdrawn'],
  submitted: ['accepted', 'declined', 'withdrawn'],
  accepted: ['withdrawn', 'declined'],
  declined: ['accepted'],
  withdrawn: [],
};

/** Why a talk can't go from one state to another, in a sentence; undefined when it can. */
export function stepRefusal(from: TalkState, to: TalkState): string | undefined {
  if (STEPS[from].includes(to)) return undefined;
  if (from === to) return `The talk is ${from} already.`;
  return `A ${from} talk can’t become ${to}.`;
}

/** Kinds that come with an abstract that somebody owes. */
export const owesAbstract = (kind: TalkKind): boolean =>
  ['plenary', 'invited', 'contributed', 'course_lecture'].includes(kind);

/** Kinds that need nobody in front. */
export const needsSpeaker = (kind: TalkKind): boolean =>
  kind !== 'social' && kind !== 'discussion' && kind !== 'poster';

/**
 * A pair that closes a circle among prerequisites (before -> after), or undefined when there is none.
 * Depth-first search; `pairs` are ids.
 */
export function prerequisiteCircle(
  pairs: readonly { before: string; after: string }[],
): { before: string; after: string } | undefined {
  const next = new Map<string, string[]>();
  for (const { before, after } of pairs) next.set(before, [...(next.get(before) ?? []), after]);
  const state = new Map<string, 'open' | 'done'>();
  const visit = (node: string): { before: string; after: string } | undefined => {
    state.set(node, 'open');
    for (const after of next.get(node) ?? []) {
      if (state.get(after) === 'open') return { before: node, after };
      if (!state.has(after)) {
        const found = visit(after);
        if (found) return found;
      }
    }
    state.set(node, 'done');
    return undefined;
  };
  for (const node of next.keys()) {
    const found = state.has(node) ? undefined : visit(node);
    if (found) return found;
  }
  return undefined;
}

/** Field errors of a travel window (local date-times). */
export function presenceErrors(presence: {
  arrivesAt: string | null;
  leavesAt: string | null;
  blocked: readonly { from: string; to: string }[];
}): Record<string, string> {
  const errors: Record<string, string> = {};
  if (presence.arrivesAt && presence.leavesAt && presence.leavesAt <= presence.arrivesAt)
    errors.leavesAt = 'You leave before you arrive.';
  presence.blocked.forEach((window, index) => {
    if (window.to <= window.from) errors[`blocked.${index}.to`] = 'The end is not after the start.';
  });
  return errors;
}
