import { useQuery } from '@tanstack/react-query';
import type { TalkAnswer } from '@shared/features/messages/messages.contract';
import { count } from '@shared/lib/text';
import { DataTable, type Column } from '@/components/data-table';
import { Sign } from '@/components/sign';
import { EmptyState, QueryView } from '@/components/states';
import { eventQuery } from '@/features/events/events.queries';
import { formatInstant } from '@shared/lib/time';
import { answerWords } from './message-words';
import { talkAnswersQuery } from './messages.queries';

/** Who has answered the calendar invitations, and how. */
export function AnswersTable({ event }: { event: string }) {
  const query = useQuery(talkAnswersQuery(event));
  const zone = useQuery(eventQuery(event)).data?.timeZone ?? 'UTC';
  return (
    <QueryView query={query} what="the answers">
      {({ items }) => {
        if (items.length === 0)
          return (
            <EmptyState
              title="Nobody has been invited yet."
              fact="Publishing the programme sends each speaker, chair and tutor a calendar invitation."
            />
          );
        const current = items.filter((item) => item.method === 'REQUEST');
        const of = (answer: TalkAnswer['answer']) => current.filter((item) => item.answer === answer).length;
        return (
          <div className="grid gap-3">
            <p className="text-ink2">
              {count(current.length, 'invitation')}: {of('ACCEPTED')} come, {of('TENTATIVE')} perhaps,{' '}
              {of('DECLINED')} do not come, {of(null)} without an answer.
            </p>
            <DataTable
              caption="Answers to calendar invitations"
              rows={items}
              rowKey={(item) => `${item.talkId} ${item.accountId}`}
              columns={columns(zone)}
            />
          </div>
        );
      }}
    </QueryView>
  );
}

const columns = (zone: string): Column<TalkAnswer>[] => [
  { key: 'who', head: 'Who', cell: (item) => <b className="font-semibold">{item.printedName}</b> },
  { key: 'talk', head: 'Talk', cell: (item) => item.talkTitle },
  {
    key: 'when',
    head: 'When and where',
    cell: (item) => `${formatInstant(item.startsAt, zone, false)}, ${item.roomName}`,
  },
  {
    key: 'told',
    head: 'Told',
    cell: (item) =>
      item.method === 'CANCEL' ? 'cancelled' : item.sequence === 0 ? 'invited' : 'moved since',
  },
  { key: 'answer', head: 'Answer', cell: (item) => <AnswerCell item={item} /> },
];

function AnswerCell({ item }: { item: TalkAnswer }) {
  if (item.method === 'CANCEL') return <span className="text-ink3">·</span>;
  if (item.answer === null) return <span className="text-ink3">none yet</span>;
  if (item.answer === 'ACCEPTED') return <>{answerWords.ACCEPTED}</>;
  return (
    <span className="inline-flex items-baseline gap-1.5 font-semibold">
      <Sign kind={item.answer === 'DECLINED' ? 'must' : 'wish'} />
      {answerWords[item.answer]}
    </span>
  );
}
