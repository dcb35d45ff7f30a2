import { createHash } from 'node:crypto';
import { newId } from '../db/id';
import { afterCommit, transaction } from '../db/transaction';
import { env } from '../env';
import { wake } from '../jobs/job';
import { MessageRow } from './message.model';

export interface OutgoingMessage {
  /** Feature and name: `talks.invitation`. */
  letter: string;
  accountId?: string;
  eventId?: string;
  to: { name: string; address: string };
  /** What the letter is about (talk, registration ...). */
  subjectId?: string;
  /** Letter, subject, recipient and revision: the same key is never sent twice. */
  dedupKey: string;
  mail: { subject: string; text: string; html: string };
  calendar?: { method: 'REQUEST' | 'CANCEL'; content: string };
  replyTo?: string;
  /** For letters that are not owed to the person (RFC 8058). */
  unsubscribeUrl?: string;
}

const ADDRESS = /^[^\s<>@,;:"()[\]\\]+@[^\s<>@,;:"()[\]\\]+$/;

/**
 * Queues a letter inside the ambient transaction. The same key twice is one letter.
 * @throws Error naming the fault (line break in a header, wrong address, a part without text) before anybody is written to.
 */
export function queueMessage(message: OutgoingMessage): Promise<void> {
  refuseBroken(message);
  return transaction(async () => {
    if (await MessageRow.findOne({ where: { dedupKey: message.dedupKey }, attributes: ['id'] })) return;
    await MessageRow.create({
      id: newId(),
      letter: message.letter,
      accountId: message.accountId ?? null,
      eventId: message.eventId ?? null,
      subjectId: message.subjectId ?? null,
      toName: message.to.name,
      toAddress: message.to.address,
      replyTo: message.replyTo ?? null,
      subject: message.mail.subject,
      text: message.mail.text,
      html: message.mail.html,
      calendarMethod: message.calendar?.method ?? null,
      calendarContent: message.calendar?.content ?? null,
      unsubscribeUrl: message.unsubscribeUrl ?? null,
      dedupKey: message.dedupKey,
      messageId: messageIdOf(message.dedupKey),
      nextAt: new Date(),
    });
    afterCommit(wake);
  });
}

function refuseBroken(message: OutgoingMessage): void {
  const headers = {
    subject: message.mail.subject,
    name: message.to.name,
    address: message.to.address,
    replyTo: message.replyTo ?? '',
  };
  for (const [field, value] of Object.entries(headers)) {
    if (/[\r\n\0]/.test(value)) throw new Error(`${message.letter}: a line break in ${field}`);
  }
  for (const address of [message.to.address, message.replyTo]) {
    if (address !== undefined && !ADDRESS.test(address))
      throw new Error(`${message.letter}: not an address: ${address}`);
  }
  for (const [field, value] of Object.entries(message.mail)) {
    if (typeof value !== 'string' || value.trim() === '') throw new Error(`${message.letter}: no ${field}`);
    // The word "undefined" may well stand in a title; these two never do.
    if (/\bInvalid DateTime\b|\[object Object\]/.test(value))
      throw new Error(`${message.letter}: a missing value in ${field}`);
  }
}

/** `<hash@host of BASE_URL>` (RFC 5322 section 3.6.4), always the same for a key. */
export function messageIdOf(dedupKey: string): string {
  const hash = createHash('sha256').update(dedupKey).digest('hex').slice(0, 40);
  return `<${hash}@${new URL(env.BASE_URL).hostname}>`;
}
