import { useRef, useState } from 'react';
import type { GrantBoard } from '@shared/features/grants/grants-committee.contract';
import { count } from '@shared/lib/text';
import { addDays, instantToLocal } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Input } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure } from '@/lib/problem';
import { useSendDecisions } from './grants.queries';

/** Names the numbers before any letter goes. */
export function SendDialog({
  event,
  board,
  onClose,
}: {
  event: string;
  board: GrantBoard;
  onClose: () => void;
}) {
  const today = instantToLocal(new Date(), board.timeZone).date;
  const [answerBy, setAnswerBy] = useState(addDays(today, 14));
  const send = useSendDecisions(event);
  const safe = useRef<HTMLButtonElement>(null);
  const { toOffer, toDecline, waiting } = board.counts;
  const go = () =>
    send.mutate(
      { answerBy },
      {
        onSuccess: (sent) => {
          toast(`${count(sent.offered, 'offer')} and ${count(sent.notAwarded, 'regret')} on their way.`);
          onClose();
        },
        onError: (error) => !fieldErrors(error).answerBy && sayFailure(error),
      },
    );
  return (
    <Dialog open onClose={onClose} title="Send the decisions" focusFirst={safe}>
      <ul className="mb-4 list-disc pl-5">
        <li>{count(toOffer, 'person gets an offer', 'people get an offer')}.</li>
        <li>
          {count(
            toDecline,
            'person is told that there is no grant',
            'people are told that there is no grant',
          )}
          .
        </li>
        {waiting > 0 && (
          <li>
            {count(waiting, 'application waits', 'applications wait')} for a funder and get no letter now.
          </li>
        )}
      </ul>
      <Input
        type="date"
        label="Accept by"
        hint={`Until 23:59 in ${board.timeZone}. After that the money goes back to its fund.`}
        min={addDays(today, 1)}
        value={answerBy}
        onChange={(change) => setAnswerBy(change.target.value)}
        error={fieldErrors(send.error).answerBy}
      />
      <p className="mt-3 text-dense text-ink3">Letters can’t be taken back.</p>
      <div className="mt-4 flex gap-2">
        <Button variant="primary" busy={send.isPending} onClick={go}>
          Send {count(toOffer + toDecline, 'letter')}
        </Button>
        <Button ref={safe} onClick={onClose}>
          Send nothing
        </Button>
      </div>
    </Dialog>
  );
}
