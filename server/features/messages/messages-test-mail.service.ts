import { notFound } from '@shared/http/problem';
import type { TestMail } from '@shared/features/messages/messages.contract';
import { env } from '@server/env';
import { localMailbox, type StoredMail } from '@server/fakes/smtp/local-mailbox';
import { isAdministrator, type Actor } from '@server/http/authorize';
import { log } from '@server/http/request-log';
import { fileResponse, type FileResponse } from '@server/http/uploads';
import { readReply } from './calendar-reply';
import { recordReply } from './messages-invitations.service';

/** Administrators read the whole test mailbox; everybody else what was sent to exactly their own address. */
function visible(actor: Actor): StoredMail[] {
  const mailbox = localMailbox();
  if (!env.DEMO || !mailbox) throw notFound('The test mailbox');
  if (isAdministrator(actor)) return [...mailbox.mails];
  return mailbox.mails.filter((mail) => mail.recipients.includes(actor.email.toLowerCase()));
}

const row = ({ id, to, subject, at, calendarMethod }: StoredMail) => ({
  id,
  to,
  subject,
  at,
  calendarMethod,
});

export function listTestMail(actor: Actor, q = '') {
  const wanted = q.toLowerCase();
  const items = visible(actor).filter((mail) => `${mail.to} ${mail.subject}`.toLowerCase().includes(wanted));
  return { items: items.slice(0, 200).map(row) };
}

function requireMail(actor: Actor, id: string): StoredMail {
  const mail = visible(actor).find((candidate) => candidate.id === id);
  if (!mail) throw notFound('This letter');
  return mail;
}

export function readTestMail(actor: Actor, id: string): TestMail {
  const mail = requireMail(actor, id);
  const { from, text, html, calendar, attachments, headers } = mail;
  return {
    ...row(mail),
    from,
    text,
    html,
    calendar,
    attachments: attachments.map(({ name, type, bytes }) => ({ name, type, bytes })),
    headers,
  };
}

export function testCalendar(actor: Actor, id: string): FileResponse {
  const mail = requireMail(actor, id);
  if (!mail.calendar) throw notFound('A calendar part');
  return fileResponse({
    content: mail.calendar,
    downloadName: 'invitation.ics',
    type: 'text/calendar; charset=utf-8',
  });
}

/** An attachment by its place in the letter, from 0; never shown in place, always as a file. */
export function testAttachment(actor: Actor, id: string, index: number): FileResponse {
  const part = requireMail(actor, id).attachments[index];
  if (!part?.content) throw notFound('This attachment');
  return fileResponse({
    content: Buffer.from(part.content, 'base64'),
    downloadName: part.name,
    type: part.type,
  });
}

/**
 * METHOD:REPLY mail that reaches the office's address (RFC 5546 section 3.2.3): the answer is recorded. The person is
 * told from ATTENDEE, not from the head of the letter (RFC 6047 section 2.3).
 */
export function acceptReplies(): void {
  localMailbox()?.onMail((mail) => {
    const reply =
      mail.recipients.includes(env.OFFICE_EMAIL.toLowerCase()) && mail.calendar
        ? readReply(mail.calendar)
        : null;
    if (!reply) return;
    recordReply(reply, new Date()).catch((error: unknown) =>
      log.error({ err: error, mail: mail.id }, 'a reply to an invitation was not recorded'),
    );
  });
}
