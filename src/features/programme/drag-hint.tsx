import { useSyncExternalStore } from 'react';
import { Sign } from '@/components/sign';

/**
 * What would follow if the dragged tile were dropped here. Kept outside React's state: it changes with every five
 * minutes that the mouse travels, and only this line must be drawn again.
 */
export interface Hint {
  where: string;
  /** Sentences of the clashes there; empty when it fits. */
  clashes: string[];
}

let hint: Hint | null = null;
const listeners = new Set<() => void>();

export function showHint(next: Hint | null): void {
  hint = next;
  for (const listener of listeners) listener();
}

const subscribe = (listener: () => void): (() => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

/**
 * The line under the calendar: what a drop here would do; otherwise what was done last. It keeps its height, because a
 * calendar that changes its size in the middle of a drag drops beside the mouse.
 */
export function StatusLine({ said }: { said: string }) {
  const now = useSyncExternalStore(subscribe, () => hint);
  return (
    <div className="status-line">
      <div className="drag-hint" aria-live="polite">
        {now && (
          <>
            <Sign kind={now.clashes.length > 0 ? 'must' : 'good'} />
            <p>
              <strong className="font-semibold">{now.where}</strong>{' '}
              {now.clashes.length === 0 ? (
                <span className="text-good">Fits.</span>
              ) : (
                now.clashes.slice(0, 2).join(' ')
              )}
              {now.clashes.length > 2 && ` And ${now.clashes.length - 2} more.`}
            </p>
          </>
        )}
      </div>
      {!now && <p aria-hidden="true">{said}</p>}
    </div>
  );
}
