import { useQuery } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import { answers, type AnswerView } from '@shared/features/messages/messages.contract';
import { formatSpan, zoneName } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Facts } from '@/components/page-bar';
import { Note, QueryView } from '@/components/states';
import { sentenceOf } from '@/lib/problem';
import { calendarAnswerQuery, useAnswerInvitation } from './messages.queries';

const verbs = { ACCEPTED: 'Say yes, I come', TENTATIVE: 'Say perhaps', DECLINED: 'Say no' } as const;
const said = {
  ACCEPTED: 'You have said that you come.',
  TENTATIVE: 'You have said that you perhaps come.',
  DECLINED:
    'You have said that you do not come. The organisers see it; write to them too if the talk is yours to give.',
} as const;

/** Where the link of an invitation leads. Opening it answers nothing: mail scanners open links too. */
export function Component() {
  const { token = '' } = useParams();
  const query = useQuery(calendarAnswerQuery(token));
  return (
    <div className="mx-auto max-w-[560px] px-4 py-12 text-form">
      <h1 className="font-serif text-page">Do you come?</h1>
      <div className="mt-6">
        <QueryView query={query} what="the invitation">
          {(view) => <Question token={token} view={view} />}
        </QueryView>
      </div>
    </div>
  );
}

function Question({ token, view }: { token: string; view: AnswerView }) {
  const answer = useAnswerInvitation(token);
  return (
    <div className="grid gap-5">
      <p className="font-serif text-[18px] leading-6">{view.talkTitle}</p>
      <Facts
        items={[
          [
            'At',
            <Link key="event" to={`/events/${view.eventSlug}`}>
              {view.eventTitle}
            </Link>,
          ],
          [
            'When',
            `${formatSpan(view.startsAt, view.endsAt, view.timeZone)} ${zoneName(view.startsAt, view.timeZone)}`,
          ],
          ['Where', view.roomName],
        ]}
      />
      {view.cancelled ? (
        <Note kind="must">This is no longer in the programme. There is nothing to answer.</Note>
      ) : (
        <>
          <div aria-live="polite">
            {view.answer && (
              <Note kind={view.answer === 'ACCEPTED' ? 'good' : 'wish'}>{said[view.answer]}</Note>
            )}
          </div>
          <div className="flex flex-wrap gap-2.5">
            {answers.map((one) => (
              <Button
                key={one}
                sizing="form"
                variant={view.answer === null && one === 'ACCEPTED' ? 'primary' : 'secondary'}
                aria-pressed={view.answer === one}
                busy={answer.isPending && answer.variables === one}
                onClick={() => answer.mutate(one)}
              >
                {verbs[one]}
              </Button>
            ))}
          </div>
          {answer.error && (
            <p role="alert" className="font-semibold text-alarm">
              {sentenceOf(answer.error)}
            </p>
          )}
        </>
      )}
    </div>
  );
}
