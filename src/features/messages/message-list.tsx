import { useInfiniteQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { MessageListRow, MessageState } from '@shared/features/messages/messages.contract';
import { Button } from '@/components/button';
import { DataTable, type Column } from '@/components/data-table';
import { Input, Select } from '@/components/field';
import { Sign } from '@/components/sign';
import { EmptyState, ErrorState, Loading } from '@/components/states';
import { ownTime } from '@/lib/format';
import { MessageDialog } from './message-dialog';
import { stateWords } from './message-words';
import { messagesQuery } from './messages.queries';

const states = Object.entries(stateWords).map(([value, label]) => ({ value, label }));

/** The history of letters, of one event or of all (null): filters in the address, a letter opens over it. */
export function MessageList({ event }: { event: string | null }) {
  const [search, setSearch] = useSearchParams();
  const [open, setOpen] = useState<string>();
  const get = (key: string): string => search.get(key) ?? '';
  const set = (changes: Record<string, string>) =>
    setSearch(
      (before) => {
        const next = new URLSearchParams(before);
        for (const [key, value] of Object.entries(changes))
          if (value) next.set(key, value);
          else next.delete(key);
        return next;
      },
      { replace: true },
    );
  const filter = {
    q: get('q') || undefined,
    state: (get('state') || undefined) as MessageState | undefined,
    account: get('person') || undefined,
  };
  const query = useInfiniteQuery(messagesQuery(event, filter));
  const rows = query.data?.pages.flatMap((page) => page.items) ?? [];
  const person = filter.account && rows[0]?.toName;
  return (
    <div className="grid gap-4">
      <div className="flex flex-wrap items-center gap-3">
        <Input
          dense
          label="Find"
          hideLabel
          placeholder="Name, address or subject"
          value={get('q')}
          onChange={(e) => set({ q: e.target.value })}
          className="w-72 max-sm:w-full"
        />
        <Select
          dense
          label="State"
          hideLabel
          placeholder="Any state"
          value={get('state')}
          onChange={(e) => set({ state: e.target.value })}
          options={states}
        />
        {filter.account && (
          <p className="text-ink2">
            Only what {person ?? 'this person'} was sent.{' '}
            <Button variant="link" onClick={() => set({ person: '' })}>
              Show everybody
            </Button>
          </p>
        )}
      </div>
      {query.error ? (
        <ErrorState error={query.error} onRetry={() => void query.refetch()} />
      ) : query.isPending ? (
        <Loading what="the messages" />
      ) : rows.length === 0 ? (
        <EmptyState
          title={
            Object.values(filter).some(Boolean) ? 'No message like that.' : 'Nobody has been written to yet.'
          }
          fact="Letters appear here as soon as they are queued."
        />
      ) : (
        <DataTable
          caption="Messages, the latest first"
          rows={rows}
          rowKey={(row) => row.id}
          columns={columns}
          onOpen={(row) => setOpen(row.id)}
          chosen={open}
        />
      )}
      {query.hasNextPage && (
        <div>
          <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show more
          </Button>
        </div>
      )}
      {open && (
        <MessageDialog
          event={event}
          id={open}
          onClose={() => setOpen(undefined)}
          onPerson={(account) => {
            setOpen(undefined);
            set({ person: account, q: '', state: '' });
          }}
        />
      )}
    </div>
  );
}

const columns: Column<MessageListRow>[] = [
  {
    key: 'to',
    head: 'To',
    cell: (row) => (
      <>
        <b className="font-semibold">{row.toName}</b> <span className="text-ink3">{row.toAddress}</span>
      </>
    ),
  },
  {
    key: 'subject',
    head: 'Subject',
    className: 'min-w-[170px]',
    cell: (row) => <span className="break-words">{row.subject}</span>,
  },
  {
    key: 'calendar',
    head: 'Calendar',
    className: 'max-sm:hidden',
    cell: (row) => (row.hasCalendar ? 'with invitation' : '·'),
  },
  { key: 'state', head: 'State', cell: (row) => <StateCell row={row} /> },
  {
    key: 'when',
    head: 'When',
    cell: (row) => <span className="whitespace-nowrap">{ownTime(row.sentAt ?? row.queuedAt)}</span>,
  },
];

function StateCell({ row }: { row: MessageListRow }) {
  if (row.state === 'failed')
    return (
      <span className="inline-flex items-baseline gap-1.5 font-semibold text-alarm">
        <Sign kind="must" />
        {stateWords.failed}
      </span>
    );
  if (row.state === 'queued' && row.attempts > 0)
    return (
      <span className="inline-flex items-baseline gap-1.5 text-caution">
        <Sign kind="wish" />
        Tried {row.attempts}×
      </span>
    );
  return <span className="whitespace-nowrap">{stateWords[row.state]}</span>;
}
