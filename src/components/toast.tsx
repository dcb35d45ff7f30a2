import { useSyncExternalStore } from 'react';

export interface Toast {
  id: number;
  text: string;
  kind: 'done' | 'wrong';
  undo?: () => void;
}

let toasts: Toast[] = [];
const listeners = new Set<() => void>();
let serial = 0;

function publish(next: Toast[]): void {
  toasts = next;
  for (const listener of listeners) listener();
}

/** Says what happened, for six seconds (twelve when it can be undone or went wrong). */
export function toast(text: string, options: { kind?: Toast['kind']; undo?: () => void } = {}): void {
  const id = ++serial;
  const kind = options.kind ?? 'done';
  publish([...toasts.slice(-2), { id, text, kind, undo: options.undo }]);
  setTimeout(() => dismiss(id), options.undo || kind === 'wrong' ? 12_000 : 6_000);
}

export const dismiss = (id: number): void => publish(toasts.filter((entry) => entry.id !== id));

const subscribe = (listener: () => void): (() => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

/** Where toasts appear; once, in the providers. */
export function Toaster() {
  const shown = useSyncExternalStore(subscribe, () => toasts);
  return (
    <div className="no-print pointer-events-none fixed right-4 bottom-4 z-50 flex w-[min(380px,calc(100vw-32px))] flex-col gap-2">
      <div aria-live="polite" className="contents">
        {shown
          .filter((entry) => entry.kind === 'done')
          .map((entry) => (
            <Line key={entry.id} entry={entry} />
          ))}
      </div>
      <div aria-live="assertive" className="contents">
        {shown
          .filter((entry) => entry.kind === 'wrong')
          .map((entry) => (
            <Line key={entry.id} entry={entry} />
          ))}
      </div>
    </div>
  );
}

function Line({ entry }: { entry: Toast }) {
  return (
    <div
      className={`pointer-events-auto flex items-start gap-3 border-[1.75px] border-ink bg-sheet px-3 py-2 shadow-float ${entry.kind === 'wrong' ? 'text-alarm' : ''}`}
    >
      <span className="grow">{entry.text}</span>
      {entry.undo && (
        <button
          type="button"
          className="min-h-[24px] font-semibold text-act underline"
          onClick={() => {
            entry.undo?.();
            dismiss(entry.id);
          }}
        >
          Undo
        </button>
      )}
      <button
        type="button"
        aria-label="Close this message"
        className="min-h-[24px] min-w-[24px] text-ink3"
        onClick={() => dismiss(entry.id)}
      >
        ×
      </button>
    </div>
  );
}
