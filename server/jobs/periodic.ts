import type { Periodic } from './schedule';

/** Everything that runs by the clock: one line per job. */
export const periodic: readonly Periodic[] = [];
