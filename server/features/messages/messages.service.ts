import { randomBytes, randomUUID } from 'node:crypto';
import { Op } from 'sequelize';
import type { MessageListRow } from '@shared/features/messages/messages.contract';
import { invitationChanges, type InvitationChange } from '@shared/features/messages/invitations.rules';
import { plainLatex } from '@shared/lib/latex';
import type { Page } from '@shared/http/page';
import { notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import type { Actor } from '@server/http/authorize';
import { MessageRow } from '@server/mail/message.model';
import { queueMessage } from '@server/mail/outbox';
import { accountById, accountsById, issueToken, peekToken, type PersonView } from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { talkTitle } from '@server/features/talks/talks.service';
import { publishedProgramme, type PublishedPlacement } from '@server/features/programme/programme.service';
import { invitationText } from './calendar-text';
import { calendarLetter } from './messages.mail';
import { CalendarFeedRow, CalendarInvitationRow } from './messages.model';

const ORGANIZER = { name: env.INSTITUTE_NAME, email: env.OFFICE_EMAIL };

/**
 * Brings everybody's calendar in line with the published programme: sends exactly the messages that are owed. Idempotent:
 * the state of each invitation is saved in the same transaction as its letter.
 */
export async function syncInvitations(eventId: string): Promise<number> {
  const programme = await publishedProgramme(eventId);
  const placements = new Map((programme?.placements ?? []).map((placement) => [placement.talkId, placement]));
  return transaction(async () => {
    const sent = await CalendarInvitationRow.findAll({ where: { eventId } });
    const changes = invitationChanges(sent, [...placements.values()]);
    const people = await accountsById(changes.map((change) => change.accountId));
    for (const change of changes) await carryOut(eventId, change, placements.get(change.talkId), sent, people);
    return changes.length;
  });
}

async function carryOut(
  eventId: string,
  change: InvitationChange,
  placement: PublishedPlacement | undefined,
  sent: CalendarInvitationRow[],
  people: Map<string, PersonView>,
): Promise<void> {
  const { method, sequence, startsAt, endsAt, roomName, talkId, accountId } = change;
  const fields = { sequence, lastMethod: method, startsAt, endsAt, roomName, answer: null, answeredAt: null };
  const before = sent.find((row) => row.id === change.invitationId);
  const row = before ? await before.update(fields) : await CalendarInvitationRow.create({ id: newId(), eventId, talkId, accountId, uid: randomUUID(), ...fields });
  const person = people.get(accountId) as PersonView;
  const event = await eventById(eventId);
  const { title, word } = placement ?? (await titleOf(talkId));
  const summary = plainLatex(title).replace(/\n/g, ' ');
  const url = `${env.BASE_URL}/events/${event.slug}/programme`;
  const token = await issueToken({ purpose: 'calendar-answer', accountId, subjectId: row.id, hours: 24 * 400 });
  const item = { uid: row.uid, sequence, startsAt, endsAt, summary, description: `${word}. ${event.title}`, location: `${roomName}, ${event.venue}, ${event.town}`, url, cancelled: method === 'CANCEL', stamp: new Date(), attendee: { name: person.printedName, email: person.email } };
  await queueMessage({
    letter: method === 'CANCEL' ? 'calendar.cancel' : sequence > 0 ? 'calendar.update' : 'calendar.request',
    accountId,
    eventId,
    subjectId: talkId,
    to: { name: person.printedName, address: person.email },
    replyTo: env.OFFICE_EMAIL,
    dedupKey: `calendar:${row.uid}:${sequence}`,
    mail: calendarLetter({ method, sequence, name: person.printedName, event, word, title: summary, startsAt, endsAt, roomName, url, answerUrl: `${env.BASE_URL}/calendar-answer/${token}` }),
    calendar: { method, content: invitationText(method, item, ORGANIZER) },
  });
}

async function titleOf(talkId: string): Promise<{ title: string; word: string }> {
  return { title: await talkTitle(talkId), word: 'Talk' };
}

/** An invitation by the link of its letter. */
async function invitationByToken(token: string): Promise<CalendarInvitationRow> {
  const { subjectId } = await peekToken('calendar-answer', token);
  const row = await CalendarInvitationRow.findByPk(subjectId as string);
  if (!row) throw notFound('This invitation');
  return row;
}

export async function readAnswer(token: string) {
  return presentAnswer(await invitationByToken(token));
}

async function presentAnswer(row: CalendarInvitationRow) {
  const [event, { title }] = await Promise.all([eventById(row.eventId), titleOf(row.talkId)]);
  return { eventTitle: event.title, talkTitle: plainLatex(title), startsAt: row.startsAt, endsAt: row.endsAt, timeZone: event.timeZone, roomName: row.roomName, answer: row.answer, cancelled: row.lastMethod === 'CANCEL' };
}

export async function recordAnswer(token: string, answer: 'ACCEPTED' | 'TENTATIVE' | 'DECLINED') {
  const row = await invitationByToken(token);
  await transaction(() => row.update({ answer, answeredAt: new Date() }));
  return presentAnswer(row);
}

/** A METHOD:REPLY that came by mail. Ignored (false) when it is from somebody else, unknown, or for an older time. */
export async function recordReply(reply: { uid: string; attendee: string; partstat: string; sequence: number }): Promise<boolean> {
  if (!['ACCEPTED', 'TENTATIVE', 'DECLINED'].includes(reply.partstat)) return false;
  const row = await CalendarInvitationRow.findOne({ where: { uid: reply.uid } });
  const person = row && (await accountById(row.accountId));
  if (!row || !person || person.email.toLowerCase() !== reply.attendee.toLowerCase()) return false;
  if (row.lastMethod !== 'REQUEST' || reply.sequence < row.sequence) return false;
  await transaction(() => row.update({ answer: reply.partstat, answeredAt: new Date() }));
  return true;
}

export async function answersOf(eventId: string) {
  const rows = await CalendarInvitationRow.findAll({ where: { eventId } });
  const people = await accountsById(rows.map((row) => row.accountId));
  return rows.map((row) => ({ talkId: row.talkId, accountId: row.accountId, printedName: people.get(row.accountId)?.printedName ?? '', answer: row.answer, sequence: row.sequence, method: row.lastMethod }));
}

export const invitationsOfTalk = (talkId: string): Promise<CalendarInvitationRow[]> => CalendarInvitationRow.findAll({ where: { talkId } });

/** The secret part of one's own feed address; made when there is none, new when asked. */
export async function myFeedToken(actor: Actor, renew: boolean): Promise<string> {
  return transaction(async () => {
    const row = await CalendarFeedRow.findOne({ where: { accountId: actor.accountId } });
    const token = randomBytes(32).toString('base64url');
    if (row && !renew) return row.token;
    if (row) await row.update({ token });
    else await CalendarFeedRow.create({ id: newId(), accountId: actor.accountId, token });
    return token;
  });
}

const present = (row: MessageRow): MessageListRow => ({
  id: row.id,
  letter: row.letter,
  toName: row.toName,
  toAddress: row.toAddress,
  subject: row.subject,
  state: row.state,
  attempts: row.attempts,
  lastError: row.lastError,
  queuedAt: row.createdAt.toISOString(),
  sentAt: row.sentAt?.toISOString() ?? null,
  hasCalendar: row.calendarMethod !== null,
});

/** Messages, the latest first; of one event, or of all. */
export async function listMessages(eventId: string | null, query: { cursor?: string; limit: number; state?: string; q?: string }): Promise<Page<MessageListRow>> {
  const like = query.q && `%${query.q.replace(/[\\%_]/g, (c) => `\\${c}`)}%`;
  const rows = await MessageRow.findAll({
    where: {
      [Op.and]: [
        eventId ? { eventId } : {},
        query.state ? { state: query.state } : {},
        like ? { [Op.or]: [{ toName: { [Op.like]: like } }, { toAddress: { [Op.like]: like } }, { subject: { [Op.like]: like } }] } : {},
        query.cursor ? { id: { [Op.lt]: query.cursor } } : {},
      ],
    },
    order: [['id', 'DESC']],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  return { items: page.map(present), next: rows.length > query.limit ? (page[page.length - 1]?.id ?? null) : null };
}

export async function readMessage(eventId: string, id: string): Promise<MessageListRow & { text: string }> {
  const row = await MessageRow.findOne({ where: { id, eventId } });
  if (!row) throw notFound('This message');
  // The links of a letter open doors that are its reader's alone.
  return { ...present(row), text: row.text.replace(/(\/(?:speaker-invitation|invitation|verify|reset|calendar-answer)\/)[\w-]+/g, '$1…') };
}

/** Failed messages of an event. */
export const failedMessages = (eventId: string): Promise<number> => MessageRow.count({ where: { eventId, state: 'failed' } });
