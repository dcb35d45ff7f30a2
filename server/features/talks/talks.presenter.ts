import type { Material, Talk, TalkListRow } from '@shared/features/talks/talks.contract';
import type { Course } from '@shared/features/talks/talks-courses.contract';
import { owesAbstract, talkKindNames } from '@shared/features/talks/talks.rules';
import type { Actor } from '@server/http/authorize';
import type { PersonView } from '@server/features/accounts/accounts.service';
import type { CourseRow, MaterialRow, MaterialVersionRow, TalkPersonRow, TalkRow } from './talks.model';
import { canDecideTalk, canEditTalk, canUpload, canWithdrawTalk, canWriteAbstract } from './talks.policy';

export interface TalkParts {
  talk: TalkRow;
  eventSlug: string;
  people: TalkPersonRow[];
  persons: Map<string, PersonView>;
  materials: { material: MaterialRow; versions: MaterialVersionRow[] }[];
  recordingConsent: boolean;
}

export function presentTalk(parts: TalkParts, actor: Actor | null): Talk {
  const { talk, people, persons } = parts;
  const subject = { eventId: talk.eventId, state: talk.state, people };
  const write = canWriteAbstract(actor, subject);
  return {
    id: talk.id,
    eventSlug: parts.eventSlug,
    kind: talk.kind,
    minutes: talk.minutes,
    questionMinutes: talk.questionMinutes,
    courseId: talk.courseId,
    number: talk.number,
    exerciseOf: talk.exerciseOf,
    expectedAudience: talk.expectedAudience,
    title: talk.title,
    abstract: talk.abstract,
    coAuthors: talk.coAuthors,
    msc: talk.msc,
    references: talk.references,
    needs: talk.needs,
    state: talk.state,
    invitation: talk.invitation,
    abstractAt: talk.abstractAt?.toISOString() ?? null,
    decisionNote: talk.decisionNote,
    people: people.map((person) => ({
      accountId: person.accountId,
      part: person.part,
      printedName: persons.get(person.accountId)?.printedName ?? '',
      affiliation: persons.get(person.accountId)?.affiliation ?? '',
    })),
    materials: parts.materials.map((entry) => presentMaterial(entry, persons)),
    recordingConsent: parts.recordingConsent,
    version: talk.version,
    can: {
      edit: canEditTalk(actor, subject),
      write,
      decide: canDecideTalk(actor, subject),
      withdraw: canWithdrawTalk(actor, subject),
      upload: canUpload(actor, subject),
      handIn: write && talk.abstractAt === null && owesAbstract(talk.kind),
    },
  };
}

function presentMaterial(
  { material, versions }: TalkParts['materials'][number],
  persons: Map<string, PersonView>,
): Material {
  return {
    id: material.id,
    kind: material.kind,
    visibility: material.visibility,
    visibleFrom: material.visibleFrom,
    licence: material.licence,
    version: material.version,
    versions: versions.map((row) => ({
      id: row.id,
      number: row.number,
      fileName: row.fileName,
      bytes: row.bytes,
      sha256: row.sha256,
      type: row.type,
      uploadedAt: row.createdAt.toISOString(),
      uploadedBy: persons.get(row.uploadedBy)?.printedName ?? '',
    })),
  };
}

/** `Course A 4`, `Exercises A 3`, else the kind's name. */
export function labelOf(
  talk: { kind: TalkRow['kind']; courseId: string | null; number: number | null },
  courses: Map<string, { letter: string }>,
): string {
  const course = talk.courseId ? courses.get(talk.courseId) : undefined;
  if (course && talk.kind === 'course_lecture') return `Course ${course.letter} ${talk.number ?? ''}`.trim();
  if (course && talk.kind === 'exercise') return `Exercises ${course.letter} ${talk.number ?? ''}`.trim();
  return talkKindNames[talk.kind];
}

export function presentTalkRow(
  talk: TalkRow,
  people: TalkPersonRow[],
  persons: Map<string, PersonView>,
  courses: Map<string, CourseRow>,
  withSlides: Set<string>,
): TalkListRow {
  return {
    id: talk.id,
    kind: talk.kind,
    title: talk.title,
    label: labelOf(talk, courses),
    minutes: talk.minutes,
    state: talk.state,
    invitation: talk.invitation,
    abstractAt: talk.abstractAt?.toISOString() ?? null,
    speakers: people
      .filter((person) => person.part === (talk.kind === 'exercise' ? 'tutor' : 'speaker'))
      .map((person) => ({
        accountId: person.accountId,
        printedName: persons.get(person.accountId)?.printedName ?? '',
        affiliation: persons.get(person.accountId)?.affiliation ?? '',
      })),
    hasSlides: withSlides.has(talk.id),
  };
}

export function presentCourse(course: CourseRow, lectures: TalkRow[]): Course {
  return {
    id: course.id,
    letter: course.letter,
    title: course.title,
    shortTitle: course.shortTitle,
    minNights: course.minNights,
    maxPerDay: course.maxPerDay,
    version: course.version,
    lectures: lectures
      .filter((talk) => talk.courseId === course.id && talk.kind === 'course_lecture')
      .sort((a, b) => (a.number ?? 0) - (b.number ?? 0))
      .map((talk) => ({ talkId: talk.id, number: talk.number ?? 0, title: talk.title })),
  };
}
