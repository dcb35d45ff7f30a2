import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { useParams } from 'react-router-dom';
import { roleNames } from '@shared/features/accounts/accounts.rules';
import { Button } from '@/components/button';
import { DataTable } from '@/components/data-table';
import { Dialog } from '@/components/dialog';
import { Input, Select } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { EmptyState, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure, sentenceOf } from '@/lib/problem';
import { useInvite } from '@/features/accounts/accounts.queries';
import { eventQuery, teamQuery, useEndTeamRole } from './events.queries';

type TeamRole = 'organiser' | 'reviewer' | 'desk';
const options = (['organiser', 'reviewer', 'desk'] as const).map((value) => ({
  value,
  label: roleNames[value],
}));

/** Who works on the event, and in which role. */
export function Component() {
  const { event: slug = '' } = useParams();
  const team = useQuery(teamQuery(slug));
  const event = useQuery(eventQuery(slug)).data;
  const end = useEndTeamRole(slug);
  const [inviting, setInviting] = useState(false);
  return (
    <>
      <PageBar
        title="People"
        facts="Who works on this event"
        actions={
          <Button variant="primary" onClick={() => setInviting(true)}>
            Invite by link…
          </Button>
        }
      />
      <div className="p-6 max-sm:p-4">
        <QueryView query={team} what="the team">
          {({ items }) =>
            items.length === 0 ? (
              <EmptyState
                title="Nobody works on this event yet."
                fact="The event office sees it all the same."
              />
            ) : (
              <DataTable
                caption="People who work on this event"
                rows={items}
                rowKey={(row) => row.grantId}
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
                  { key: 'role', head: 'Role', cell: (row) => roleNames[row.role] },
                  { key: 'email', head: 'E-mail', cell: (row) => row.email },
                  {
                    key: 'end',
                    head: <span className="sr-only">End a role</span>,
                    cell: (row) => (
                      <Button
                        variant="link"
                        aria-label={`End ${roleNames[row.role]} of ${row.printedName}`}
                        onClick={() =>
                          end.mutate(
                            { account: row.accountId, grant: row.grantId },
                            {
                              onSuccess: () =>
                                toast(
                                  `${row.printedName} is no longer ${roleNames[row.role].toLowerCase()}.`,
                                ),
                              onError: sayFailure,
                            },
                          )
                        }
                      >
                        End the role
                      </Button>
                    ),
                  },
                ]}
              />
            )
          }
        </QueryView>
      </div>
      {event && <InviteDialog eventId={event.id} open={inviting} onClose={() => setInviting(false)} />}
    </>
  );
}

function InviteDialog({ eventId, open, onClose }: { eventId: string; open: boolean; onClose: () => void }) {
  const invite = useInvite();
  const [values, setValues] = useState({
    email: '',
    givenName: '',
    familyName: '',
    role: 'organiser' as TeamRole,
  });
  const errors = fieldErrors(invite.error);
  const put = (key: keyof typeof values) => (e: { target: { value: string } }) =>
    setValues({ ...values, [key]: e.target.value });
  const submit = (event: FormEvent) => {
    event.preventDefault();
    invite.mutate(
      { ...values, scope: 'event', scopeId: eventId },
      {
        onSuccess: () => {
          toast(`Invitation sent to ${values.email}.`);
          onClose();
        },
      },
    );
  };
  return (
    <Dialog open={open} onClose={onClose} title="Invite to work on this event">
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
          options={options}
          error={errors.role}
        />
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
