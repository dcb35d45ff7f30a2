import { useState, type FormEvent } from 'react';
import type { DoorView } from '@shared/features/registration/registration.contract';
import { applicationStateNames } from '@shared/features/registration/registration.rules';
import { formatInstant } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Input, Textarea } from '@/components/field';
import { Facts } from '@/components/page-bar';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure, sentenceOf } from '@/lib/problem';
import { useApply, useWithdraw } from './registration.queries';

/** Application for a place, or for one on the waiting list. */
export function ApplyForm({ view, waiting }: { view: DoorView; waiting: boolean }) {
  const apply = useApply(view.eventSlug);
  const [motivation, setMotivation] = useState('');
  const [background, setBackground] = useState('');
  const errors = fieldErrors(apply.error);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    apply.mutate(
      { motivation, background },
      { onSuccess: () => toast(waiting ? 'You are on the waiting list.' : 'Application sent.') },
    );
  };
  return (
    <form noValidate onSubmit={submit} className="mt-6 grid gap-4">
      <Input
        label="Your studies or position"
        value={background}
        onChange={(e) => setBackground(e.target.value)}
        error={errors.background}
        hint="In a line, e.g. second year of a doctorate"
      />
      <Textarea
        label="Why you would like to come"
        rows={6}
        value={motivation}
        onChange={(e) => setMotivation(e.target.value)}
        error={errors.motivation}
      />
      <p className="text-ui text-ink3">
        Read by the organisers and the reviewers of this event; kept until a year after it.
      </p>
      {apply.error && Object.keys(errors).length === 0 && (
        <p role="alert" className="font-semibold text-alarm">
          {sentenceOf(apply.error)}
        </p>
      )}
      <div>
        <Button type="submit" variant="primary" sizing="form" busy={apply.isPending}>
          {waiting ? 'Go on the waiting list' : 'Send the application'}
        </Button>
      </div>
    </form>
  );
}

/** Where one's application stands. */
ApplyForm.State = function State({ view }: { view: DoorView }) {
  const withdraw = useWithdraw(view.eventSlug);
  const { application } = view;
  if (!application) return null;
  return (
    <section className="mt-6 border-y-[1.75px] border-ink py-3">
      <Facts
        items={[
          ['Application', applicationStateNames[application.state]],
          application.answerBy ? ['Answer by', formatInstant(application.answerBy, view.timeZone)] : null,
          application.note ? ['Note', application.note] : null,
        ]}
      />
      {['received', 'waiting'].includes(application.state) && (
        <Button
          variant="link"
          className="mt-2"
          onClick={() =>
            withdraw.mutate(application.version, {
              onSuccess: () => toast('Application withdrawn.'),
              onError: sayFailure,
            })
          }
        >
          Withdraw the application
        </Button>
      )}
    </section>
  );
};
