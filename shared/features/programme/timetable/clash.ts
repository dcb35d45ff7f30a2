/** A broken hard rule. */
export interface Clash {
  /** The rule's id: `roomOnce`, `presence:<person>`, `prereq:<a>><b>` ... */
  rule: string;
  /** The items that break it together, those earlier in the rule's sense first. */
  items: string[];
  /** What is wrong in a few words, the beginning of the sentence. */
  title: string;
  /** The whole of it for people. */
  sentence: string;
}

/** The identity of a clash: the same rule broken by the same items. */
export const clashKey = (clash: Clash): string => `${clash.rule} ${clash.items.join(' ')}`;

/** Clashes of `after` that were not in `before`, by identity. */
export function newClashes(before: readonly Clash[], after: readonly Clash[]): Clash[] {
  const known = new Set(before.map(clashKey));
  return after.filter((clash) => !known.has(clashKey(clash)));
}
