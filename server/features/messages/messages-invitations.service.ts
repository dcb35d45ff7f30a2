import { randomUUID } from 'node:crypto';
import {
  answerCounts,
  answerOf,
  invitationChanges,
  type Answer,
  type InvitationChange,
} from '@shared/features/messages/invitations.rules';
import { plainLatex } from '@shared/lib/latex';
import { conflict, notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import { queueMessage } from '@server/mail/outbox';
import {
  accountById,
  accountsById,
  issueToken,
  peekToken,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { talksForProgramme, talkTitle } from '@server/features/talks/talks.service';
import { publishedProgramme, type PublishedPlacement } from '@server/features/programme/programme.service';
import { invitationText } from './calendar-text';
import { calendarLetter } from './messages.mail';
import type { CalendarReply } from './calendar-reply';
import { CalendarInvitationRow } from './messages.model';

const ORGANIZER = { name: env.INSTITUTE_NAME, email: env.OFFICE_EMAIL };

/**
 * Brings everybody's calendar in line with the published programme: sends exactly the messages that are owed. Idempotent:
 * the state of each invitation is saved in the same transaction as its letter.
 */
export async function syncInvitations(eventId: string): Promise<number> {
  return transaction(async () => {
    // Read inside, so that what is compared and what is saved belong to the same revision.
    const programme = await publishedProgramme(eventId);
    const placements = new Map(
      (programme?.placements ?? []).map((placement) => [placement.talkId, placement]),
    );
    const sent = await CalendarInvitationRow.findAll({ where: { eventId } });
    const changes = invitationChanges(sent, [...placements.values()]);
    const people = await accountsById(changes.map((change) => change.accountId));
    for (const change of changes)
      await carryOut(eventId, change, placements.get(change.talkId), sent, people);
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
  const person = people.get(accountId);
  if (!person) return; // erased since: nobody is left to write to
  const fields = { sequence, lastMethod: method, startsAt, endsAt, roomName, answer: null, answeredAt: null };
  const before = sent.find((row) => row.id === change.invitationId);
  const row = before
    ? await before.update(fields)
    : await CalendarInvitationRow.create({
        id: newId(),
        eventId,
        talkId,
        accountId,
        uid: randomUUID(),
        ...fields,
      });
  const event = await eventById(eventId);
  const { title, word } = placement ?? (await titleOf(talkId));
  const summary = plainLatex(title).replace(/\s+/g, ' ').trim();
  const url = `${env.BASE_URL}/events/${event.slug}/programme`;
  const token = await issueToken({
    purpose: 'calendar-answer',
    accountId,
    subjectId: row.id,
    hours: 24 * 400,
  });
  const item = {
    uid: row.uid,
    sequence,
    startsAt,
    endsAt,
    summary,
    description: `${word}. ${event.title}`,
    location: `${roomName}, ${event.venue}, ${event.town}`,
    url,
    cancelled: method === 'CANCEL',
    stamp: new Date(),
    attendee: { name: person.printedName, email: person.email },
  };
  await queueMessage({
    letter: method === 'CANCEL' ? 'calendar.cancel' : sequence > 0 ? 'calendar.update' : 'calendar.request',
    accountId,
    eventId,
    subjectId: talkId,
    to: { name: person.printedName, address: person.email },
    replyTo: env.OFFICE_EMAIL,
    dedupKey: `calendar:${row.uid}:${sequence}`,
    mail: calendarLetter({
      method,
      sequence,
      name: person.printedName,
      event,
      word,
      title: summary,
      startsAt,
      endsAt,
      roomName,
      url,
      answerUrl: `${env.BASE_URL}/calendar-answer/${token}`,
    }),
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
  return {
    eventTitle: event.title,
    eventSlug: event.slug,
    talkTitle: plainLatex(title),
    startsAt: row.startsAt,
    endsAt: row.endsAt,
    timeZone: event.timeZone,
    roomName: row.roomName,
    answer: row.answer,
    cancelled: row.lastMethod === 'CANCEL',
  };
}

/** Records the answer of the link's owner. @throws 409 when the talk is no longer in the programme. */
export async function recordAnswer(token: string, answer: Answer) {
  const row = await transaction(async () => {
    const found = await invitationByToken(token);
    if (found.lastMethod === 'CANCEL')
      throw conflict(
        'messages.cancelled',
        'This is no longer in the programme, so there is nothing to answer.',
      );
    return found.update({ answer, answeredAt: new Date() });
  });
  return presentAnswer(row);
}

/**
 * Records a METHOD:REPLY that came by mail. Ignored (false) when it is unknown, from somebody else (RFC 6047 section
 * 2.2), for another time than the present one, or older than the answer that is known (RFC 5546 section 2.1.5).
 */
export function recordReply(reply: CalendarReply, now: Date): Promise<boolean> {
  const answer = answerOf(reply.partstat);
  if (!answer) return Promise.resolve(false);
  return transaction(async () => {
    const row = await CalendarInvitationRow.findOne({ where: { uid: reply.uid } });
    const person = row && (await accountById(row.accountId));
    if (!row || person?.email.toLowerCase() !== reply.attendee || !answerCounts(row, reply)) return false;
    const stamp = reply.stamp && reply.stamp < now ? reply.stamp : now;
    if (row.answeredAt && stamp < row.answeredAt) return false;
    await row.update({ answer, answeredAt: stamp });
    return true;
  });
}

/** What became of the invitations of an event, in the order of time: for the organiser. */
export async function answersOf(eventId: string) {
  const rows = await CalendarInvitationRow.findAll({ where: { eventId }, order: ['startsAt', 'id'] });
  const people = await accountsById(rows.map((row) => row.accountId));
  const titles = new Map((await talksForProgramme(eventId)).map((talk) => [talk.id, talk.title]));
  return rows.map(({ talkId, accountId, startsAt, roomName, answer, sequence, lastMethod }) => ({
    talkId,
    talkTitle: plainLatex(titles.get(talkId) ?? 'Talk'),
    startsAt,
    roomName,
    accountId,
    printedName: people.get(accountId)?.printedName ?? '',
    answer,
    sequence,
    method: lastMethod,
  }));
}

export const invitationsOfTalk = (talkId: string): Promise<CalendarInvitationRow[]> =>
  CalendarInvitationRow.findAll({ where: { talkId } });
