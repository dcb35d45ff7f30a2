import { Op } from 'sequelize';
import type { RoomFeature } from '@shared/features/events/events.contract';
import type { Talk, TalkKind, TalkPart, TalkState } from '@shared/features/talks/talks.contract';
import { owesAbstract, stepRefusal } from '@shared/features/talks/talks.rules';
import { conflict, forbidden, notFound } from '@shared/http/problem';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { accountsById, recordAudit } from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { talkDecided, talkWithdrawn } from './talks.jobs';
import {
  ConsentRow,
  CourseRow,
  MaterialRow,
  MaterialVersionRow,
  PrerequisiteRow,
  PresenceRow,
  TalkPersonRow,
  TalkRow,
} from './talks.model';
import { canDecideTalk, canReadTalk, canWithdrawTalk, isOrganiser } from './talks.policy';
import { labelOf, presentTalk } from './talks.presenter';

/** A talk as the programme needs it. */
export interface ProgrammeTalk {
  id: string;
  kind: TalkKind;
  title: string;
  minutes: number;
  questionMinutes: number;
  courseId: string | null;
  number: number | null;
  exerciseOf: string | null;
  needs: RoomFeature[];
  expectedAudience: number | null;
  msc: string[];
  state: TalkState;
  abstract: string;
  coAuthors: { name: string; affiliation: string }[];
  invitation: string | null;
  abstractAt: Date | null;
  version: number;
  people: { accountId: string; part: TalkPart; printedName: string; affiliation: string }[];
}

/** Every talk of an event with its people, in order of making. */
export async function talksForProgramme(eventId: string): Promise<ProgrammeTalk[]> {
  const talks = await TalkRow.ofEvent(eventId);
  const people = await TalkPersonRow.findAll({
    where: { talkId: talks.map((talk) => talk.id) },
    order: ['talkId', 'position'],
  });
  const persons = await accountsById(people.map((person) => person.accountId));
  const byTalk = new Map<string, TalkPersonRow[]>();
  for (const person of people) byTalk.set(person.talkId, [...(byTalk.get(person.talkId) ?? []), person]);
  return talks.map((talk) => ({
    id: talk.id,
    kind: talk.kind,
    title: talk.title,
    minutes: talk.minutes,
    questionMinutes: talk.questionMinutes,
    courseId: talk.courseId,
    number: talk.number,
    exerciseOf: talk.exerciseOf,
    needs: talk.needs,
    expectedAudience: talk.expectedAudience,
    msc: talk.msc,
    state: talk.state,
    abstract: talk.abstract,
    coAuthors: talk.coAuthors,
    invitation: talk.invitation,
    abstractAt: talk.abstractAt,
    version: talk.version,
    people: (byTalk.get(talk.id) ?? []).map((person) => ({
      accountId: person.accountId,
      part: person.part,
      printedName: persons.get(person.accountId)?.printedName ?? '',
      affiliation: persons.get(person.accountId)?.affiliation ?? '',
    })),
  }));
}

export const coursesOf = (eventId: string): Promise<CourseRow[]> =>
  CourseRow.findAll({ where: { eventId }, order: ['letter'] });
export const prerequisitesOf = (eventId: string): Promise<PrerequisiteRow[]> =>
  PrerequisiteRow.findAll({ where: { eventId } });
export const presencesOf = (eventId: string): Promise<PresenceRow[]> =>
  PresenceRow.findAll({ where: { eventId } });

/** Ids of events in which the person has a part in a talk that is on. */
export async function speakingIn(
  accountId: string,
  parts: TalkPart[] = ['speaker', 'tutor', 'chair'],
): Promise<Set<string>> {
  const mine = await TalkPersonRow.findAll({ where: { accountId, part: parts } });
  const talks = await TalkRow.findAll({
    where: { id: mine.map((row) => row.talkId), state: { [Op.notIn]: ['declined', 'withdrawn'] } },
  });
  return new Set(talks.map((talk) => talk.eventId));
}

/** Talks in which a person has a part, the latest first. */
export async function talksOfPerson(accountId: string) {
  const mine = await TalkPersonRow.findAll({ where: { accountId } });
  const talks = await TalkRow.findAll({
    where: { id: mine.map((row) => row.talkId) },
    order: [['id', 'DESC']],
  });
  const courses = new Map(
    (await CourseRow.findAll({ where: { id: talks.flatMap((talk) => talk.courseId ?? []) } })).map((row) => [
      row.id,
      row,
    ]),
  );
  return Promise.all(
    talks.map(async (talk) => {
      const event = await eventById(talk.eventId);
      return {
        id: talk.id,
        eventSlug: event.slug,
        eventTitle: event.title,
        kind: talk.kind,
        label: labelOf(talk, courses),
        title: talk.title,
        minutes: talk.minutes,
        state: talk.state,
        part: mine.find((row) => row.talkId === talk.id)?.part as TalkPart,
        abstractAt: talk.abstractAt?.toISOString() ?? null,
      };
    }),
  );
}

export interface TalkCounts {
  kind: TalkKind;
  handedIn: number;
  missing: number;
}

/** Abstracts in and missing, by kind, of talks that are on and owe one. */
export async function talkCounts(eventId: string): Promise<TalkCounts[]> {
  const talks = (await TalkRow.ofEvent(eventId)).filter(
    (talk) => owesAbstract(talk.kind) && !['declined', 'withdrawn'].includes(talk.state),
  );
  const kinds = [...new Set(talks.map((talk) => talk.kind))];
  return kinds.map((kind) => {
    const own = talks.filter((talk) => talk.kind === kind);
    const handedIn = own.filter((talk) => talk.abstractAt !== null).length;
    return { kind, handedIn, missing: own.length - handedIn };
  });
}

/** Loads a talk of an event with its people. @throws 404. */
export async function requireTalk(
  eventId: string,
  talkId: string,
): Promise<{ talk: TalkRow; people: TalkPersonRow[] }> {
  const talk = await TalkRow.findOne({ where: { id: talkId, eventId } });
  if (!talk) throw notFound('This talk');
  return { talk, people: await TalkPersonRow.ofTalks(talkId) };
}

export const subjectOf = (talk: TalkRow, people: TalkPersonRow[]) => ({
  eventId: talk.eventId,
  state: talk.state,
  people,
});

/** A talk as this reader gets it. @throws 404 when it is not theirs to see. */
export async function readTalk(actor: Actor, eventId: string, talkId: string): Promise<Talk> {
  const { talk, people } = await requireTalk(eventId, talkId);
  if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
  const materials = await MaterialRow.findAll({ where: { talkId }, order: ['kind'] });
  const versions = await MaterialVersionRow.findAll({
    where: { materialId: materials.map((row) => row.id) },
    order: [['number', 'DESC']],
  });
  const persons = await accountsById([
    ...people.map((person) => person.accountId),
    ...versions.map((row) => row.uploadedBy),
  ]);
  const consent = await ConsentRow.findOne({
    where: { subjectId: talkId, purpose: 'recording', withdrawnAt: null },
  });
  return presentTalk(
    {
      talk,
      eventSlug: (await eventById(eventId)).slug,
      people,
      persons,
      materials: materials.map((material) => ({
        material,
        versions: versions.filter((row) => row.materialId === material.id),
      })),
      recordingConsent: consent !== null,
    },
    actor,
  );
}

/** Accepts or declines; the speaker hears by letter. @throws 409 when the state forbids it. */
export async function decideTalk(
  actor: Actor,
  eventId: string,
  talkId: string,
  version: number | undefined,
  input: { decision: 'accepted' | 'declined'; note: string },
): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!isOrganiser(actor, eventId)) throw forbidden();
    if (version !== undefined) sameVersion(talk.version, version);
    const refusal = stepRefusal(talk.state, input.decision);
    if (refusal || !canDecideTalk(actor, subjectOf(talk, people)))
      throw conflict('talk.step', refusal ?? 'This talk is not waiting for a decision.');
    const before = talk.state;
    await talk.update({ state: input.decision, decisionNote: input.note });
    await recordAudit({
      actor,
      action: 'talks.decided',
      subject: 'talk',
      subjectId: talkId,
      eventId,
      before: { state: before },
      after: { state: input.decision },
    });
    await announce(talkDecided, { talkId, decision: input.decision, note: input.note });
  });
  return readTalk(actor, eventId, talkId);
}

export async function withdrawTalk(
  actor: Actor,
  eventId: string,
  talkId: string,
  version: number | undefined,
  note: string,
): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canWithdrawTalk(actor, subjectOf(talk, people)))
      throw conflict('talk.step', `The talk is ${talk.state}.`);
    if (version !== undefined) sameVersion(talk.version, version);
    const before = talk.state;
    await talk.update({ state: 'withdrawn', decisionNote: note });
    await recordAudit({
      actor,
      action: 'talks.withdrawn',
      subject: 'talk',
      subjectId: talkId,
      eventId,
      before: { state: before },
      after: { note },
    });
    await announce(talkWithdrawn, { talkId });
  });
  return readTalk(actor, eventId, talkId);
}

/** Title of a talk, in LaTeX. */
export const talkTitle = async (talkId: string): Promise<string> =>
  (await TalkRow.findByPk(talkId))?.title ?? 'Talk';

/** The event that a talk belongs to. */
export async function eventOfTalk(talkId: string): Promise<string> {
  const talk = await TalkRow.findByPk(talkId);
  if (!talk) throw notFound('This talk');
  return talk.eventId;
}
