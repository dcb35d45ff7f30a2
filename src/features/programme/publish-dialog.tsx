import { useQuery } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { count } from '@shared/lib/text';
import { formatInstant } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Input } from '@/components/field';
import { Note, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { ChangesTable } from './changes-table';
import { draftComparisonOf, usePublish } from './programme.queries';
import type { Composer } from './use-composer';

/** What goes public and who is told. While clashes are left, the safe action has the focus. */
export function PublishDialog({ composer, onClose }: { composer: Composer; onClose: () => void }) {
  const { draft, clashes } = composer;
  const { slug, timeZone } = draft.event;
  const number = (draft.revision?.number ?? 0) + 1;
  const comparison = useQuery(draftComparisonOf(slug, draft.version));
  const publish = usePublish(slug);
  const [note, setNote] = useState('');
  const settleFirst = useRef<HTMLButtonElement>(null);
  const changes = comparison.data?.changes.length ?? 0;

  const settle = (): void => {
    onClose();
    composer.choose(clashes[0]?.items.at(-1) ?? null);
    document.getElementById('clash-head')?.focus();
  };
  const goPublic = (): void =>
    publish.mutate(
      { version: draft.version, note, withClashes: clashes.length > 0 },
      {
        onSuccess: (revision) => {
          toast(`Revision ${revision.number} is public, with ${count(revision.talks, 'talk')}.`);
          onClose();
        },
        onError: sayFailure,
      },
    );
  const since = draft.revision
    ? `${count(changes, 'change')} since revision ${draft.revision.number} of ${formatInstant(draft.revision.publishedAt, timeZone, false)}`
    : 'The first one';

  return (
    <Dialog
      open
      onClose={onClose}
      title={`Publish revision ${number}`}
      aside={since}
      width={700}
      focusFirst={clashes.length > 0 ? settleFirst : undefined}
    >
      <QueryView query={comparison} what="the changes">
        {(data) => (
          <ChangesTable
            comparison={data}
            from={data.from === null ? 'Before' : `Revision ${data.from}`}
            to={`Revision ${number}`}
          />
        )}
      </QueryView>
      {clashes.length > 0 && (
        <div className="mt-3">
          <Note kind="must">
            <strong className="font-semibold">
              {count(clashes.length, 'clash', 'clashes')} would go public:
            </strong>{' '}
            {[...new Set(clashes.map((clash) => clash.title.replace(/\.$/, '')))].slice(0, 4).join('; ')}.
          </Note>
        </div>
      )}
      <div className="my-4 grid gap-4 text-dense sm:grid-cols-2">
        <div>
          <h3 className="font-semibold">Who is told, at once by e-mail</h3>
          <p className="mt-1">
            {count(comparison.data?.people ?? 0, 'speaker, chair or tutor', 'speakers, chairs and tutors')}{' '}
            whose talks are placed, moved or taken off. Nobody else.
          </p>
        </div>
        <div>
          <h3 className="font-semibold">What changes by itself</h3>
          <p className="mt-1">
            The public page and subscribed calendars.
            {draft.revision && ` Revision ${draft.revision.number} stays readable under its number.`}
          </p>
        </div>
      </div>
      <Input
        dense
        label="Note for the team"
        optional
        value={note}
        maxLength={500}
        onChange={(event) => setNote(event.target.value)}
      />
      <div className="mt-4 flex flex-wrap gap-2.5">
        {clashes.length > 0 && (
          <Button ref={settleFirst} variant="primary" onClick={settle}>
            Settle the {count(clashes.length, 'clash', 'clashes')} first
          </Button>
        )}
        <Button
          variant={clashes.length > 0 ? 'secondary' : 'primary'}
          busy={publish.isPending || composer.saving}
          disabled={comparison.isPending || changes === 0}
          onClick={goPublic}
        >
          {clashes.length > 0 ? 'Publish all the same' : `Publish revision ${number}`}
        </Button>
        <Button variant="link" onClick={onClose}>
          Leave it as a draft
        </Button>
      </div>
    </Dialog>
  );
}
