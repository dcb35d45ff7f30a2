import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useParams, useSearchParams } from 'react-router-dom';
import {
  exportRegistrations,
  registrationStates,
  type RegistrationState,
} from '@shared/features/registration/registration.contract';
import { dietNames, registrationStateNames } from '@shared/features/registration/registration.rules';
import { formatMoney } from '@shared/lib/money';
import { formatDate } from '@shared/lib/time';
import { Button, buttonClass } from '@/components/button';
import { DataTable } from '@/components/data-table';
import { Input, Segmented, Select } from '@/components/field';
import { Facts, PageBar, SectionHead } from '@/components/page-bar';
import { EmptyState, ErrorState, Loading, Note, QueryView } from '@/components/states';
import { fileAddress } from '@/lib/api';
import { ownTime } from '@/lib/format';
import { Account } from './account';
import { Applications } from './applications';
import { placesQuery, registrationQuery, registrationsQuery } from './registration.queries';

const views = [
  { value: 'registrations', label: 'Registrations' },
  { value: 'applications', label: 'Applications' },
] as const;

export function Component() {
  const { event = '' } = useParams();
  const [search, setSearch] = useSearchParams();
  const view = search.get('view') === 'applications' ? 'applications' : 'registrations';
  const places = useQuery(placesQuery(event)).data;
  return (
    <>
      <PageBar
        title={view === 'applications' ? 'Applications' : 'Registrations'}
        facts={
          places && (
            <>
              {places.paid + places.reserved} of {places.capacity} places taken, {places.reserved} not paid
              {places.offered > 0 && <>, {places.offered} offered</>}, {places.waiting} waiting
            </>
          )
        }
        controls={
          <Segmented
            label="View"
            options={views}
            value={view}
            onChange={(value) => setSearch({ view: value })}
          />
        }
        actions={
          view === 'registrations' && (
            <a className={buttonClass()} href={fileAddress(exportRegistrations, { event })} download>
              Export as CSV
            </a>
          )
        }
      />
      {view === 'applications' ? (
        <Applications event={event} />
      ) : (
        <Registrations event={event} search={search} setSearch={setSearch} />
      )}
    </>
  );
}

function Registrations({
  event,
  search,
  setSearch,
}: {
  event: string;
  search: URLSearchParams;
  setSearch: ReturnType<typeof useSearchParams>[1];
}) {
  const q = search.get('q') ?? '';
  const state = (registrationStates.find((value) => value === search.get('state')) ?? '') as
    RegistrationState | '';
  const chosen = search.get('registration') ?? undefined;
  const query = useInfiniteQuery(registrationsQuery(event, { q: q || undefined, state: state || undefined }));
  const rows = query.data?.pages.flatMap((page) => page.items) ?? [];
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
        <div className="mb-3 flex flex-wrap gap-3">
          <Input
            dense
            hideLabel
            label="Find"
            placeholder="Name or address"
            value={q}
            onChange={(e) => set('q', e.target.value)}
            className="w-60"
          />
          <Select
            dense
            hideLabel
            label="State"
            placeholder="Any state"
            value={state}
            onChange={(e) => set('state', e.target.value)}
            options={registrationStates.map((value) => ({ value, label: registrationStateNames[value] }))}
          />
        </div>
        {query.error ? (
          <ErrorState error={query.error} onRetry={() => void query.refetch()} />
        ) : query.isPending ? (
          <Loading what="registrations" />
        ) : rows.length === 0 ? (
          <EmptyState
            title={q || state ? 'Nobody like that.' : 'Nobody has registered yet.'}
            fact={q || state ? 'The filters stand in the address of this page.' : undefined}
          />
        ) : (
          <DataTable
            caption="Registrations, the latest first"
            rows={rows}
            rowKey={(row) => row.id}
            chosen={chosen}
            onOpen={(row) => set('registration', row.id)}
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
              { key: 'category', head: 'Category', cell: (row) => row.category },
              {
                key: 'state',
                head: 'State',
                cell: (row) => (
                  <>
                    {registrationStateNames[row.state]}
                    {row.oddity && <span className="font-semibold text-alarm"> to be settled</span>}
                  </>
                ),
              },
              {
                key: 'stay',
                head: 'Stay',
                cell: (row) =>
                  row.arrivesOn && row.leavesOn
                    ? `${formatDate(row.arrivesOn, { short: true, weekday: false })} – ${formatDate(row.leavesOn, { short: true, weekday: false })}`
                    : '·',
              },
              {
                key: 'total',
                head: 'Total',
                numeric: true,
                cell: (row) => formatMoney(row.totalMinor, row.currency),
              },
            ]}
          />
        )}
        {query.hasNextPage && (
          <Button className="mt-3" busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
            Show more
          </Button>
        )}
      </div>
      <aside aria-label="Chosen registration" className="border-l border-rule bg-paper p-6 max-sm:p-4">
        {chosen ? (
          <Chosen event={event} id={chosen} />
        ) : (
          <p className="text-ink3">Choose a registration to see its stay, needs and order.</p>
        )}
      </aside>
    </div>
  );
}

function Chosen({ event, id }: { event: string; id: string }) {
  const query = useQuery(registrationQuery(event, id));
  return (
    <QueryView query={query} what="the registration">
      {(view) => (
        <div className="grid gap-5">
          <div>
            <h2 className="font-serif text-[18px] leading-6">{view.row.printedName}</h2>
            <p className="text-ink3">{view.row.affiliation}</p>
          </div>
          {view.order?.oddity && <Note kind="must">{view.order.oddity}</Note>}
          <Facts
            items={[
              ['State', registrationStateNames[view.state]],
              [
                'Code',
                <span key="code" className="font-mono">
                  {view.code}
                </span>,
              ],
              [
                'E-mail',
                <a key="mail" href={`mailto:${view.row.email}`}>
                  {view.row.email}
                </a>,
              ],
              ['Badge', view.badgeName],
              ['Arrives', view.arrivesOn ? formatDate(view.arrivesOn) : 'not said'],
              ['Leaves', view.leavesOn ? formatDate(view.leavesOn) : 'not said'],
              ['Food', dietNames[view.diet]],
              view.allergies ? ['Allergies', view.allergies] : null,
              view.needs ? ['Needs', view.needs] : null,
              view.checkedInAt ? ['Checked in', ownTime(view.checkedInAt)] : null,
            ]}
          />
          {view.allergies && (
            <Note>The kitchen confirms allergens with the person; this entry is not a safety measure.</Note>
          )}
          {view.order && (
            <div>
              <SectionHead
                title={`Order ${view.order.number}`}
                aside={
                  { placed: 'not paid', paid: 'paid', expired: 'run out', cancelled: 'cancelled' }[
                    view.order.state
                  ]
                }
              />
              <Account price={view.order.price} title="Lines" total="Together" />
            </div>
          )}
        </div>
      )}
    </QueryView>
  );
}
