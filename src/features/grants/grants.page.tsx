import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useParams, useSearchParams } from 'react-router-dom';
import type { Fund } from '@shared/features/grants/grants.contract';
import type { GrantBoard } from '@shared/features/grants/grants-committee.contract';
import { formatGrant } from '@shared/features/grants/grants.rules';
import { count } from '@shared/lib/text';
import { formatInstant } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Segmented } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { EmptyState, QueryView } from '@/components/states';
import { BoardTable } from './board-table';
import { FundDialog } from './fund-dialog';
import { FundList } from './fund-list';
import { GrantPanel } from './grant-panel';
import { boardQuery } from './grants.queries';
import { SendDialog } from './send-dialog';

type View = 'all' | 'awarded' | 'not';

/** The committee's page: applications by rank, awards by fund, the funds beside them. */
export function Component() {
  const { event = '' } = useParams();
  const query = useQuery(boardQuery(event));
  return (
    <QueryView query={query} what="the grant applications">
      {(board) => <Board event={event} board={board} />}
    </QueryView>
  );
}

function Board({ event, board }: { event: string; board: GrantBoard }) {
  const [search, setSearch] = useSearchParams();
  const [editing, setEditing] = useState<Fund | 'new'>();
  const [sending, setSending] = useState(false);
  const { counts, funds, currency } = board;
  const view = (search.get('show') ?? 'all') as View;
  const chosen = board.rows.find((row) => row.id === search.get('application') && row.person !== null);
  const set = (key: string, value: string | null) =>
    setSearch((now) => {
      const next = new URLSearchParams(now);
      if (value === null) next.delete(key);
      else next.set(key, value);
      return next;
    });
  const rows = board.rows.filter((row) => view === 'all' || (view === 'awarded') === row.awards.length > 0);
  const sum = (pick: (fund: Fund) => number) =>
    formatGrant(
      funds.reduce((total, fund) => total + pick(fund), 0),
      currency,
      false,
    );
  return (
    <>
      <PageBar
        title="Travel grants"
        facts={
          <>
            {count(counts.submitted, 'applicant')},{' '}
            <b>{count(counts.awarded, 'awarded person', 'awarded people')}</b>,{' '}
            {sum((fund) => fund.awardedMinor)} of {sum((fund) => fund.budgetMinor)} {currency}
          </>
        }
        controls={
          <Segmented
            label="Which applications"
            value={view}
            onChange={(value) => set('show', value === 'all' ? null : value)}
            options={[
              { value: 'all', label: `All ${counts.submitted}` },
              { value: 'awarded', label: `Awarded ${counts.awarded}` },
              { value: 'not', label: `Not funded ${counts.notFunded}` },
            ]}
          />
        }
        actions={
          <>
            {board.can.addFund && <Button onClick={() => setEditing('new')}>Add a fund…</Button>}
            {board.can.propose && (
              <Button
                variant="primary"
                disabled={!board.can.send}
                title={board.notYet ?? undefined}
                onClick={() => setSending(true)}
              >
                Send the decisions…
              </Button>
            )}
          </>
        }
      />
      <div className="grid grow items-stretch xl:grid-cols-[minmax(0,1fr)_372px]">
        <section aria-label="Applications" className="min-w-0 px-6 py-4 max-sm:px-4">
          {rows.length > 0 ? (
            <BoardTable
              board={board}
              rows={rows}
              chosen={chosen?.id}
              onChoose={(id) => set('application', id)}
            />
          ) : (
            <EmptyState
              title={counts.submitted === 0 ? 'No grant applications yet.' : 'None in this view.'}
              fact={`${count(counts.drafts, 'draft')} begun.${board.dueAt ? ` Applications are due ${formatInstant(board.dueAt, board.timeZone)} (${board.timeZone}).` : ''}`}
            />
          )}
          {board.can.propose && board.notYet && <p className="mt-3 text-dense text-ink3">{board.notYet}</p>}
        </section>
        <aside
          aria-label={chosen ? 'Chosen application' : 'Funds'}
          className={`border-rule bg-paper px-5 py-4 max-xl:border-t xl:border-l ${chosen ? 'max-xl:order-first' : ''}`}
        >
          {chosen && (
            <GrantPanel
              key={chosen.id}
              event={event}
              board={board}
              application={chosen.id}
              onClose={() => set('application', null)}
            />
          )}
          <FundList funds={funds} onEdit={setEditing} />
        </aside>
      </div>
      {editing && (
        <FundDialog
          event={event}
          currency={currency}
          fund={editing === 'new' ? null : editing}
          onClose={() => setEditing(undefined)}
        />
      )}
      {sending && <SendDialog event={event} board={board} onClose={() => setSending(false)} />}
    </>
  );
}
