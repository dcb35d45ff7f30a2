import { useInfiniteQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import {
  applicationStates,
  type ApplicationRow,
  type ApplicationState,
} from '@shared/features/registration/registration.contract';
import { applicationStateNames, canStep } from '@shared/features/registration/registration.rules';
import { Button } from '@/components/button';
import { DataTable } from '@/components/data-table';
import { Input, Select, Textarea } from '@/components/field';
import { Facts } from '@/components/page-bar';
import { EmptyState, ErrorState, Loading } from '@/components/states';
import { toast } from '@/components/toast';
import { ownTime } from '@/lib/format';
import { sayFailure } from '@/lib/problem';
import { applicationsQuery, useDecide } from './registration.queries';

/** Applications in order of arrival, the chosen one beside them with the decision. */
export function Applications({ event }: { event: string }) {
  const [search, setSearch] = useSearchParams();
  const state = (applicationStates.find((value) => value === search.get('state')) ?? '') as
    ApplicationState | '';
  const query = useInfiniteQuery(applicationsQuery(event, state || undefined));
  const rows = query.data?.pages.flatMap((page) => page.items) ?? [];
  const chosen = rows.find((row) => row.id === search.get('application'));
  const set = (key: string, value: string) =>
    setSearch(
      (before) => {
        const next = new URLSearchParams(before);
        if (value) next.set(key, value);
        else next.delete(key);
        return next;
      },
      { replace: true },
    );
  return (
    <div className="grid min-h-0 grow lg:grid-cols-[1fr_372px]">
      <div className="min-w-0 p-6 max-sm:p-4">
        <Select
          dense
          hideLabel
          label="State"
          className="mb-3 w-48"
          placeholder="Any state"
          value={state}
          onChange={(e) => set('state', e.target.value)}
          options={applicationStates.map((value) => ({ value, label: applicationStateNames[value] }))}
        />
        {query.error ? (
          <ErrorState error={query.error} onRetry={() => void query.refetch()} />
        ) : query.isPending ? (
          <Loading what="applications" />
        ) : rows.length === 0 ? (
          <EmptyState title="No applications." fact={state ? 'None in this state.' : undefined} />
        ) : (
          <DataTable
            caption="Applications in order of arrival"
            rows={rows}
            rowKey={(row) => row.id}
            chosen={chosen?.id}
            onOpen={(row) => set('application', row.id)}
            columns={[
              {
                key: 'name',
                head: 'Name',
                cell: (row) => (
                  <>
                    <b className="font-semibold">{row.printedName}</b>{' '}
                    <span className="text-ink3">{row.affiliation}</span>
                  </>
                ),
              },
              { key: 'country', head: 'From', cell: (row) => row.country ?? '·' },
              { key: 'stage', head: 'Stage', cell: (row) => row.careerStage ?? '·' },
              {
                key: 'state',
                head: 'State',
                cell: (row) => (
                  <>
                    {applicationStateNames[row.state]}
                    {row.registered && <span className="text-good"> registered</span>}
                  </>
                ),
              },
              { key: 'at', head: 'Received', cell: (row) => ownTime(row.appliedAt) },
            ]}
          />
        )}
        {query.hasNextPage && (
          <Button className="mt-3" busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show more
          </Button>
        )}
      </div>
      <aside aria-label="Chosen application" className="border-l border-rule bg-paper p-6 max-sm:p-4">
        {chosen ? (
          <Decision key={`${chosen.id}${chosen.version}`} event={event} row={chosen} />
        ) : (
          <p className="text-ink3">Choose an application to read and decide it.</p>
        )}
      </aside>
    </div>
  );
}

const verbs = { offered: 'Offer a place', waiting: 'Put on the waiting list', declined: 'Decline' } as const;

function Decision({ event, row }: { event: string; row: ApplicationRow }) {
  const decide = useDecide(event);
  const [note, setNote] = useState('');
  const [answerBy, setAnswerBy] = useState('');
  const go = (decision: keyof typeof verbs) =>
    decide.mutate(
      { application: row.id, version: row.version, decision, note, answerBy: answerBy || null },
      {
        onSuccess: () =>
          toast(
            `${row.printedName}: ${applicationStateNames[decision].toLowerCase()}. The letter is on its way.`,
          ),
        onError: sayFailure,
      },
    );
  return (
    <div className="grid gap-4">
      <div>
        <h2 className="font-serif text-[18px] leading-6">{row.printedName}</h2>
        <p className="text-ink3">{row.affiliation}</p>
      </div>
      <Facts
        items={[
          ['State', applicationStateNames[row.state]],
          ['Position', row.background],
          row.note ? ['Note', row.note] : null,
        ]}
      />
      <p className="font-serif text-abstract whitespace-pre-line">{row.motivation}</p>
      <Textarea
        dense
        label="Note in the letter"
        optional
        rows={3}
        value={note}
        onChange={(e) => setNote(e.target.value)}
      />
      <Input
        dense
        label="Answer to an offer by"
        optional
        type="date"
        value={answerBy}
        onChange={(e) => setAnswerBy(e.target.value)}
      />
      <div className="flex flex-wrap gap-2">
        {(Object.keys(verbs) as (keyof typeof verbs)[])
          .filter((decision) => canStep(row.state, decision))
          .map((decision) => (
            <Button
              key={decision}
              variant={decision === 'offered' ? 'primary' : 'secondary'}
              busy={decide.isPending}
              onClick={() => go(decision)}
            >
              {verbs[decision]}
            </Button>
          ))}
      </div>
    </div>
  );
}
