import { col, fn, Op, where } from 'sequelize';
import type { MessageListRow } from '@shared/features/messages/messages.contract';
import type { Page } from '@shared/http/page';
import { conflict, notFound } from '@shared/http/problem';
import { retryMessage } from '@server/mail/dispatch';
import { MessageRow } from '@server/mail/message.model';

const present = (row: MessageRow): MessageListRow => ({
  id: row.id,
  letter: row.letter,
  accountId: row.accountId,
  toName: row.toName,
  toAddress: row.toAddress,
  subject: row.subject,
  state: row.state,
  attempts: row.attempts,
  lastError: row.lastError,
  serverReply: row.serverReply,
  queuedAt: row.createdAt.toISOString(),
  nextAt: row.state === 'queued' ? row.nextAt.toISOString() : null,
  sentAt: row.sentAt?.toISOString() ?? null,
  hasCalendar: row.calendarMethod !== null,
  can: { retry: row.state === 'failed' },
});

export interface MessageQuery {
  cursor?: string;
  limit: number;
  state?: string;
  q?: string;
  account?: string;
}

// LIKE has no escape character in SQLite unless one is named, and addresses are full of underscores.
const holds = (column: string, text: string) =>
  where(fn('instr', fn('lower', col(column)), text.toLowerCase()), Op.gt, 0);

/** Messages, the latest first; of one event, or of all. */
export async function listMessages(
  eventId: string | null,
  query: MessageQuery,
): Promise<Page<MessageListRow>> {
  const rows = await MessageRow.findAll({
    where: {
      [Op.and]: [
        eventId ? { eventId } : {},
        query.state ? { state: query.state } : {},
        query.account ? { accountId: query.account } : {},
        query.q
          ? {
              [Op.or]: ['to_name', 'to_address', 'subject'].map((column) => holds(column, query.q as string)),
            }
          : {},
        query.cursor ? { id: { [Op.lt]: query.cursor } } : {},
      ],
    },
    order: [['id', 'DESC']],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  return {
    items: page.map(present),
    next: rows.length > query.limit ? (page[page.length - 1]?.id ?? null) : null,
  };
}

/** One message of an event (of any, for null) with its text. The links of a letter open doors that are its reader's alone: their secret part is left out. */
export async function readMessage(
  eventId: string | null,
  id: string,
): Promise<MessageListRow & { text: string }> {
  const row = await requireMessage(eventId, id);
  return { ...present(row), text: row.text.replace(/[\w-]{40,}/g, '…') };
}

async function requireMessage(eventId: string | null, id: string): Promise<MessageRow> {
  const row = await MessageRow.findOne({ where: eventId ? { id, eventId } : { id } });
  if (!row) throw notFound('This message');
  return row;
}

/** Queues a failed message again. @throws 409 when it has not failed. */
export async function sendAgain(eventId: string | null, id: string): Promise<void> {
  await requireMessage(eventId, id);
  if (!(await retryMessage(id)))
    throw conflict('messages.not_failed', 'Only a failed message is sent again.');
}

/** Failed messages of an event. */
export const failedMessages = (eventId: string): Promise<number> =>
  MessageRow.count({ where: { eventId, state: 'failed' } });
