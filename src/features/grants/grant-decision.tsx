import { useRef, useState } from 'react';
import type { MyGrant } from '@shared/features/grants/grants.contract';
import { costKindNames, formatGrant } from '@shared/features/grants/grants.rules';
import { formatInstant } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Note } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { useAnswerAward } from './grants.queries';

type Decision = NonNullable<MyGrant['decision']>;

/** The decision, and what can be answered. */
export function GrantDecision({ mine, decision }: { mine: MyGrant; decision: Decision }) {
  if (decision.outcome === 'not_awarded')
    return (
      <Note>
        The committee could not give you a travel grant this time. Your registration is not touched. If money
        comes back from others, we may still write to you.
      </Note>
    );
  if (decision.outcome === 'returned')
    return (
      <Note>The grant has gone back to its fund: you gave it back, or it was not answered in time.</Note>
    );
  return (
    <section aria-label="Decision">
      {decision.outcome === 'accepted' ? (
        <Note kind="good">
          You have accepted the grant. It is paid after the event against receipts: keep your tickets and
          bills.
        </Note>
      ) : (
        <p>
          We are glad to offer you a travel grant.{' '}
          {decision.answerBy && (
            <>
              Please answer by <b>{formatInstant(decision.answerBy, mine.timeZone)}</b> ({mine.timeZone});
              after that the money goes to somebody else.
            </>
          )}
        </p>
      )}
      <table className="ruled row-heads my-4">
        <caption className="sr-only">What is awarded, in {mine.currency}</caption>
        <tbody>
          {decision.lines.map((line) => (
            <tr key={line.kind}>
              <th scope="row">
                {costKindNames[line.kind]} <span className="font-normal text-ink3">{line.fund}</span>
              </th>
              <td className="num">{formatGrant(line.amountMinor, mine.currency)}</td>
            </tr>
          ))}
          <tr>
            <th scope="row">Together, at most</th>
            <td className="num font-semibold">{formatGrant(decision.totalMinor, mine.currency)}</td>
          </tr>
        </tbody>
      </table>
      <Answer mine={mine} decision={decision} />
    </section>
  );
}

function Answer({ mine, decision }: { mine: MyGrant; decision: Decision }) {
  const [asked, setAsked] = useState(false);
  const answer = useAnswerAward(mine.eventSlug);
  const safe = useRef<HTMLButtonElement>(null);
  const send = (value: 'accepted' | 'returned') =>
    answer.mutate(
      { version: mine.version, answer: value },
      {
        onSuccess: () => {
          toast(value === 'accepted' ? 'You have accepted the grant.' : 'You have given the grant back.');
          setAsked(false);
        },
        onError: sayFailure,
      },
    );
  return (
    <div className="flex flex-wrap gap-3">
      {mine.can.accept && (
        <Button
          variant="primary"
          sizing="form"
          className="max-sm:grow"
          busy={answer.isPending}
          onClick={() => send('accepted')}
        >
          Accept the grant
        </Button>
      )}
      {mine.can.return && (
        <Button sizing="form" className="max-sm:grow" onClick={() => setAsked(true)}>
          Give the grant back…
        </Button>
      )}
      {decision.outcome === 'offered' && !mine.can.accept && (
        <p className="text-alarm">The date for accepting is past.</p>
      )}
      <Dialog open={asked} onClose={() => setAsked(false)} title="Give the grant back" focusFirst={safe}>
        <p>
          The {formatGrant(decision.totalMinor, mine.currency)} go to somebody else. This can’t be undone.
          Your registration is not touched.
        </p>
        <div className="mt-4 flex gap-2">
          <Button ref={safe} onClick={() => setAsked(false)}>
            Keep it
          </Button>
          <Button variant="danger" busy={answer.isPending} onClick={() => send('returned')}>
            Give the grant back
          </Button>
        </div>
      </Dialog>
    </div>
  );
}
