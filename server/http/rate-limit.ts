import { Problem } from '@shared/http/problem';

interface Entry {
  failures: number;
  until: number;
  touched: number;
}

/**
 * Growing delays, never a lasting lock-out: after `free` failures each further one doubles the wait, up to
 * `maxSeconds`; an hour without failures forgets. Kept in memory: one process serves one database.
 */
export function growingDelay(options: { free: number; maxSeconds: number }) {
  const entries = new Map<string, Entry>();
  const forget = (now: number): void => {
    if (entries.size < 5000) return;
    for (const [key, entry] of entries) if (now - entry.touched > 3_600_000) entries.delete(key);
  };
  return {
    /** @throws 429 with `retryAfter` seconds while waiting. */
    check(keys: string[], now = Date.now()): void {
      const wait = Math.max(0, ...keys.map((key) => (entries.get(key)?.until ?? 0) - now));
      if (wait <= 0) return;
      const seconds = Math.ceil(wait / 1000);
      throw new Problem(429, 'too_many_tries', `Too many tries. Try again in ${seconds} s.`, undefined, {
        retryAfter: seconds,
      });
    },
    failed(keys: string[], now = Date.now()): void {
      forget(now);
      for (const key of keys) {
        const before = entries.get(key);
        const failures = before && now - before.touched < 3_600_000 ? before.failures + 1 : 1;
        const wait =
          failures <= options.free ? 0 : Math.min(options.maxSeconds, 2 ** (failures - options.free - 1));
        entries.set(key, { failures, until: now + wait * 1000, touched: now });
      }
    },
    succeeded(key: string): void {
      entries.delete(key);
    },
    reset(): void {
      entries.clear();
    },
  };
}
