import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Draft } from '@shared/features/programme/programme.contract';
import { count } from '@shared/lib/text';
import { formatInstant } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Select } from '@/components/field';
import { QueryView } from '@/components/states';
import { ChangesTable } from './changes-table';
import { draftComparisonOf, revisionComparisonOf, revisionsOf } from './programme.queries';

/** What the draft changes, or what one revision changed against another. */
export function ChangesDialog({ draft, onClose }: { draft: Draft; onClose: () => void }) {
  const { slug, timeZone } = draft.event;
  const latest = draft.revision?.number ?? 0;
  const [to, setTo] = useState('draft');
  const [from, setFrom] = useState(String(latest));
  const revisions = useQuery(revisionsOf(slug));
  const ofDraft = useQuery({
    ...draftComparisonOf(slug, draft.version, Number(from)),
    enabled: to === 'draft',
  });
  const ofRevision = useQuery({
    ...revisionComparisonOf(slug, Number(from), Number(to)),
    enabled: to !== 'draft',
  });
  const numbers = (revisions.data?.items ?? []).map((revision) => ({
    value: String(revision.number),
    label: `Revision ${revision.number}, ${formatInstant(revision.publishedAt, timeZone, false)}`,
  }));
  const choose = (next: string): void => {
    setTo(next);
    setFrom(next === 'draft' ? String(latest) : String(Number(next) - 1));
  };
  return (
    <Dialog open onClose={onClose} title="Changes" width={720}>
      <div className="mb-4 grid grid-cols-2 gap-3">
        <Select
          label="Compare"
          dense
          value={to}
          onChange={(event) => choose(event.target.value)}
          options={[{ value: 'draft', label: 'The draft' }, ...numbers]}
        />
        <Select
          label="With"
          dense
          value={from}
          onChange={(event) => setFrom(event.target.value)}
          options={[...numbers.filter((one) => one.value !== to), { value: '0', label: 'Nothing published' }]}
        />
      </div>
      <QueryView query={to === 'draft' ? ofDraft : ofRevision} what="the changes">
        {(comparison) => (
          <>
            <ChangesTable
              comparison={comparison}
              from={comparison.from === null ? 'Before' : `Revision ${comparison.from}`}
              to={comparison.to === null ? 'Draft' : `Revision ${comparison.to}`}
            />
            <p className="mt-2 text-dense text-ink3">
              {count(comparison.changes.length, 'change')},{' '}
              {count(comparison.people, 'speaker, chair or tutor', 'speakers, chairs and tutors')}.
            </p>
          </>
        )}
      </QueryView>
      <div className="mt-4">
        <Button onClick={onClose}>Close</Button>
      </div>
    </Dialog>
  );
}
