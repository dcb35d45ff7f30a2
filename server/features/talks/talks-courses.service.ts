import type { Course } from '@shared/features/talks/talks-courses.contract';
import type { PresenceInput } from '@shared/features/talks/talks-stay.contract';
import { prerequisiteCircle, presenceErrors } from '@shared/features/talks/talks.rules';
import { conflict, forbidden, invalid, notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { holds, type Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { CourseRow, PrerequisiteRow, PresenceRow, TalkRow } from './talks.model';
import { isOrganiser } from './talks.policy';
import { presentCourse } from './talks.presenter';
import { replacePeople, type PersonInput } from './talks-structure.service';
import { coursesOf, prerequisitesOf, speakingIn } from './talks.service';

export async function listCourses(eventId: string) {
  const [courses, talks, pairs] = await Promise.all([
    coursesOf(eventId),
    TalkRow.ofEvent(eventId),
    prerequisitesOf(eventId),
  ]);
  return {
    items: courses.map((course) =>
      presentCourse(
        course,
        talks.filter((talk) => talk.state !== 'withdrawn'),
      ),
    ),
    prerequisites: pairs.map(({ before, after }) => ({ before, after })),
  };
}

export interface CourseInput {
  letter: string;
  title: string;
  shortTitle: string;
  minNights: number;
  maxPerDay: number;
}

async function courseById(eventId: string, id: string): Promise<Course> {
  const course = (await listCourses(eventId)).items.find((item) => item.id === id);
  if (!course) throw notFound('This course');
  return course;
}

/** A course with numbered lectures and, where wanted, an exercise session to each. */
export async function createCourse(
  actor: Actor,
  eventId: string,
  input: CourseInput & {
    lectures: number;
    minutes: number;
    exerciseMinutes: number | null;
    lecturers: PersonInput[];
    tutors: PersonInput[];
  },
): Promise<Course> {
  const { lectures, minutes, exerciseMinutes, lecturers, tutors, ...fields } = input;
  const id = await transaction(async () => {
    if (!isOrganiser(actor, eventId)) throw forbidden();
    if (await CourseRow.findOne({ where: { eventId, letter: fields.letter } }))
      throw invalid({ letter: `Course ${fields.letter} exists.` });
    if (lecturers.length === 0) throw invalid({ lecturers: 'Name at least one lecturer.' });
    const course = await CourseRow.create({ id: newId(), eventId, ...fields });
    const blank = {
      eventId,
      courseId: course.id,
      state: 'accepted',
      coAuthors: [],
      msc: [],
      references: [],
      needs: [],
    };
    for (let number = 1; number <= lectures; number++) {
      const lecture = await TalkRow.create({
        ...blank,
        id: newId(),
        kind: 'course_lecture',
        title: `${fields.title}, lecture ${number}`,
        minutes,
        questionMinutes: 5,
        number,
      });
      await replacePeople(
        lecture.id,
        lecturers.map((person) => ({ ...person, part: 'speaker' as const })),
      );
      if (exerciseMinutes === null) continue;
      const exercise = await TalkRow.create({
        ...blank,
        id: newId(),
        kind: 'exercise',
        title: `${fields.title}, exercises ${number}`,
        minutes: exerciseMinutes,
        number,
        exerciseOf: lecture.id,
      });
      await replacePeople(
        exercise.id,
        tutors.map((person) => ({ ...person, part: 'tutor' as const })),
      );
    }
    await recordAudit({
      actor,
      action: 'talks.course_created',
      subject: 'course',
      subjectId: course.id,
      eventId,
      after: { letter: fields.letter, title: fields.title, lectures },
    });
    return course.id;
  });
  return courseById(eventId, id);
}

export async function updateCourse(
  actor: Actor,
  eventId: string,
  courseId: string,
  version: number,
  input: CourseInput,
): Promise<Course> {
  await transaction(async () => {
    if (!isOrganiser(actor, eventId)) throw forbidden();
    const course = await CourseRow.findOne({ where: { id: courseId, eventId } });
    if (!course) throw notFound('This course');
    sameVersion(course.version, version);
    const other = await CourseRow.findOne({ where: { eventId, letter: input.letter } });
    if (other && other.id !== courseId) throw invalid({ letter: `Course ${input.letter} exists.` });
    await course.update(input);
    await recordAudit({
      actor,
      action: 'talks.course_updated',
      subject: 'course',
      subjectId: courseId,
      eventId,
      after: input,
    });
  });
  return courseById(eventId, courseId);
}

/** Saves all prerequisites of an event. @throws 409 naming the pair that closes a circle. */
export async function replacePrerequisites(
  actor: Actor,
  eventId: string,
  pairs: { before: string; after: string }[],
) {
  await transaction(async () => {
    if (!isOrganiser(actor, eventId)) throw forbidden();
    const titles = new Map((await TalkRow.ofEvent(eventId)).map((talk) => [talk.id, talk.title]));
    if (pairs.some((pair) => !titles.has(pair.before) || !titles.has(pair.after)))
      throw invalid({ pairs: 'A talk does not belong to this event.' });
    const circle = prerequisiteCircle(pairs);
    if (circle)
      throw conflict(
        'talk.circle',
        `“${titles.get(circle.before)}” before “${titles.get(circle.after)}” closes a circle: each would need the other first.`,
      );
    await PrerequisiteRow.destroy({ where: { eventId } });
    await PrerequisiteRow.bulkCreate(pairs.map((pair) => ({ id: newId(), eventId, ...pair })));
    await recordAudit({
      actor,
      action: 'talks.prerequisites_saved',
      subject: 'event',
      subjectId: eventId,
      eventId,
      after: { pairs: pairs.length },
    });
  });
  return { pairs };
}

/** Whoever has a part in the event keeps a travel window there. @throws 404 for others. */
export async function refuseOutsider(actor: Actor, eventId: string): Promise<void> {
  if (holds(actor, 'organiser', eventId) || (await speakingIn(actor.accountId)).has(eventId)) return;
  throw notFound('This event');
}

export async function readPresence(actor: Actor, eventId: string) {
  await refuseOutsider(actor, eventId);
  const row = await PresenceRow.findOne({ where: { eventId, accountId: actor.accountId } });
  const { arrivesAt = null, leavesAt = null, blocked = [], wishes = '', version = 0 } = row ?? {};
  return { arrivesAt, leavesAt, blocked, wishes, version };
}

export async function savePresence(
  actor: Actor,
  eventId: string,
  version: number | undefined,
  input: PresenceInput,
) {
  await refuseOutsider(actor, eventId);
  const errors = presenceErrors(input);
  if (Object.keys(errors).length > 0) throw invalid(errors);
  await transaction(async () => {
    const row = await PresenceRow.findOne({ where: { eventId, accountId: actor.accountId } });
    if (version !== undefined) sameVersion(row?.version ?? 0, version);
    if (row) {
      row.set(input);
      row.changed('updatedAt' as never, true);
      await row.save();
    } else {
      await PresenceRow.create({ id: newId(), eventId, accountId: actor.accountId, ...input, version: 1 });
    }
    await recordAudit({
      actor,
      action: 'talks.presence_saved',
      subject: 'account',
      subjectId: actor.accountId,
      eventId,
      after: { arrivesAt: input.arrivesAt, leavesAt: input.leavesAt },
    });
  });
  return readPresence(actor, eventId);
}
