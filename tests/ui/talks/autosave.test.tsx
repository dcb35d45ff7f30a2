import { act, renderHook } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { Problem } from '@shared/http/problem';
import { useAutosave } from '@/features/talks/use-autosave';

interface Text {
  text: string;
}
const stale = () => new Problem(412, 'stale', 'Somebody else has saved meanwhile.');

/** A server with one versioned text, and what it was asked. */
function server(text: string) {
  const state = { value: { text }, version: 1, saves: [] as string[] };
  return {
    state,
    otherSaves: (value: Text) => Object.assign(state, { value, version: state.version + 1 }),
    save: vi.fn(async (value: Text, version: number) => {
      if (version !== state.version) throw stale();
      state.saves.push(value.text);
      Object.assign(state, { value, version: state.version + 1 });
      return state.version;
    }),
    reload: vi.fn(async () => ({ value: state.value, version: state.version })),
  };
}

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());
const pass = (ms: number) => act(() => vi.advanceTimersByTimeAsync(ms));

function start(there: ReturnType<typeof server>) {
  return renderHook(() =>
    useAutosave<Text>({
      initial: there.state.value,
      version: there.state.version,
      save: there.save,
      reload: there.reload,
      delay: 1000,
    }),
  );
}

describe('useAutosave', () => {
  it('saves the last of several changes, once, and says when', async () => {
    const there = server('a');
    const { result } = start(there);
    for (const text of ['ab', 'abc', 'abcd']) act(() => result.current.change({ text }));
    expect(result.current.state).toBe('waiting');
    await pass(999);
    expect(there.save).not.toHaveBeenCalled();
    await pass(1);
    expect(there.state.saves).toEqual(['abcd']);
    expect(result.current.state).toBe('saved');
    expect(result.current.savedAt).toBeInstanceOf(Date);
  });

  it('sends one request at a time, and what was typed meanwhile after it', async () => {
    const there = server('a');
    let arrive = (): void => undefined;
    there.save.mockImplementationOnce(async (value, version) => {
      await new Promise<void>((resolve) => (arrive = resolve));
      there.state.saves.push(value.text);
      there.state.version = version + 1;
      return version + 1;
    });
    const { result } = start(there);
    act(() => result.current.change({ text: 'first' }));
    await pass(1000);
    act(() => result.current.change({ text: 'second' }));
    await pass(5000);
    expect(there.save).toHaveBeenCalledTimes(1);
    arrive();
    await pass(1);
    expect(there.state.saves).toEqual(['first', 'second']);
    expect(result.current.state).toBe('saved');
  });

  it('keeps what was typed when the network is gone, and saves it when asked again', async () => {
    const there = server('a');
    there.save.mockRejectedValueOnce(new Problem(0, 'unreachable', 'The server could not be reached.'));
    const { result } = start(there);
    act(() => result.current.change({ text: 'typed' }));
    await pass(1000);
    expect(result.current).toMatchObject({ state: 'failed', value: { text: 'typed' } });
    await act(() => result.current.flush());
    expect(there.state.saves).toEqual(['typed']);
    expect(result.current.state).toBe('saved');
  });

  it('takes a new version in its stride when the text is still as it was', async () => {
    const there = server('a');
    const { result } = start(there);
    there.otherSaves({ text: 'a ' });
    act(() => result.current.change({ text: 'mine' }));
    await pass(1000);
    expect(result.current.state).toBe('saved');
    expect(there.state.value.text).toBe('mine');
  });

  it.each(['mine', 'theirs'] as const)(
    'asks when somebody else changed the same text: %s',
    async (choice) => {
      const there = server('a');
      const { result } = start(there);
      there.otherSaves({ text: 'theirs' });
      act(() => result.current.change({ text: 'mine' }));
      await pass(1000);
      expect(result.current).toMatchObject({
        state: 'stale',
        value: { text: 'mine' },
        theirs: { text: 'theirs' },
      });
      expect(there.state.value.text).toBe('theirs');
      await act(() => result.current.resolve(choice));
      expect(result.current).toMatchObject({ state: 'saved', value: { text: choice } });
      expect(there.state.value.text).toBe(choice);
    },
  );

  it('takes over what arrives later while nothing is typed, and never over what is', async () => {
    const there = server('a');
    const { result, rerender } = renderHook(
      ({ value, version }: { value: Text; version: number }) =>
        useAutosave<Text>({ initial: value, version, save: there.save, reload: there.reload, delay: 1000 }),
      { initialProps: { value: { text: 'a' }, version: 1 } },
    );
    there.otherSaves({ text: 'from before' });
    rerender({ value: { text: 'from before' }, version: 2 });
    expect(result.current.value.text).toBe('from before');
    act(() => result.current.change({ text: 'typed' }));
    rerender({ value: { text: 'something else' }, version: 9 });
    expect(result.current.value.text).toBe('typed');
    await pass(1000);
    expect(there.state.value.text).toBe('typed');
  });

  it('saves what is left when the page is left', async () => {
    const there = server('a');
    const { result, unmount } = start(there);
    act(() => result.current.change({ text: 'last words' }));
    unmount();
    await pass(0);
    expect(there.state.saves).toEqual(['last words']);
  });
});
