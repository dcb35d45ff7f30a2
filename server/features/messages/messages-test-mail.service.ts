import { notFound } from '@shared/http/problem';
import type { TestMail } from '@shared/features/messages/messages.contract';
import { env } from '@server/env';
import { localMailbox, type StoredMail } from '@server/fakes/smtp/local-mailbox';
import { isAdministrator, type Actor } from '@server/http/authorize';
import { fileResponse, type FileResponse } from '@server/http/uploads';
import { recordReply } from './messages.service';

/** Administrators read the whole test mailbox; everybody else what was sent to their own address. */
function visible(actor: Actor): StoredMail[] {
  const mailbox = localMailbox();
  if (!env.DEMO || !mailbox) throw notFound('The test mailbox');
  return mailbox.mails.filter((mail) => isAdministrator(actor) || mail.to.toLowerCase().includes(actor.email.toLowerCase()));
}

const row = ({ id, to, subject, at, calendarMethod }: StoredMail) => ({ id, to, subject, at, calendarMethod });

export function listTestMail(actor: Actor, q = '') {
  const wanted = q.toLowerCase();
  return { items: visible(actor).filter((mail) => `${mail.to} ${mail.subject}`.toLowerCase().includes(wanted)).slice(0, 200).map(row) };
}

export function readTestMail(actor: Actor, id: string): TestMail {
  const mail = visible(actor).find((candidate) => candidate.id === id);
  if (!mail) throw notFound('This letter');
  const { from, text, html, calendar, attachments, headers } = mail;
  return { ...row(mail), from, text, html, calendar, attachments, headers };
}

export function testCalendar(actor: Actor, id: string): FileResponse {
  const mail = readTestMail(actor, id);
  if (!mail.calendar) throw notFound('A calendar part');
  return fileResponse({ content: mail.calendar, downloadName: 'invitation.ics', type: 'text/calendar; charset=utf-8' });
}

/** METHOD:REPLY mail that reaches the office's address (RFC 5546 section 3.2.3): the answer is recorded. */
export function acceptReplies(): void {
  localMailbox()?.onMail((mail) => {
    if (mail.calendarMethod !== 'REPLY' || !mail.calendar || !mail.to.toLowerCase().includes(env.OFFICE_EMAIL)) return;
    const text = mail.calendar.replace(/\r?\n[ \t]/g, '');
    const uid = /^UID:(.+)$/m.exec(text)?.[1]?.trim() ?? '';
    const attendee = /^ATTENDEE([^\r\n]*):mailto:([^\r\n]+)$/im.exec(text);
    const partstat = /PARTSTAT="?([A-Z-]+)/i.exec(attendee?.[1] ?? '')?.[1]?.toUpperCase() ?? '';
    const sequence = Number(/^SEQUENCE:(\d+)/m.exec(text)?.[1] ?? 0);
    void recordReply({ uid, attendee: attendee?.[2]?.trim() ?? '', partstat, sequence });
  });
}
