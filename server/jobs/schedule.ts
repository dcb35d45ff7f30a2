import { log } from '../http/request-log';

/** Work that comes round by the clock. Each must be idempotent: it may also run right after a start. */
export interface Periodic {
  name: string;
  everySeconds: number;
  run(now: Date): Promise<unknown>;
}

/** Runs each when its interval has passed; called by the worker's loop. */
export function scheduler(periodic: readonly Periodic[]): (now: Date) => Promise<void> {
  const lastRun = new Map<string, number>();
  return async (now) => {
    for (const job of periodic) {
      if (now.getTime() - (lastRun.get(job.name) ?? 0) < job.everySeconds * 1000) continue;
      lastRun.set(job.name, now.getTime());
      await job
        .run(now)
        .catch((error: unknown) => log.error({ err: error, job: job.name }, 'periodic job failed'));
    }
  };
}
