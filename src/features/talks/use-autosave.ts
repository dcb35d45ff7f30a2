import { useCallback, useEffect, useRef, useState } from 'react';
import { Problem } from '@shared/http/problem';

export type SaveState = 'saved' | 'waiting' | 'saving' | 'failed' | 'stale';

interface Options<V> {
  initial: V;
  version: number;
  /** Returns the new version. */
  save: (value: V, version: number) => Promise<number>;
  /** What the server has now, asked after somebody else saved. */
  reload: () => Promise<{ value: V; version: number }>;
  delay?: number;
}

/**
 * Saves a while after the last change, one request at a time. A change by somebody else to other parts of the same
 * thing is no conflict; to the same parts it is, and then the writer chooses. What was typed is never replaced unasked.
 */
export function useAutosave<V>({ initial, version, save, reload, delay = 1200 }: Options<V>) {
  const [value, setValue] = useState(initial);
  const [state, setState] = useState<SaveState>('saved');
  const [savedAt, setSavedAt] = useState<Date>();
  const [error, setError] = useState<unknown>();
  const [theirs, setTheirs] = useState<V>();
  const work = useRef({
    value: initial,
    base: JSON.stringify(initial),
    version,
    busy: undefined as Promise<boolean> | undefined,
    timer: 0 as unknown as ReturnType<typeof setTimeout>,
  });
  const calls = useRef({ save, reload });
  useEffect(() => {
    calls.current = { save, reload };
  });

  const attempt = useCallback(async (): Promise<boolean> => {
    const job = work.current;
    const sent = job.value;
    if (JSON.stringify(sent) === job.base) {
      setState('saved');
      return true;
    }
    setState('saving');
    try {
      job.version = await saveOrRebase(job, sent, calls.current);
      job.base = JSON.stringify(sent);
      setSavedAt(new Date());
      setError(undefined);
      setState(JSON.stringify(job.value) === job.base ? 'saved' : 'waiting');
      return true;
    } catch (failure) {
      setError(failure);
      if (failure instanceof Stale) setTheirs(failure.theirs as V);
      setState(failure instanceof Stale ? 'stale' : 'failed');
      return false;
    }
  }, []);

  /** Saves now; true when everything is safe. */
  const flush = useCallback(async (): Promise<boolean> => {
    const job = work.current;
    clearTimeout(job.timer);
    if (job.busy) await job.busy;
    job.busy = attempt().finally(() => (job.busy = undefined));
    return job.busy;
  }, [attempt]);

  const change = useCallback(
    (next: V) => {
      const job = work.current;
      job.value = next;
      setValue(next);
      setState((now) => (now === 'stale' ? now : 'waiting'));
      clearTimeout(job.timer);
      job.timer = setTimeout(() => void flush(), delay);
    },
    [delay, flush],
  );

  /** After a conflict: keep what was typed here, or take what the other one saved. */
  const resolve = useCallback(
    async (choice: 'mine' | 'theirs') => {
      const fresh = await calls.current.reload();
      Object.assign(work.current, { version: fresh.version, base: JSON.stringify(fresh.value) });
      setTheirs(undefined);
      if (choice === 'mine') return void (await flush());
      work.current.value = fresh.value;
      setValue(fresh.value);
      setState('saved');
    },
    [flush],
  );

  useEffect(() => {
    const leaving = (event: BeforeUnloadEvent) =>
      JSON.stringify(work.current.value) !== work.current.base && event.preventDefault();
    const job = work.current;
    addEventListener('beforeunload', leaving);
    return () => {
      removeEventListener('beforeunload', leaving);
      clearTimeout(job.timer);
      if (JSON.stringify(job.value) !== job.base) void flush();
    };
  }, [flush]);

  // What arrived after this began (saved when the page before was left) is taken over while nothing is typed here.
  useEffect(() => {
    const job = work.current;
    if (version <= job.version || job.busy || JSON.stringify(job.value) !== job.base) return;
    Object.assign(job, { value: initial, base: JSON.stringify(initial), version });
    setValue(initial);
  }, [initial, version]);

  /** After another operation on the same thing has raised its version. */
  const setVersion = useCallback((next: number) => void (work.current.version = next), []);
  return { value, change, state, savedAt, error, theirs, flush, resolve, setVersion };
}

class Stale extends Error {
  constructor(readonly theirs: unknown) {
    super('stale');
  }
}

async function saveOrRebase<V>(
  job: { base: string; version: number },
  value: V,
  calls: Pick<Options<V>, 'save' | 'reload'>,
): Promise<number> {
  try {
    return await calls.save(value, job.version);
  } catch (failure) {
    if (!(failure instanceof Problem) || failure.status !== 412) throw failure;
    const fresh = await calls.reload();
    if (withoutEdges(fresh.value) !== withoutEdges(JSON.parse(job.base))) throw new Stale(fresh.value);
    return calls.save(value, fresh.version);
  }
}

/** The server trims lines: spaces at the ends are no change by somebody else. */
const withoutEdges = (value: unknown): string =>
  JSON.stringify(value, (_key, part: unknown) => (typeof part === 'string' ? part.trim() : part));
