import type { Request, Response } from 'express';
import { conflict, forbidden, invalid } from '@shared/http/problem';
import type { Talk } from '@shared/features/talks/talks.contract';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { announce } from '@server/jobs/job';
import {
  accountById,
  ensureAccountForEmail,
  issueToken,
  peekToken,
  recordAudit,
  redeemToken,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import {
  hashPassword,
  openSession,
  refuseWeak,
  setPassword,
} from '@server/features/accounts/accounts-sign-in.service';
import { eventById } from '@server/features/events/events.service';
import { invitationAnswered, speakerInvited } from './talks.jobs';
import { PresenceRow, TalkPersonRow, TalkRow } from './talks.model';
import { isOrganiser } from './talks.policy';
import { readTalk } from './talks.service';

const PURPOSE = 'speak';
const DAYS = 60;

export interface InviteInput {
  email: string;
  givenName: string;
  familyName: string;
  affiliation: string;
  kind: 'plenary' | 'invited' | 'course_lecture';
  minutes: number;
  questionMinutes: number;
  message: string;
}

/** Invites a speaker: an account without a password where there is none, the talk as a draft, and a letter with a link. */
export async function inviteSpeaker(actor: Actor, eventId: string, input: InviteInput): Promise<Talk> {
  if (!isOrganiser(actor, eventId)) throw forbidden();
  if (input.kind === 'course_lecture')
    throw invalid({ kind: 'Lecturers are named when the course is made.' });
  const id = await transaction(async () => {
    const { email, givenName, familyName, affiliation } = input;
    const person = await ensureAccountForEmail({ email, givenName, familyName, affiliation });
    const talk = await TalkRow.create({
      id: newId(),
      eventId,
      kind: input.kind,
      title: 'Title to follow',
      minutes: input.minutes,
      questionMinutes: input.questionMinutes,
      state: 'draft',
      invitation: 'invited',
      invitationMessage: input.message,
      coAuthors: [],
      msc: [],
      references: [],
      needs: [],
    });
    await TalkPersonRow.create({
      id: newId(),
      talkId: talk.id,
      accountId: person.id,
      part: 'speaker',
      position: 0,
    });
    const token = await issueToken({
      purpose: PURPOSE,
      accountId: person.id,
      subjectId: talk.id,
      hours: DAYS * 24,
    });
    await recordAudit({
      actor,
      action: 'talks.speaker_invited',
      subject: 'talk',
      subjectId: talk.id,
      eventId,
      after: { name: person.printedName },
    });
    await announce(speakerInvited, { talkId: talk.id, accountId: person.id, token });
    return talk.id;
  });
  return readTalk(actor, eventId, id);
}

export async function readSpeakerInvitation(token: string) {
  const row = await peekToken(PURPOSE, token);
  const talk = (await TalkRow.findByPk(row.subjectId as string)) as TalkRow;
  const person = (await accountById(row.accountId as string)) as PersonView;
  const event = await eventById(talk.eventId);
  return {
    eventSlug: event.slug,
    eventTitle: event.title,
    startsOn: event.startsOn,
    endsOn: event.endsOn,
    town: event.town,
    talkId: talk.id,
    kind: talk.kind,
    minutes: talk.minutes,
    questionMinutes: talk.questionMinutes,
    name: person.printedName,
    email: person.email,
    message: talk.invitationMessage,
    answer: talk.invitation ?? ('invited' as const),
    hasPassword: person.hasPassword,
  };
}

/**
 * Accepts or declines by the link. The link proves the address, so accepting opens a new account (with a password) and
 * signs in; an account that has a password is not opened by a link: that person signs in.
 */
export async function answerSpeakerInvitation(
  req: Request,
  res: Response,
  actor: Actor | null,
  token: string,
  input: { answer: 'accepted' | 'declined'; note: string; password?: string },
): Promise<{ accountId: string | undefined; eventSlug: string; talkId: string }> {
  const offered = await readSpeakerInvitation(token);
  const person = (await peekToken(PURPOSE, token)).accountId as string;
  const setsPassword = input.answer === 'accepted' && !offered.hasPassword;
  if (setsPassword) {
    if (!input.password)
      throw invalid({ password: 'Choose a password: it opens your pages for abstract, slides and travel.' });
    refuseWeak(input.password, { email: offered.email, name: offered.name });
  }
  const passwordHash = setsPassword ? await hashPassword(input.password as string) : undefined;
  await transaction(async () => {
    await redeemToken(PURPOSE, token);
    const talk = (await TalkRow.findByPk(offered.talkId)) as TalkRow;
    if (talk.invitation !== 'invited')
      throw conflict('talk.answered', `This invitation has been ${talk.invitation} already.`);
    await talk.update({ invitation: input.answer, state: input.answer, decisionNote: input.note });
    if (passwordHash) await setPassword(person, passwordHash);
    if (
      input.answer === 'accepted' &&
      !(await PresenceRow.findOne({ where: { eventId: talk.eventId, accountId: person } }))
    ) {
      await PresenceRow.create({
        id: newId(),
        eventId: talk.eventId,
        accountId: person,
        blocked: [],
        wishes: '',
      });
    }
    const who = { accountId: person, email: offered.email, printedName: offered.name, grants: [] };
    await recordAudit({
      actor: who,
      action: `talks.invitation_${input.answer}`,
      subject: 'talk',
      subjectId: talk.id,
      eventId: talk.eventId,
      after: { note: input.note },
    });
    await announce(invitationAnswered, {
      talkId: talk.id,
      accountId: person,
      answer: input.answer,
      note: input.note,
    });
  });
  if (passwordHash) await openSession(req, res, person);
  return {
    accountId: passwordHash ? person : actor?.accountId,
    eventSlug: offered.eventSlug,
    talkId: offered.talkId,
  };
}
