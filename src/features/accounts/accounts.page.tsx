import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { useSearchParams } from 'react-router-dom';
import { roles, type AccountRow, type Role } from '@shared/features/accounts/accounts.contract';
import { roleNames, rolesIn } from '@shared/features/accounts/accounts.rules';
import { Button } from '@/components/button';
import { DataTable } from '@/components/data-table';
import { Dialog } from '@/components/dialog';
import { Input, Select } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { EmptyState, ErrorState, Loading } from '@/components/states';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure, sentenceOf } from '@/lib/problem';
import { myEventsQuery } from '@/features/events/events.queries';
import { accountsQuery, useEndRole, useInvite } from './accounts.queries';

export function Component() {
  const [search, setSearch] = useSearchParams();
  const q = search.get('q') ?? '';
  const role = (search.get('role') ?? '') as Role | '';
  const query = useInfiniteQuery(accountsQuery(q, role || undefined));
  const [inviting, setInviting] = useState(false);
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
  const rows = query.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <>
      <PageBar
        title="Accounts"
        facts="People, and what each may do"
        actions={
          <Button variant="primary" onClick={() => setInviting(true)}>
            Invite by link…
          </Button>
        }
      />
      <div className="grid gap-4 p-6 max-sm:p-4">
        <div className="flex flex-wrap gap-3">
          <Input
            dense
            label="Find"
            hideLabel
            placeholder="Name, address or affiliation"
            value={q}
            onChange={(e) => set('q', e.target.value)}
            className="w-72"
          />
          <Select
            dense
            label="Role"
            hideLabel
            value={role}
            onChange={(e) => set('role', e.target.value)}
            placeholder="Any role"
            options={roles.map((value) => ({ value, label: roleNames[value] }))}
          />
        </div>
        {query.error ? (
          <ErrorState error={query.error} onRetry={() => void query.refetch()} />
        ) : query.isPending ? (
          <Loading what="accounts" />
        ) : rows.length === 0 ? (
          <EmptyState title="Nobody like that." fact="Searched in names, addresses and affiliations." />
        ) : (
          <AccountsTable rows={rows} />
        )}
        {query.hasNextPage && (
          <div>
            <Button busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
              Show more
            </Button>
          </div>
        )}
      </div>
      <InviteDialog open={inviting} onClose={() => setInviting(false)} />
    </>
  );
}

function AccountsTable({ rows }: { rows: AccountRow[] }) {
  const end = useEndRole();
  return (
    <DataTable
      caption="Accounts"
      rows={rows}
      rowKey={(row) => row.id}
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
        {
          key: 'email',
          head: 'E-mail',
          cell: (row) => (
            <>
              {row.email}
              {!row.emailVerified && <span className="text-caution"> not confirmed</span>}
            </>
          ),
        },
        { key: 'country', head: 'From', cell: (row) => row.country ?? '·' },
        {
          key: 'roles',
          head: 'Roles',
          cell: (row) =>
            row.grants.length === 0
              ? '·'
              : row.grants.map((grant) => (
                  <span key={grant.id} className="mr-4 inline-flex items-baseline gap-1">
                    {roleNames[grant.role]}
                    {grant.scopeTitle && <span className="text-ink3">, {grant.scopeTitle}</span>}
                    <Button
                      variant="link"
                      aria-label={`End ${roleNames[grant.role]} of ${row.printedName}`}
                      onClick={() =>
                        end.mutate(
                          { account: row.id, grant: grant.id },
                          { onSuccess: () => toast('Role ended.'), onError: sayFailure },
                        )
                      }
                    >
                      end
                    </Button>
                  </span>
                )),
        },
      ]}
    />
  );
}

function InviteDialog({ open, onClose }: { open: boolean; onClose: () => void }) {
  const invite = useInvite();
  const events = useQuery(myEventsQuery).data?.items ?? [];
  const [values, setValues] = useState({
    email: '',
    givenName: '',
    familyName: '',
    role: 'organiser' as Role,
    scopeId: '',
  });
  const scope = (Object.entries(rolesIn).find(([, list]) => list.includes(values.role))?.[0] ??
    'institute') as 'institute' | 'event' | 'fund';
  const errors = fieldErrors(invite.error);
  const put = (key: keyof typeof values) => (e: { target: { value: string } }) =>
    setValues({ ...values, [key]: e.target.value });
  const submit = (event: FormEvent) => {
    event.preventDefault();
    invite.mutate(
      { ...values, scope, scopeId: scope === 'institute' ? null : values.scopeId },
      {
        onSuccess: () => {
          toast(`Invitation sent to ${values.email}.`);
          onClose();
        },
      },
    );
  };
  return (
    <Dialog open={open} onClose={onClose} title="Invite by link">
      <form noValidate onSubmit={submit} className="grid gap-3 text-ui">
        <div className="grid grid-cols-2 gap-3">
          <Input
            dense
            label="Given name"
            value={values.givenName}
            onChange={put('givenName')}
            error={errors.givenName}
          />
          <Input
            dense
            label="Family name"
            value={values.familyName}
            onChange={put('familyName')}
            error={errors.familyName}
          />
        </div>
        <Input
          dense
          label="E-mail"
          type="email"
          value={values.email}
          onChange={put('email')}
          error={errors.email}
        />
        <Select
          dense
          label="Role"
          value={values.role}
          onChange={put('role')}
          options={roles
            .filter((role) => role !== 'funder')
            .map((value) => ({ value, label: roleNames[value] }))}
          error={errors.role}
          hint="Funders are invited from their fund."
        />
        {scope === 'event' && (
          <Select
            dense
            label="Event"
            value={values.scopeId}
            onChange={put('scopeId')}
            placeholder="Choose an event"
            options={events.map((event) => ({ value: event.id, label: event.title }))}
            error={errors.scopeId}
          />
        )}
        {invite.error && Object.keys(errors).length === 0 && (
          <p role="alert" className="font-semibold text-alarm">
            {sentenceOf(invite.error)}
          </p>
        )}
        <div className="flex gap-2">
          <Button type="submit" variant="primary" busy={invite.isPending}>
            Send the invitation
          </Button>
          <Button onClick={onClose}>Leave it</Button>
        </div>
      </form>
    </Dialog>
  );
}
