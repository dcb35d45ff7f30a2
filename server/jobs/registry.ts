import type { Reaction } from './job';

/** The one table that binds facts to reactions: one line per reaction list. */
export const reactions: readonly Reaction[] = [] as unknown as Reaction[];
