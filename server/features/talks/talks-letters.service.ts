import { localToInstant } from '@shared/lib/time';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import { on, type Reaction } from '@server/jobs/job';
import { queueMessage } from '@server/mail/outbox';
import {
  accountById,
  accountsById,
  holdersOf,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import { deadlinesOf, eventById } from '@server/features/events/events.service';
import { invitationAnswered, speakerInvited, talkDecided } from './talks.jobs';
import { abstractReminderLetter, answerLetter, decisionLetter, speakerInvitationLetter } from './talks.mail';
import { TalkPersonRow, TalkRow } from './talks.model';
import { talksForProgramme } from './talks.service';
import { owesAbstract } from '@shared/features/talks/talks.rules';

async function talkAndEvent(talkId: string) {
  const talk = (await TalkRow.findByPk(talkId)) as TalkRow;
  return { talk, event: await eventById(talk.eventId) };
}

/** What happens by letter after a fact about a talk. */
export const talkReactions: readonly Reaction[] = [
  on(speakerInvited, 'invitation letter', async ({ talkId, accountId, token }) => {
    const { talk, event } = await talkAndEvent(talkId);
    const person = (await accountById(accountId)) as PersonView;
    await queueMessage({
      letter: 'talks.invitation',
      accountId,
      eventId: event.id,
      subjectId: talkId,
      to: { name: person.printedName, address: person.email },
      replyTo: event.contactEmail,
      dedupKey: `talks.invitation:${talkId}:${accountId}`,
      mail: speakerInvitationLetter({
        name: person.printedName,
        event,
        kind: talk.kind,
        minutes: talk.minutes,
        questionMinutes: talk.questionMinutes,
        message: talk.invitationMessage,
        url: `${env.BASE_URL}/speaker-invitation/${token}`,
      }),
    });
  }),
  on(invitationAnswered, 'tell the organisers', async ({ talkId, accountId, answer, note }) => {
    const { event } = await talkAndEvent(talkId);
    const speaker = (await accountById(accountId)) as PersonView;
    const organisers = await holdersOf('event', event.id, 'organiser');
    await transaction(async () => {
      for (const organiser of organisers) {
        await queueMessage({
          letter: 'talks.invitation_answered',
          accountId: organiser.id,
          eventId: event.id,
          subjectId: talkId,
          to: { name: organiser.printedName, address: organiser.email },
          dedupKey: `talks.answered:${talkId}:${organiser.id}:${answer}`,
          mail: answerLetter({
            organiser: organiser.printedName,
            speaker: speaker.printedName,
            event,
            answer,
            note,
            url: `${env.BASE_URL}/organise/${event.slug}/talks?talk=${talkId}`,
          }),
        });
      }
    });
  }),
  on(talkDecided, 'decision letter', async ({ talkId, decision, note }) => {
    const { talk, event } = await talkAndEvent(talkId);
    const people = (await TalkPersonRow.ofTalks(talkId)).filter((person) => person.part === 'speaker');
    const persons = await accountsById(people.map((person) => person.accountId));
    await transaction(async () => {
      for (const person of persons.values()) {
        await queueMessage({
          letter: 'talks.decision',
          accountId: person.id,
          eventId: event.id,
          subjectId: talkId,
          to: { name: person.printedName, address: person.email },
          replyTo: event.contactEmail,
          dedupKey: `talks.decision:${talkId}:${person.id}:${decision}`,
          mail: decisionLetter({
            name: person.printedName,
            event,
            title: talk.title,
            decision,
            note,
            url: `${env.BASE_URL}/events/${event.slug}/my-talks/${talkId}`,
          }),
        });
      }
    });
  }),
] as unknown as Reaction[];

/** Writes to everybody who owes an abstract, at most once a day each. Returns how many letters were queued. */
export async function remindSpeakers(eventId: string, now: Date): Promise<number> {
  const event = await eventById(eventId);
  const deadline = (await deadlinesOf(eventId)).find((row) => row.kind === 'abstracts_due');
  const until = deadline ? localToInstant(deadline.date, deadline.time, event.timeZone) : null;
  const owing = (await talksForProgramme(eventId)).filter(
    (talk) => owesAbstract(talk.kind) && talk.abstractAt === null && talk.state === 'accepted',
  );
  const persons = await accountsById(owing.flatMap((talk) => talk.people.map((person) => person.accountId)));
  let written = 0;
  await transaction(async () => {
    for (const talk of owing) {
      for (const { accountId } of talk.people.filter((person) => person.part === 'speaker')) {
        const person = persons.get(accountId) as PersonView;
        await queueMessage({
          letter: 'talks.abstract_reminder',
          accountId,
          eventId,
          subjectId: talk.id,
          to: { name: person.printedName, address: person.email },
          replyTo: event.contactEmail,
          dedupKey: `talks.reminder:${talk.id}:${accountId}:${now.toISOString().slice(0, 10)}`,
          mail: abstractReminderLetter({
            name: person.printedName,
            event,
            title: talk.title,
            until,
            url: `${env.BASE_URL}/events/${event.slug}/my-talks/${talk.id}`,
          }),
        });
        written += 1;
      }
    }
  });
  return written;
}
