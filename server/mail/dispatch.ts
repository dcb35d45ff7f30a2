import { Op } from 'sequelize';
import { transaction } from '../db/transaction';
import { log } from '../http/request-log';
import { MessageRow } from './message.model';
import { mailTransport, type WireMessage } from './transport';

const MAX_ATTEMPTS = 8;
/** So that a mail server is not flooded. */
const PER_MINUTE = 600;
/** A conversation that has not ended after this time was cut off by a crash. */
const STUCK_MS = 10 * 60_000;

let recent: number[] = [];

/** Seconds until the next try: 30, 60, 120 ... at most two hours, with up to a fifth more by chance. */
export function backOffSeconds(attempts: number, random: () => number = Math.random): number {
  return Math.min(7200, 30 * 2 ** (attempts - 1)) * (1 + random() / 5);
}

/**
 * Sends what is due, one letter after the other. Returns how many were tried.
 *
 * A row is marked `sending` before the conversation and `sent` with the server's reply after it. A crash between the
 * two leaves `sending`; after ten minutes the letter is sent again under the same Message-ID, so that mail programs
 * and servers recognise the double: a letter may in that one case travel twice, but is never lost.
 */
export async function dispatchMail(now: () => Date = () => new Date()): Promise<number> {
  let tried = 0;
  for (;;) {
    const since = now().getTime() - 60_000;
    recent = recent.filter((at) => at > since);
    if (recent.length >= PER_MINUTE) return tried;
    const message = await claim(now());
    if (!message) return tried;
    recent.push(now().getTime());
    await send(message, now);
    tried += 1;
  }
}

function claim(now: Date): Promise<MessageRow | null> {
  return MessageRow.findOne({ where: due(now), attributes: ['id'], order: ['nextAt', 'id'] }).then((found) => {
    if (!found) return null;
    return transaction(async () => {
      const row = await MessageRow.findOne({ where: { [Op.and]: [{ id: found.id }, due(now)] } });
      if (row) await row.update({ state: 'sending', attempts: row.attempts + 1, nextAt: new Date(now.getTime() + STUCK_MS) });
      return row;
    });
  });
}

const due = (now: Date) => ({ state: ['queued', 'sending'], nextAt: { [Op.lte]: now } });

async function send(row: MessageRow, now: () => Date): Promise<void> {
  try {
    const reply = await mailTransport().send(wireMessage(row));
    await transaction(() => row.update({ state: 'sent', sentAt: now(), serverReply: reply.slice(0, 500), lastError: null }));
  } catch (error) {
    const { responseCode, message } = error as { responseCode?: number; message?: string };
    const permanent = responseCode !== undefined && responseCode >= 500;
    const failed = permanent || row.attempts >= MAX_ATTEMPTS;
    log.warn({ message: row.id, responseCode, attempts: row.attempts }, failed ? 'letter failed' : 'letter delayed');
    await transaction(() =>
      row.update({
        state: failed ? 'failed' : 'queued',
        nextAt: new Date(now().getTime() + backOffSeconds(row.attempts) * 1000),
        lastError: String(message ?? error).slice(0, 500),
      }),
    );
  }
}

export function wireMessage(row: MessageRow): WireMessage {
  return {
    to: { name: row.toName, address: row.toAddress },
    subject: row.subject,
    text: row.text,
    html: row.html,
    calendar: row.calendarMethod && row.calendarContent ? { method: row.calendarMethod, content: row.calendarContent } : null,
    replyTo: row.replyTo,
    unsubscribeUrl: row.unsubscribeUrl,
    messageId: row.messageId,
  };
}

/** Queues a failed letter again, by hand. */
export async function retryMessage(id: string): Promise<boolean> {
  const [changed] = await transaction(() =>
    MessageRow.update({ state: 'queued', attempts: 0, nextAt: new Date(), lastError: null }, { where: { id, state: 'failed' } }),
  );
  return changed === 1;
}
