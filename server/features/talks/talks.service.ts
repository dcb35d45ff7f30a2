import { Op } from 'sequelize';
import type { RoomFeature } from '@shared/features/events/events.contract';
import type { AbstractInput, Talk, TalkKind, TalkListRow, TalkPart, TalkState } from '@shared/features/talks/talks.contract';
import { parseLatex } from '@shared/features/talks/latex.rules';
import { needsSpeaker, owesAbstract, stepRefusal, usualMinutes } from '@shared/features/talks/talks.rules';
import { conflict, forbidden, invalid, notFound } from '@shared/http/problem';
import type { Page } from '@shared/http/page';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { holds, type Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { accountById, accountsById, ensureAccountForEmail, recordAudit } from '@server/features/accounts/accounts.service';
import { deadlinesOf, eventById, requireEvent } from '@server/features/events/events.service';
import { localToInstant } from '@shared/lib/time';
import { talkDecided, talkSubmitted, talkWithdrawn } from './talks.jobs';
import { ConsentRow, CourseRow, MaterialRow, MaterialVersionRow, PrerequisiteRow, PresenceRow, TalkPersonRow, TalkRow } from './talks.model';
import { canDecideTalk, canEditTalk, canReadTalk, canWithdrawTalk, canWriteAbstract, isOrganiser } from './talks.policy';
import { labelOf, presentTalk, presentTalkRow } from './talks.presenter';

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
  const people = await TalkPersonRow.findAll({ where: { talkId: talks.map((talk) => talk.id) }, order: ['talkId', 'position'] });
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

export const coursesOf = (eventId: string): Promise<CourseRow[]> => CourseRow.findAll({ where: { eventId }, order: ['letter'] });
export const prerequisitesOf = (eventId: string): Promise<PrerequisiteRow[]> => PrerequisiteRow.findAll({ where: { eventId } });
export const presencesOf = (eventId: string): Promise<PresenceRow[]> => PresenceRow.findAll({ where: { eventId } });

/** Ids of events in which the person has a part in a talk that is on. */
export async function speakingIn(accountId: string, parts: TalkPart[] = ['speaker', 'tutor', 'chair']): Promise<Set<string>> {
  const mine = await TalkPersonRow.findAll({ where: { accountId, part: parts } });
  const talks = await TalkRow.findAll({ where: { id: mine.map((row) => row.talkId), state: { [Op.notIn]: ['declined', 'withdrawn'] } } });
  return new Set(talks.map((talk) => talk.eventId));
}

/** Talks in which a person has a part, the latest first. */
export async function talksOfPerson(accountId: string) {
  const mine = await TalkPersonRow.findAll({ where: { accountId } });
  const talks = await TalkRow.findAll({ where: { id: mine.map((row) => row.talkId) }, order: [['id', 'DESC']] });
  const courses = new Map((await CourseRow.findAll({ where: { id: talks.flatMap((talk) => talk.courseId ?? []) } })).map((row) => [row.id, row]));
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
  const talks = (await TalkRow.ofEvent(eventId)).filter((talk) => owesAbstract(talk.kind) && !['declined', 'withdrawn'].includes(talk.state));
  const kinds = [...new Set(talks.map((talk) => talk.kind))];
  return kinds.map((kind) => {
    const own = talks.filter((talk) => talk.kind === kind);
    const handedIn = own.filter((talk) => talk.abstractAt !== null).length;
    return { kind, handedIn, missing: own.length - handedIn };
  });
}

/** Loads a talk of an event with its people. @throws 404. */
export async function requireTalk(eventId: string, talkId: string): Promise<{ talk: TalkRow; people: TalkPersonRow[] }> {
  const talk = await TalkRow.findOne({ where: { id: talkId, eventId } });
  if (!talk) throw notFound('This talk');
  return { talk, people: await TalkPersonRow.ofTalks(talkId) };
}

export const subjectOf = (talk: TalkRow, people: TalkPersonRow[]) => ({ eventId: talk.eventId, state: talk.state, people });

/** A talk as this reader gets it. @throws 404 when it is not theirs to see. */
export async function readTalk(actor: Actor, eventId: string, talkId: string): Promise<Talk> {
  const { talk, people } = await requireTalk(eventId, talkId);
  if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
  const materials = await MaterialRow.findAll({ where: { talkId }, order: ['kind'] });
  const versions = await MaterialVersionRow.findAll({ where: { materialId: materials.map((row) => row.id) }, order: [['number', 'DESC']] });
  const persons = await accountsById([...people.map((person) => person.accountId), ...versions.map((row) => row.uploadedBy)]);
  const consent = await ConsentRow.findOne({ where: { subjectId: talkId, purpose: 'recording', withdrawnAt: null } });
  return presentTalk(
    {
      talk,
      eventSlug: (await eventById(eventId)).slug,
      people,
      persons,
      materials: materials.map((material) => ({ material, versions: versions.filter((row) => row.materialId === material.id) })),
      recordingConsent: consent !== null,
    },
    actor,
  );
}

/** Talks of an event, the latest first, by filters. Reviewers see no drafts. */
export async function listTalks(
  actor: Actor,
  eventId: string,
  query: { cursor?: string; limit: number; state?: TalkState; kind?: TalkKind; q?: string; missing?: 'abstract' | 'answer' | 'slides' },
): Promise<Page<TalkListRow>> {
  const like = query.q ? `%${query.q.replace(/[\\%_]/g, (c) => `\\${c}`)}%` : undefined;
  const named = like ? await talksWithPerson(eventId, query.q as string) : [];
  const rows = await TalkRow.findAll({
    where: {
      [Op.and]: [
        { eventId },
        query.state ? { state: query.state } : isOrganiser(actor, eventId) ? {} : { state: { [Op.ne]: 'draft' } },
        query.kind ? { kind: query.kind } : {},
        like ? { [Op.or]: [{ title: { [Op.like]: like } }, { id: named }] } : {},
        query.missing === 'abstract' ? { abstractAt: null, kind: ['plenary', 'invited', 'contributed', 'course_lecture'], state: ['draft', 'submitted', 'accepted'] } : {},
        query.missing === 'answer' ? { invitation: 'invited' } : {},
        query.cursor ? { id: { [Op.lt]: query.cursor } } : {},
      ],
    },
    order: [['id', 'DESC']],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  const ids = page.map((row) => row.id);
  const [people, courses, slides] = await Promise.all([
    TalkPersonRow.ofTalks(ids),
    coursesOf(eventId),
    MaterialRow.findAll({ where: { talkId: ids, kind: 'slides' }, attributes: ['talkId'] }),
  ]);
  const persons = await accountsById(people.map((person) => person.accountId));
  const courseById = new Map(courses.map((course) => [course.id, course]));
  const withSlides = new Set(slides.map((row) => row.talkId));
  return {
    items: page.map((talk) => presentTalkRow(talk, people.filter((person) => person.talkId === talk.id), persons, courseById, withSlides)),
    next: rows.length > query.limit ? (page[page.length - 1]?.id ?? null) : null,
  };
}

async function talksWithPerson(eventId: string, q: string): Promise<string[]> {
  const people = await TalkPersonRow.findAll({ where: { talkId: (await TalkRow.findAll({ where: { eventId }, attributes: ['id'] })).map((row) => row.id) } });
  const persons = await accountsById(people.map((person) => person.accountId));
  return people.filter((person) => persons.get(person.accountId)?.printedName.toLowerCase().includes(q.toLowerCase())).map((person) => person.talkId);
}

export interface PersonInput {
  accountId?: string;
  email?: string;
  givenName?: string;
  familyName?: string;
  part: TalkPart;
}

/** Puts the people of a talk in place; unknown addresses get an account without a password. */
export async function replacePeople(talkId: string, people: PersonInput[]): Promise<void> {
  await TalkPersonRow.destroy({ where: { talkId } });
  for (const [position, input] of people.entries()) {
    const accountId = input.accountId ?? (await accountOf(input, position));
    if (!(await accountById(accountId))) throw invalid({ [`people.${position}.accountId`]: 'This person is not known.' });
    await TalkPersonRow.create({ id: newId(), talkId, accountId, part: input.part, position });
  }
}

async function accountOf(input: PersonInput, position: number): Promise<string> {
  const { email, givenName, familyName } = input;
  if (!email || !givenName || !familyName) throw invalid({ [`people.${position}.email`]: 'Give an address and both names, or choose a person.' });
  return (await ensureAccountForEmail({ email, givenName, familyName })).id;
}

export interface StructureInput {
  kind: TalkKind;
  minutes: number;
  questionMinutes: number;
  courseId: string | null;
  number: number | null;
  exerciseOf: string | null;
  expectedAudience: number | null;
}

/** What must fit together in a talk's structure. @throws 422 with field errors. */
export async function refuseStructure(eventId: string, input: StructureInput, people: PersonInput[], talkId?: string): Promise<void> {
  const errors: Record<string, string> = {};
  if (input.questionMinutes >= input.minutes && input.kind !== 'exercise') errors.questionMinutes = 'Questions take the whole time.';
  if (input.courseId && !(await CourseRow.findOne({ where: { id: input.courseId, eventId } }))) errors.courseId = 'This course does not belong to the event.';
  if (input.kind === 'course_lecture' && (!input.courseId || !input.number)) errors.courseId ??= 'A course lecture needs its course and number.';
  if (input.exerciseOf) {
    const lecture = await TalkRow.findOne({ where: { id: input.exerciseOf, eventId, kind: 'course_lecture' } });
    if (!lecture || lecture.id === talkId) errors.exerciseOf = 'Choose a lecture of this event.';
  }
  if (input.kind === 'course_lecture' && input.courseId && input.number) {
    const taken = await TalkRow.findOne({ where: { courseId: input.courseId, number: input.number, kind: 'course_lecture', state: { [Op.ne]: 'withdrawn' } } });
    if (taken && taken.id !== talkId) errors.number = `Lecture ${input.number} of this course exists.`;
  }
  if (needsSpeaker(input.kind) && input.kind !== 'exercise' && !people.some((person) => person.part === 'speaker')) errors.people = 'Name at least one speaker.';
  if (Object.keys(errors).length > 0) throw invalid(errors);
}

/** Puts a talk on the list, accepted. */
export async function createTalk(actor: Actor, eventId: string, input: StructureInput & { title: string; people: PersonInput[] }): Promise<Talk> {
  const { people, title, ...structure } = input;
  const id = await transaction(async () => {
    if (!isOrganiser(actor, eventId)) throw forbidden();
    await refuseStructure(eventId, structure, people);
    const talk = await TalkRow.create({ id: newId(), eventId, title, ...structure, state: 'accepted', coAuthors: [], msc: [], references: [], needs: [] });
    await replacePeople(talk.id, people);
    await recordAudit({ actor, action: 'talks.created', subject: 'talk', subjectId: talk.id, eventId, after: { title, kind: structure.kind } });
    return talk.id;
  });
  return readTalk(actor, eventId, id);
}

/** Changes kind, length, course and people. */
export async function updateTalk(actor: Actor, eventId: string, talkId: string, version: number, input: StructureInput & { people: PersonInput[] }): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canEditTalk(actor, subjectOf(talk, people))) throw forbidden();
    sameVersion(talk.version, version);
    const { people: wanted, ...structure } = input;
    await refuseStructure(eventId, structure, wanted, talkId);
    const before = { kind: talk.kind, minutes: talk.minutes, people: people.map((person) => `${person.part}:${person.accountId}`) };
    talk.set(structure);
    talk.changed('updatedAt' as never, true);
    await talk.save();
    await replacePeople(talkId, wanted);
    await recordAudit({ actor, action: 'talks.updated', subject: 'talk', subjectId: talkId, eventId, before, after: structure });
  });
  return readTalk(actor, eventId, talkId);
}

/** Saves what was typed, also with mistakes in it: nothing a speaker writes is lost. */
export async function saveAbstract(actor: Actor, eventId: string, talkId: string, version: number, input: AbstractInput): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canWriteAbstract(actor, subjectOf(talk, people))) throw forbidden('The abstract of this talk can’t be changed any more.');
    sameVersion(talk.version, version);
    talk.set(input);
    talk.changed('updatedAt' as never, true);
    await talk.save();
    await recordAudit({ actor, action: 'talks.abstract_saved', subject: 'talk', subjectId: talkId, eventId });
  });
  return readTalk(actor, eventId, talkId);
}

/** Refuses an abstract that could not be printed. @throws 422. */
export function refuseAbstract(input: { title: string; abstract: string; msc: string[] }): void {
  const errors: Record<string, string> = {};
  const title = parseLatex(input.title).problems[0];
  const abstract = parseLatex(input.abstract).problems[0];
  if (title) errors.title = title.sentence;
  if (input.abstract.trim() === '') errors.abstract = 'Write the abstract first.';
  else if (abstract) errors.abstract = `Line ${abstract.line}: ${abstract.sentence}`;
  if (input.msc.length === 0) errors.msc = 'Give at least one MSC 2020 code.';
  if (Object.keys(errors).length > 0) throw invalid(errors);
}

export async function handInAbstract(actor: Actor, eventId: string, talkId: string, version: number): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canWriteAbstract(actor, subjectOf(talk, people))) throw forbidden();
    sameVersion(talk.version, version);
    refuseAbstract(talk);
    await talk.update({ abstractAt: new Date() });
    await recordAudit({ actor, action: 'talks.abstract_handed_in', subject: 'talk', subjectId: talkId, eventId, after: { title: talk.title } });
  });
  return readTalk(actor, eventId, talkId);
}

/** Accepts or declines; the speaker hears by letter. @throws 409 when the state forbids it. */
export async function decideTalk(actor: Actor, eventId: string, talkId: string, version: number | undefined, input: { decision: 'accepted' | 'declined'; note: string }): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!isOrganiser(actor, eventId)) throw forbidden();
    if (version !== undefined) sameVersion(talk.version, version);
    const refusal = stepRefusal(talk.state, input.decision);
    if (refusal || !canDecideTalk(actor, subjectOf(talk, people))) throw conflict('talk.step', refusal ?? 'This talk is not waiting for a decision.');
    const before = talk.state;
    await talk.update({ state: input.decision, decisionNote: input.note });
    await recordAudit({ actor, action: 'talks.decided', subject: 'talk', subjectId: talkId, eventId, before: { state: before }, after: { state: input.decision } });
    await announce(talkDecided, { talkId, decision: input.decision, note: input.note });
  });
  return readTalk(actor, eventId, talkId);
}

export async function withdrawTalk(actor: Actor, eventId: string, talkId: string, version: number | undefined, note: string): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canWithdrawTalk(actor, subjectOf(talk, people))) throw conflict('talk.step', `The talk is ${talk.state}.`);
    if (version !== undefined) sameVersion(talk.version, version);
    const before = talk.state;
    await talk.update({ state: 'withdrawn', decisionNote: note });
    await recordAudit({ actor, action: 'talks.withdrawn', subject: 'talk', subjectId: talkId, eventId, before: { state: before }, after: { note } });
    await announce(talkWithdrawn, { talkId });
  });
  return readTalk(actor, eventId, talkId);
}

/** The call for abstracts: open from the announcement until the deadline, in the event's zone. */
export async function readCall(slug: string, now: Date) {
  const event = await requireEvent(slug);
  if (event.state === 'draft') throw notFound('This event');
  const deadline = (await deadlinesOf(event.id)).find((row) => row.kind === 'abstracts_due');
  const until = deadline ? localToInstant(deadline.date, deadline.time, event.timeZone) : null;
  const open = ['announced', 'open'].includes(event.state) && (until === null || now.toISOString() <= until);
  return { open, title: event.title, until, timeZone: event.timeZone, ...usualMinutes.contributed };
}

/** A contributed talk in answer to the call. @throws 409 after the deadline, 422 for an abstract that can't be printed. */
export async function submitTalk(actor: Actor, slug: string, input: AbstractInput, now = new Date()): Promise<Talk> {
  const call = await readCall(slug, now);
  const event = await requireEvent(slug);
  if (!call.open && !holds(actor, 'organiser', event.id)) throw conflict('talk.call_closed', 'The call for abstracts is closed.');
  refuseAbstract(input);
  const id = await transaction(async () => {
    const talk = await TalkRow.create({ id: newId(), eventId: event.id, kind: 'contributed', ...usualMinutes.contributed, ...input, state: 'submitted', abstractAt: now });
    await TalkPersonRow.create({ id: newId(), talkId: talk.id, accountId: actor.accountId, part: 'speaker', position: 0 });
    await recordAudit({ actor, action: 'talks.submitted', subject: 'talk', subjectId: talk.id, eventId: event.id, after: { title: input.title } });
    await announce(talkSubmitted, { talkId: talk.id });
    return talk.id;
  });
  return readTalk(actor, event.id, id);
}
