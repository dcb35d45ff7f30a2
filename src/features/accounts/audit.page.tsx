import { useInfiniteQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import { Button } from '@/components/button';
import { DataTable } from '@/components/data-table';
import { Input } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { EmptyState, ErrorState, Loading } from '@/components/states';
import { ownTime } from '@/lib/format';
import { auditQuery } from './accounts.queries';

const short = (value: unknown): string => {
  const text = value === null || value === undefined ? '' : JSON.stringify(value);
  return text.length > 140 ? `${text.slice(0, 139)}…` : text;
};

export function Component() {
  const [search, setSearch] = useSearchParams();
  const q = search.get('q') ?? '';
  const query = useInfiniteQuery(auditQuery(q));
  const rows = query.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <>
      <PageBar
        title="Audit trail"
        facts="Every decision and every change of money, programme or role; nobody can edit it"
      />
      <div className="grid gap-4 p-6 max-sm:p-4">
        <Input
          dense
          label="By whom"
          hideLabel
          placeholder="By whom"
          value={q}
          onChange={(e) => setSearch(e.target.value ? { q: e.target.value } : {}, { replace: true })}
          className="w-72"
        />
        {query.error ? (
          <ErrorState error={query.error} onRetry={() => void query.refetch()} />
        ) : query.isPending ? (
          <Loading what="the audit trail" />
        ) : rows.length === 0 ? (
          <EmptyState title="Nothing has been done yet." />
        ) : (
          <DataTable
            caption="Audit trail, newest first"
            rows={rows}
            rowKey={(row) => row.id}
            columns={[
              {
                key: 'at',
                head: 'When',
                cell: (row) => <span className="whitespace-nowrap">{ownTime(row.at)}</span>,
              },
              { key: 'who', head: 'Who', cell: (row) => <b className="font-semibold">{row.actorName}</b> },
              {
                key: 'what',
                head: 'What',
                cell: (row) => row.action.replace('.', ': ').replaceAll('_', ' '),
              },
              {
                key: 'before',
                head: 'Before',
                cell: (row) => <span className="break-all text-ink3">{short(row.before)}</span>,
              },
              {
                key: 'after',
                head: 'After',
                cell: (row) => <span className="break-all">{short(row.after)}</span>,
              },
            ]}
          />
        )}
        {query.hasNextPage && (
          <div>
            <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
              Show more
            </Button>
          </div>
        )}
      </div>
    </>
  );
}
