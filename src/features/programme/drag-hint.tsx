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

export function DragHint() {
  const now = useSyncExternalStore(subscribe, () => hint);
  return (
    <div aria-live="polite" className="drag-hint" hidden={now === null}>
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
  );
}
