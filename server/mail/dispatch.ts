import { Op } from 'sequelize';
import { transaction } from '../db/transaction';
import { env } from '../env';
import { log } from '../http/request-log';
import { MessageRow } from './message.model';
import { mailTransport, type WireMessage } from './transport';

const MAX_ATTEMPTS = 8;
/** So that a mail server is not flooded; the local mailbox needs no such care. */
const PER_MINUTE = env.SMTP_URL ? 600 : Infinity;
/** A conversation that has not ended after this time was cut off; longer than every time-out of transport.ts. */
const STUCK_MS = 10 * 60_000;

let recent: number[] = [];

/** Seconds until the next try: 30, 60, 120 ... at most two hours, with up to a fifth more by chance. */
export function backOffSeconds(attempts: number, random: () => number = Math.random): number {
  return Math.min(7200, 30 * 2 ** (attempts - 1)) * (1 + random() / 5);
}

/** Letters whose conversation an earlier process did not live to finish: due again at once. Called when a process starts. */
export async function recoverInterrupted(now = new Date()): Promise<number> {
  const [changed] = await transaction(() =>
    MessageRow.update({ nextAt: now }, { where: { state: 'sending', nextAt: { [Op.gt]: now } } }),
  );
  return changed;
}

/**
 * Sends what is due, one letter after the other. Returns how many were tried.
 *
 * A row is marked `sending` before the conversation and `sent` with the server's reply after it. A crash between the two
 * leaves `sending`: SMTP has no way to ask whether a letter arrived, so it is sent again under the same Message-ID (derived
 * from the key), by which the receiving side knows the double and keeps one. Never lost, and kept once.
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
  return MessageRow.findOne({ where: due(now), attributes: ['id'], order: ['nextAt', 'id'] }).then(
    (found) => {
      if (!found) return null;
      return transaction(async () => {
        const row = await MessageRow.findOne({ where: { [Op.and]: [{ id: found.id }, due(now)] } });
        if (row)
          await row.update({
            state: 'sending',
            attempts: row.attempts + 1,
            nextAt: new Date(now.getTime() + STUCK_MS),
          });
        return row;
      });
    },
  );
}

const due = (now: Date) => ({ state: ['queued', 'sending'], nextAt: { [Op.lte]: now } });

interface SmtpError {
  /** SMTP code, where the server gave one. */
  responseCode?: number;
  /** nodemailer's own code: EAUTH, ECONNECTION, EENVELOPE ... */
  code?: string;
  /** The command that was answered: `CONN`, `AUTH PLAIN`, `RCPT TO`, `DATA` ... */
  command?: string;
  message?: string;
}

/**
 * A 5xx answer to this letter (RFC 5321 section 4.2.1). One at the greeting or at sign-in is about the server or our
 * settings, not about the letter: all mail would fail for good because of a mistyped password.
 */
export const isPermanent = ({ responseCode = 0, code, command = '' }: SmtpError): boolean =>
  responseCode >= 500 && code !== 'EAUTH' && !/^(CONN|EHLO|HELO|STARTTLS|AUTH|API)/.test(command);

async function send(row: MessageRow, now: () => Date): Promise<void> {
  try {
    const reply = await mailTransport().send(wireMessage(row));
    await transaction(() =>
      row.update({ state: 'sent', sentAt: now(), serverReply: reply.slice(0, 500), lastError: null }),
    );
  } catch (error) {
    const { responseCode, message } = error as SmtpError;
    const failed = isPermanent(error as SmtpError) || row.attempts >= MAX_ATTEMPTS;
    log.warn(
      { message: row.id, responseCode, attempts: row.attempts },
      failed ? 'letter failed' : 'letter delayed',
    );
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
    calendar:
      row.calendarMethod && row.calendarContent
        ? { method: row.calendarMethod, content: row.calendarContent }
        : null,
    replyTo: row.replyTo,
    unsubscribeUrl: row.unsubscribeUrl,
    messageId: row.messageId,
  };
}

/** Queues a failed letter again, by hand. */
export async function retryMessage(id: string): Promise<boolean> {
  const [changed] = await transaction(() =>
    MessageRow.update(
      { state: 'queued', attempts: 0, nextAt: new Date(), lastError: null },
      { where: { id, state: 'failed' } },
    ),
  );
  return changed === 1;
}
