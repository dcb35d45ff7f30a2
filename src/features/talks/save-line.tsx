import { Button } from '@/components/button';
import { Note } from '@/components/states';
import { sentenceOf } from '@/lib/problem';
import type { SaveState } from './use-autosave';

const clock = (at: Date): string => `${at.getHours()}:${String(at.getMinutes()).padStart(2, '0')}`;

/** Says when the text was saved. Errors are announced at once, the rest quietly. */
export function SaveLine({
  state,
  savedAt,
  error,
  onRetry,
  what = 'Draft',
}: {
  state: SaveState;
  savedAt: Date | undefined;
  error: unknown;
  onRetry: () => void;
  what?: string;
}) {
  if (state === 'failed') {
    return (
      <span role="alert" className="text-dense font-semibold text-alarm">
        Not saved: {sentenceOf(error)}{' '}
        <Button variant="link" onClick={onRetry}>
          Save again
        </Button>
      </span>
    );
  }
  const words = {
    waiting: 'Not saved yet',
    saving: 'Saving …',
    stale: 'Not saved',
    saved: savedAt ? `${what} saved ${clock(savedAt)}` : '',
  }[state];
  return (
    <span role="status" className="text-dense text-ink3 empty:sr-only">
      {words}
    </span>
  );
}

/** Both versions are kept until the writer chooses. */
export function StaleNote({
  what,
  onMine,
  onTheirs,
}: {
  what: string;
  onMine: () => void;
  onTheirs: () => void;
}) {
  return (
    <div role="alert">
      <Note kind="must">
        <b className="font-semibold">Somebody else has saved {what} meanwhile.</b> Yours is still here and is
        not saved.
        <div className="mt-2 flex flex-wrap gap-2">
          <Button onClick={onMine}>Keep mine</Button>
          <Button onClick={onTheirs}>Take theirs</Button>
        </div>
      </Note>
    </div>
  );
}
