import { useQuery } from '@tanstack/react-query';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Facts } from '@/components/page-bar';
import { Note, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { ownTime } from '@/lib/format';
import { sayFailure } from '@/lib/problem';
import { stateWords } from './message-words';
import { messageQuery, useRetryMessage } from './messages.queries';

/** One letter: to whom, what became of it in the mail server's words, and what it said. */
export function MessageDialog({
  event,
  id,
  onClose,
  onPerson,
}: {
  event: string | null;
  id: string;
  onClose: () => void;
  onPerson: (account: string) => void;
}) {
  const query = useQuery(messageQuery(event, id));
  const retry = useRetryMessage(event);
  const again = () => retry.mutate(id, { onSuccess: () => toast('Queued again.'), onError: sayFailure });
  return (
    <Dialog open onClose={onClose} title={query.data?.subject ?? 'Message'} width={720}>
      <QueryView query={query} what="the message">
        {(message) => (
          <div className="grid gap-4">
            {message.lastError && message.state !== 'sent' && (
              <Note kind={message.state === 'failed' ? 'must' : 'wish'}>
                {message.state === 'failed' ? 'It was not sent. ' : 'It has not gone yet. '}The mail server
                said: <q>{message.lastError}</q>
              </Note>
            )}
            <Facts
              items={[
                ['To', `${message.toName}, ${message.toAddress}`],
                [
                  'State',
                  `${stateWords[message.state]}${message.attempts > 1 ? `, tried ${message.attempts} times` : ''}`,
                ],
                ['Queued', ownTime(message.queuedAt)],
                message.sentAt ? ['Sent', ownTime(message.sentAt)] : null,
                message.nextAt && message.attempts > 0 ? ['Next try', ownTime(message.nextAt)] : null,
                message.serverReply ? ['Mail server', message.serverReply] : null,
              ]}
            />
            <pre
              tabIndex={0}
              aria-label="Text of the letter"
              className="max-h-[46vh] overflow-auto border-t border-rule pt-3 font-mono text-dense whitespace-pre-wrap"
            >
              {message.text}
            </pre>
            <div className="flex flex-wrap gap-2">
              {message.can.retry && (
                <Button variant="primary" busy={retry.isPending} onClick={again}>
                  Send it again
                </Button>
              )}
              {message.accountId && (
                <Button onClick={() => onPerson(message.accountId as string)}>
                  Show everything this person was sent
                </Button>
              )}
              <Button onClick={onClose}>Close</Button>
            </div>
          </div>
        )}
      </QueryView>
    </Dialog>
  );
}
