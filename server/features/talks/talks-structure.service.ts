import { Op } from 'sequelize';
import type { Talk, TalkKind, TalkPart } from '@shared/features/talks/talks.contract';
import { needsSpeaker } from '@shared/features/talks/talks.rules';
import { forbidden, invalid } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { accountById, ensureAccountForEmail, recordAudit } from '@server/features/accounts/accounts.service';
import { CourseRow, TalkPersonRow, TalkRow } from './talks.model';
import { canEditTalk, isOrganiser } from './talks.policy';
import { readTalk, requireTalk, subjectOf } from './talks.service';

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
    if (!(await accountById(accountId)))
      throw invalid({ [`people.${position}.accountId`]: 'This person is not known.' });
    await TalkPersonRow.create({ id: newId(), talkId, accountId, part: input.part, position });
  }
}

async function accountOf(input: PersonInput, position: number): Promise<string> {
  const { email, givenName, familyName } = input;
  if (!email || !givenName || !familyName)
    throw invalid({ [`people.${position}.email`]: 'Give an address and both names, or choose a person.' });
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
export async function refuseStructure(
  eventId: string,
  input: StructureInput,
  people: PersonInput[],
  talkId?: string,
): Promise<void> {
  const errors: Record<string, string> = {};
  if (input.questionMinutes >= input.minutes && input.kind !== 'exercise')
    errors.questionMinutes = 'Questions take the whole time.';
  if (input.courseId && !(await CourseRow.findOne({ where: { id: input.courseId, eventId } })))
    errors.courseId = 'This course does not belong to the event.';
  if (input.kind === 'course_lecture' && (!input.courseId || !input.number))
    errors.courseId ??= 'A course lecture needs its course and number.';
  if (input.exerciseOf) {
    const lecture = await TalkRow.findOne({
      where: { id: input.exerciseOf, eventId, kind: 'course_lecture' },
    });
    if (!lecture || lecture.id === talkId) errors.exerciseOf = 'Choose a lecture of this event.';
  }
  if (input.kind === 'course_lecture' && input.courseId && input.number) {
    const taken = await TalkRow.findOne({
      where: {
        courseId: input.courseId,
        number: input.number,
        kind: 'course_lecture',
        state: { [Op.ne]: 'withdrawn' },
      },
    });
    if (taken && taken.id !== talkId) errors.number = `Lecture ${input.number} of this course exists.`;
  }
  if (
    needsSpeaker(input.kind) &&
    input.kind !== 'exercise' &&
    !people.some((person) => person.part === 'speaker')
  )
    errors.people = 'Name at least one speaker.';
  if (Object.keys(errors).length > 0) throw invalid(errors);
}

/** Puts a talk on the list, accepted. */
export async function createTalk(
  actor: Actor,
  eventId: string,
  input: StructureInput & { title: string; people: PersonInput[] },
): Promise<Talk> {
  const { people, title, ...structure } = input;
  const id = await transaction(async () => {
    if (!isOrganiser(actor, eventId)) throw forbidden();
    await refuseStructure(eventId, structure, people);
    const talk = await TalkRow.create({
      id: newId(),
      eventId,
      title,
      ...structure,
      state: 'accepted',
      coAuthors: [],
      msc: [],
      references: [],
      needs: [],
    });
    await replacePeople(talk.id, people);
    await recordAudit({
      actor,
      action: 'talks.created',
      subject: 'talk',
      subjectId: talk.id,
      eventId,
      after: { title, kind: structure.kind },
    });
    return talk.id;
  });
  return readTalk(actor, eventId, id);
}

/** Changes kind, length, course and people. */
export async function updateTalk(
  actor: Actor,
  eventId: string,
  talkId: string,
  version: number,
  input: StructureInput & { people: PersonInput[] },
): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canEditTalk(actor, subjectOf(talk, people))) throw forbidden();
    sameVersion(talk.version, version);
    const { people: wanted, ...structure } = input;
    await refuseStructure(eventId, structure, wanted, talkId);
    const before = {
      kind: talk.kind,
      minutes: talk.minutes,
      people: people.map((person) => `${person.part}:${person.accountId}`),
    };
    talk.set(structure);
    talk.changed('updatedAt' as never, true);
    await talk.save();
    await replacePeople(talkId, wanted);
    await recordAudit({
      actor,
      action: 'talks.updated',
      subject: 'talk',
      subjectId: talkId,
      eventId,
      before,
      after: structure,
    });
  });
  return readTalk(actor, eventId, talkId);
}
