import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useEffect, useMemo, useRef, useState } from 'react';
import { changeDraft, type Draft, type DraftChange } from '@shared/features/programme/programme.contract';
import { Problem } from '@shared/http/problem';
import { toast } from '@/components/toast';
import { call } from '@/lib/api';
import { sentenceOf } from '@/lib/problem';
import { applyChanges, inverseOf } from './draft-changes';
import { draftOf } from './programme.queries';

/** A step that can be undone. */
interface Step {
  what: string;
  forward: DraftChange[];
  back: DraftChange[];
}

const staleWords =
  'Somebody else changed the programme meanwhile. Your last move was not kept; this is the newest state.';

/**
 * The draft as it is shown: what the server has, with the moves that are still on their way to it. Moves are sent one
 * after the other, each with the version that the one before brought. When one fails, all that wait go back.
 */
export function useDraftSaving(event: string, draft: Draft) {
  const client = useQueryClient();
  const { queryKey } = draftOf(event);
  const [waiting, setWaiting] = useState<DraftChange[][]>([]);
  const [undoable, setUndoable] = useState<Step[]>([]);
  const [redoable, setRedoable] = useState<Step[]>([]);
  const sending = useRef(false);

  const placements = useMemo(
    () => waiting.reduce<Draft['placements']>((now, changes) => applyChanges(now, changes), draft.placements),
    [waiting, draft.placements],
  );

  const giveUp = useCallback(
    (error: unknown) => {
      const isStale = error instanceof Problem && error.status === 412;
      setWaiting([]);
      setUndoable([]);
      setRedoable([]);
      toast(isStale ? staleWords : `Not saved. ${sentenceOf(error)}`, { kind: 'wrong' });
      return client.invalidateQueries({ queryKey });
    },
    [client, queryKey],
  );

  useEffect(() => {
    const next = waiting[0];
    if (!next || sending.current) return;
    sending.current = true;
    const version = client.getQueryData<Draft>(queryKey)?.version ?? draft.version;
    call(changeDraft, { params: { event }, version, body: { changes: next } })
      .then((answer) => {
        client.setQueryData<Draft>(queryKey, (old) => old && { ...old, ...answer });
        setWaiting((list) => list.slice(1));
      })
      .catch(giveUp)
      .finally(() => {
        sending.current = false;
        setWaiting((list) => [...list]); // look again for the next one
      });
  }, [waiting, client, queryKey, draft.version, event, giveUp]);

  const send = (changes: DraftChange[]): void => setWaiting((list) => [...list, changes]);

  const change = (what: string, wanted: DraftChange[]): void => {
    const fixed = new Map(placements.map((one) => [one.talkId, one.fixed]));
    // Said every time, so that doing it again after undoing leaves fixed what was fixed.
    const forward = wanted.map((one) => ({ ...one, fixed: one.fixed ?? fixed.get(one.talkId) ?? false }));
    setUndoable((steps) => [...steps.slice(-99), { what, forward, back: inverseOf(placements, forward) }]);
    setRedoable([]);
    send(forward);
  };

  const undo = (): string | null => {
    const step = undoable.at(-1);
    if (!step) return null;
    setUndoable((steps) => steps.slice(0, -1));
    setRedoable((steps) => [...steps, step]);
    send(step.back);
    return step.what;
  };

  const redo = (): string | null => {
    const step = redoable.at(-1);
    if (!step) return null;
    setRedoable((steps) => steps.slice(0, -1));
    setUndoable((steps) => [...steps, step]);
    send(step.forward);
    return step.what;
  };

  return {
    placements,
    saving: waiting.length > 0,
    change,
    undo,
    redo,
    canUndo: undoable.at(-1)?.what ?? null,
    canRedo: redoable.at(-1)?.what ?? null,
  };
}
