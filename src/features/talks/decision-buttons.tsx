import { useState } from 'react';
import type { Talk } from '@shared/features/talks/talks.contract';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Textarea } from '@/components/field';
import { Note } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { useDecide } from './talks.queries';

type Decision = 'accepted' | 'declined';

/** Accept or decline; a dialog shows that a letter goes out and takes a note for it. */
export function DecisionButtons({ talk }: { talk: Talk }) {
  const [decision, setDecision] = useState<Decision>();
  const [note, setNote] = useState('');
  const decide = useDecide();
  if (!talk.can.decide || talk.invitation === 'invited') return null;
  const speakers = talk.people
    .filter((person) => person.part === 'speaker')
    .map((person) => person.printedName);
  const confirm = () =>
    decision &&
    decide.mutate(
      { talk, decision, note },
      {
        onSuccess: () => {
          toast(`The talk is ${decision}. ${speakers.join(', ')} will hear by mail.`);
          setDecision(undefined);
        },
        onError: sayFailure,
      },
    );
  return (
    <div className="flex flex-wrap gap-2">
      <Button variant="primary" onClick={() => setDecision('accepted')}>
        Accept the talk …
      </Button>
      {talk.state !== 'declined' && (
        <Button onClick={() => setDecision('declined')}>Decline the talk …</Button>
      )}
      <Dialog
        open={decision !== undefined}
        onClose={() => setDecision(undefined)}
        title={decision === 'declined' ? 'Decline this talk' : 'Accept this talk'}
      >
        <div className="grid gap-4">
          <Textarea
            label="A word in the letter"
            optional
            maxLength={2000}
            value={note}
            onChange={(event) => setNote(event.target.value)}
          />
          <Note>{speakers.join(', ') || 'The speaker'} gets the letter at once.</Note>
          <div className="flex justify-end gap-2">
            <Button sizing="form" onClick={() => setDecision(undefined)}>
              Leave it open
            </Button>
            <Button
              sizing="form"
              variant={decision === 'declined' ? 'danger' : 'primary'}
              busy={decide.isPending}
              onClick={confirm}
            >
              {decision === 'declined' ? 'Decline and write' : 'Accept and write'}
            </Button>
          </div>
        </div>
      </Dialog>
    </div>
  );
}
