import { useInfiniteQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import type { SetURLSearchParams } from 'react-router-dom';
import type { TalkListRow } from '@shared/features/talks/talks.contract';
import { owesAbstract, talkStateNames } from '@shared/features/talks/talks.rules';
import { count } from '@shared/lib/text';
import { Button } from '@/components/button';
import { DataTable, type Column } from '@/components/data-table';
import { Input, Select } from '@/components/field';
import { KindTag } from '@/components/kind-tag';
import { MathLine } from '@/components/math-text';
import { EmptyState, ErrorState, Loading } from '@/components/states';
import { filterOf, kindOptions, missingOptions, stateOptions } from './talk-filters';
import { talksQuery } from './talks.queries';

const NOBODY: Partial<Record<TalkListRow['kind'], string>> = {
  plenary: 'No speaker',
  invited: 'No speaker',
  contributed: 'No speaker',
  course_lecture: 'No lecturer',
  exercise: 'No tutor',
};

const columns: Column<TalkListRow>[] = [
  {
    key: 'title',
    head: 'Talk',
    cell: (row) => (
      <b className="font-serif text-[15px] leading-5 font-medium">
        <MathLine source={row.title} />
      </b>
    ),
  },
  {
    key: 'kind',
    head: 'Kind',
    cell: (row) => <KindTag kind={row.kind} label={row.label} />,
    className: 'max-sm:hidden',
  },
  {
    key: 'state',
    head: 'State',
    cell: (row) => (row.invitation === 'invited' ? 'Invited' : talkStateNames[row.state]),
  },
  {
    key: 'abstract',
    head: 'Abstract',
    cell: (row) =>
      row.abstractAt ? 'in' : owesAbstract(row.kind) ? <span className="text-caution">missing</span> : '·',
    className: 'max-sm:hidden',
  },
  { key: 'slides', head: 'Slides', cell: (row) => (row.hasSlides ? 'in' : '·'), className: 'max-sm:hidden' },
  { key: 'minutes', head: 'min', numeric: true, cell: (row) => row.minutes },
];

interface Props {
  event: string;
  params: URLSearchParams;
  setParams: SetURLSearchParams;
  chosen: string | undefined;
  onChoose: (talk: string) => void;
}

export function TalksList({ event, params, setParams, chosen, onChoose }: Props) {
  const filter = filterOf(params);
  const query = useInfiniteQuery(talksQuery(event, filter));
  const rows = query.data?.pages.flatMap((page) => page.items) ?? [];
  const put = (key: string, value: string) =>
    setParams(
      (old) => {
        if (value) old.set(key, value);
        else old.delete(key);
        return old;
      },
      { replace: true },
    );
  const filtered = Object.values(filter).some(Boolean);
  return (
    <>
      <div className="mb-4 grid grid-cols-4 gap-3 max-sm:grid-cols-2">
        <SearchField value={filter.q ?? ''} onChange={(q) => put('q', q)} />
        <Select
          dense
          label="State"
          placeholder="All"
          options={stateOptions}
          value={filter.state ?? ''}
          onChange={(e) => put('state', e.target.value)}
        />
        <Select
          dense
          label="Kind"
          placeholder="All"
          options={kindOptions}
          value={filter.kind ?? ''}
          onChange={(e) => put('kind', e.target.value)}
        />
        <Select
          dense
          label="Missing"
          placeholder="Does not matter"
          options={missingOptions}
          value={filter.missing ?? ''}
          onChange={(e) => put('missing', e.target.value)}
        />
      </div>
      {query.error && (
        <ErrorState
          error={query.error}
          what="Reading the talks did not work."
          onRetry={() => void query.refetch()}
        />
      )}
      {query.isPending && <Loading what="the talks" />}
      {query.data && rows.length === 0 && (
        <EmptyState
          title={filtered ? 'No talk fits these filters.' : 'No talks yet.'}
          fact={
            filtered
              ? undefined
              : 'Invite a speaker, add a talk, or announce the event so that the call for abstracts opens.'
          }
          action={filtered && <Button onClick={() => setParams({})}>Show all talks</Button>}
        />
      )}
      {rows.length > 0 && (
        <DataTable
          caption="Talks"
          columns={columns}
          rows={rows}
          rowKey={(row) => row.id}
          chosen={chosen}
          onOpen={(row) => onChoose(row.id)}
          detail={(row) => (
            <span className="block text-ink3">
              {row.speakers
                .map((person) => [person.printedName, person.affiliation].filter(Boolean).join(', '))
                .join('; ') || NOBODY[row.kind]}
            </span>
          )}
          foot={
            query.hasNextPage ? (
              <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
                Show more talks
              </Button>
            ) : (
              count(rows.length, 'talk')
            )
          }
        />
      )}
    </>
  );
}

/** Types freely, searches a moment later. */
function SearchField({ value, onChange }: { value: string; onChange: (value: string) => void }) {
  const [typed, setTyped] = useState(value);
  useEffect(() => {
    if (typed.trim() === value) return;
    const timer = setTimeout(() => onChange(typed.trim()), 250);
    return () => clearTimeout(timer);
  });
  return (
    <Input
      dense
      type="search"
      label="Title or name"
      value={typed}
      maxLength={100}
      onChange={(e) => setTyped(e.target.value)}
    />
  );
}
