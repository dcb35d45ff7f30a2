import { useState, type FormEvent } from 'react';
import type { BodyOf } from '@shared/http/endpoint';
import type { inviteSpeaker } from '@shared/features/talks/talks-invitation.contract';
import { usualMinutes } from '@shared/features/talks/talks.rules';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Choices, Input, Textarea } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { useInviteSpeaker } from './talks.queries';

const blank: BodyOf<typeof inviteSpeaker> = {
  email: '',
  givenName: '',
  familyName: '',
  affiliation: '',
  kind: 'invited',
  ...usualMinutes.invited,
  message: '',
};

/** Writes to somebody with a link of their own; no account is needed to answer. */
export function InviteDialog({
  event,
  onClose,
  onDone,
}: {
  event: string;
  onClose: () => void;
  onDone: (talk: string) => void;
}) {
  const [body, setBody] = useState(blank);
  const invite = useInviteSpeaker(event);
  const errors = fieldErrors(invite.error);
  const set = (part: Partial<typeof blank>) => setBody({ ...body, ...part });
  const submit = (happening: FormEvent) => {
    happening.preventDefault();
    invite.mutate(body, {
      onSuccess: (talk) => {
        toast(`The invitation to ${body.givenName} ${body.familyName} is on its way.`);
        onDone(talk.id);
        onClose();
      },
    });
  };
  return (
    <Dialog open onClose={onClose} title="Invite a speaker">
      <form noValidate onSubmit={submit} className="grid gap-3">
        <div className="grid gap-3 sm:grid-cols-2">
          <Input
            label="Given name"
            value={body.givenName}
            error={errors.givenName}
            onChange={(e) => set({ givenName: e.target.value })}
          />
          <Input
            label="Family name"
            value={body.familyName}
            error={errors.familyName}
            onChange={(e) => set({ familyName: e.target.value })}
          />
        </div>
        <Input
          label="E-mail address"
          type="email"
          value={body.email}
          error={errors.email}
          onChange={(e) => set({ email: e.target.value })}
        />
        <Input
          label="Institute"
          optional
          value={body.affiliation}
          error={errors.affiliation}
          onChange={(e) => set({ affiliation: e.target.value })}
        />
        <Choices
          legend="Kind"
          name="kind"
          value={body.kind}
          onChange={(kind) => set({ kind, ...usualMinutes[kind ?? 'invited'] })}
          options={[
            { value: 'invited', label: 'Invited talk' },
            { value: 'plenary', label: 'Plenary talk' },
          ]}
        />
        <div className="grid grid-cols-2 gap-3">
          <Input
            label="Minutes"
            type="number"
            min={5}
            step={5}
            value={body.minutes}
            error={errors.minutes}
            onChange={(e) => set({ minutes: Number(e.target.value) })}
          />
          <Input
            label="Of these, for questions"
            type="number"
            min={0}
            step={5}
            value={body.questionMinutes}
            error={errors.questionMinutes}
            onChange={(e) => set({ questionMinutes: Number(e.target.value) })}
          />
        </div>
        <Textarea
          label="Your letter"
          optional
          rows={5}
          value={body.message}
          error={errors.message}
          hint="Between the greeting and the facts. Empty: one friendly sentence."
          onChange={(e) => set({ message: e.target.value })}
        />
        {invite.error && Object.keys(errors).length === 0 && (
          <p role="alert" className="font-semibold text-alarm">
            {sentenceOf(invite.error)}
          </p>
        )}
        <div className="flex justify-end gap-2">
          <Button sizing="form" onClick={onClose}>
            Leave it
          </Button>
          <Button type="submit" variant="primary" sizing="form" busy={invite.isPending}>
            Send the invitation
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
