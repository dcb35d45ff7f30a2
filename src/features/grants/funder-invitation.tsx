import { useState } from 'react';
import type { Fund } from '@shared/features/grants/grants.contract';
import { useInvite } from '@/features/accounts/accounts.queries';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Input } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure } from '@/lib/problem';

/** Sends a link that opens an account with the funder's role in this fund only. */
export function FunderInvitation({ fund, onClose }: { fund: Fund; onClose: () => void }) {
  const [person, setPerson] = useState({ email: '', givenName: '', familyName: '' });
  const invite = useInvite();
  const errors = fieldErrors(invite.error);
  const set = (key: keyof typeof person) => (event: React.ChangeEvent<HTMLInputElement>) =>
    setPerson({ ...person, [key]: event.target.value });
  const send = (event: React.FormEvent) => {
    event.preventDefault();
    invite.mutate(
      { ...person, role: 'funder', scope: 'fund', scopeId: fund.id },
      {
        onSuccess: () => {
          toast(`The invitation to ${person.email} is on its way.`);
          onClose();
        },
        onError: (error) => Object.keys(fieldErrors(error)).length === 0 && sayFailure(error),
      },
    );
  };
  return (
    <Dialog open onClose={onClose} title="Invite a funder" aside={fund.name}>
      <form className="grid gap-3" onSubmit={send}>
        <Input
          label="E-mail"
          type="email"
          value={person.email}
          onChange={set('email')}
          error={errors.email}
        />
        <Input
          label="Given name"
          value={person.givenName}
          onChange={set('givenName')}
          error={errors.givenName}
        />
        <Input
          label="Family name"
          value={person.familyName}
          onChange={set('familyName')}
          error={errors.familyName}
        />
        <p className="text-dense text-ink3">
          This person sees the awards proposed to {fund.name}: reference, career stage and region, no names.
        </p>
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
