import { talkKinds, talkStates } from '@shared/features/talks/talks.contract';
import { talkKindNames, talkStateNames } from '@shared/features/talks/talks.rules';
import type { TalkFilter } from './talks.queries';

const missing = ['abstract', 'answer', 'slides'] as const;
const one = <V extends string>(allowed: readonly V[], text: string | null): V | undefined =>
  allowed.find((value) => value === text);

/** The filter that an address holds; what is not known is left out. */
export function filterOf(params: URLSearchParams): TalkFilter {
  return {
    state: one(talkStates, params.get('state')),
    kind: one(talkKinds, params.get('kind')),
    missing: one(missing, params.get('missing')),
    q: params.get('q')?.slice(0, 100) || undefined,
  };
}

export const stateOptions = talkStates.map((value) => ({ value, label: talkStateNames[value] }));
export const kindOptions = talkKinds.map((value) => ({ value, label: talkKindNames[value] }));
export const missingOptions = [
  { value: 'abstract', label: 'No abstract' },
  { value: 'slides', label: 'No slides' },
  { value: 'answer', label: 'No answer yet' },
];
