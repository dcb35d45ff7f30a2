import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { pageOf, pageQuery } from '../../http/page';
import { id, slug } from '../../lib/ids';
import { instant, localDate, localDateTime } from '../../lib/time';
import { email, password, sessionSchema } from '../accounts/accounts.contract';
import { deadlineSchema, roomFeature } from '../events/events.contract';
import { MAX_ABSTRACT } from '../../lib/latex';
import { mscProblem, parseReference } from './subjects.rules';

export const talkKinds = ['plenary', 'invited', 'contributed', 'course_lecture', 'exercise', 'poster', 'discussion', 'social'] as const;
export const talkKind = z.enum(talkKinds);
export type TalkKind = z.infer<typeof talkKind>;
export const talkStates = ['draft', 'submitted', 'accepted', 'declined', 'withdrawn'] as const;
export const talkState = z.enum(talkStates);
export type TalkState = z.infer<typeof talkState>;
export const talkParts = ['speaker', 'chair', 'tutor'] as const;
export const talkPart = z.enum(talkParts);
export type TalkPart = z.infer<typeof talkPart>;

const title = z.string().trim().min(1, 'This is needed.').max(300, 'At most 300 characters.').regex(/^[^\n\r\0]*$/, 'No line breaks here.');
const name = z.string().trim().min(1, 'This is needed.').max(120).regex(/^[^\p{Cc}]*$/u, 'No line breaks here.');
const minutes = z.number().int().min(5, 'At least 5 minutes.').max(600).multipleOf(5, 'In steps of 5 minutes.');

/** MSC 2020 code; the first of a talk is its main one. */
export const mscCode = z.string().trim().superRefine((code, context) => {
  const problem = mscProblem(code);
  if (problem) context.addIssue({ code: 'custom', message: problem });
});
/** DOI or arXiv identifier. */
export const reference = z.string().trim().max(200).refine((text) => parseReference(text) !== undefined, 'This is neither a DOI (10.1000/xyz) nor an arXiv identifier (2101.01234).');

export const coAuthor = z.strictObject({ name, affiliation: z.string().trim().max(200).default('') });

/** What its speaker writes. */
export const abstractInput = z.strictObject({
  /** LaTeX as in abstracts. */
  title,
  /** LaTeX. */
  abstract: z.string().max(MAX_ABSTRACT, `At most ${MAX_ABSTRACT} characters.`),
  coAuthors: z.array(coAuthor).max(20),
  msc: z.array(mscCode).max(4, 'At most 4 codes.'),
  references: z.array(reference).max(20),
  needs: z.array(roomFeature).max(10),
});
export type AbstractInput = z.infer<typeof abstractInput>;

const structure = {
  kind: talkKind,
  /** Whole length in minutes, questions included. */
  minutes,
  /** Of these, for questions. */
  questionMinutes: z.number().int().min(0).max(120),
  courseId: id.nullable(),
  /** Number within the course, from 1. */
  number: z.number().int().min(1).max(99).nullable(),
  /** The lecture that an exercise session belongs to. */
  exerciseOf: id.nullable(),
  /** People expected; null when not known. */
  expectedAudience: z.number().int().min(1).max(20_000).nullable(),
};
const personInput = z.strictObject({ accountId: id.optional(), email: email.optional(), givenName: z.string().trim().max(120).optional(), familyName: z.string().trim().max(120).optional(), part: talkPart });

export const talkPerson = z.object({ accountId: id, part: talkPart, printedName: z.string(), affiliation: z.string() });
export const materialVersion = z.object({
  id,
  number: z.number().int(),
  fileName: z.string(),
  bytes: z.number().int(),
  sha256: z.string(),
  type: z.string(),
  uploadedAt: instant,
  uploadedBy: z.string(),
});
export const materialKinds = ['slides', 'notes', 'problems'] as const;
export const visibilities = ['organisers', 'participants', 'public'] as const;
export const licences = ['all_rights', 'cc_by', 'cc_by_sa', 'cc_by_nc'] as const;
export const materialSchema = z.object({
  id,
  kind: z.enum(materialKinds),
  visibility: z.enum(visibilities),
  /** Local date from which others may see it; null = at once. */
  visibleFrom: localDate.nullable(),
  licence: z.enum(licences),
  versions: z.array(materialVersion),
  version: z.number().int(),
});
export type Material = z.infer<typeof materialSchema>;

export const talkSchema = z.object({
  id,
  eventSlug: z.string(),
  ...structure,
  title: z.string(),
  abstract: z.string(),
  coAuthors: z.array(z.object({ name: z.string(), affiliation: z.string() })),
  msc: z.array(z.string()),
  references: z.array(z.string()),
  needs: z.array(roomFeature),
  state: talkState,
  /** State of the invitation to speak, null when nobody was invited. */
  invitation: z.enum(['invited', 'accepted', 'declined']).nullable(),
  /** When the abstract was handed in. */
  abstractAt: instant.nullable(),
  decisionNote: z.string(),
  people: z.array(talkPerson),
  materials: z.array(materialSchema),
  /** The speaker agreed to be recorded. */
  recordingConsent: z.boolean(),
  version: z.number().int(),
  can: z.object({ edit: z.boolean(), write: z.boolean(), decide: z.boolean(), withdraw: z.boolean(), upload: z.boolean(), handIn: z.boolean() }),
});
export type Talk = z.infer<typeof talkSchema>;

export const talkRow = z.object({
  id,
  kind: talkKind,
  title: z.string(),
  /** `Course A 4` where it belongs to a course. */
  label: z.string(),
  minutes: z.number().int(),
  state: talkState,
  invitation: z.enum(['invited', 'accepted', 'declined']).nullable(),
  abstractAt: instant.nullable(),
  /** Who stands in front: speakers, of exercise sessions the tutors. */
  speakers: z.array(z.object({ accountId: id, printedName: z.string(), affiliation: z.string() })),
  hasSlides: z.boolean(),
});
export type TalkListRow = z.infer<typeof talkRow>;

const inEvent = z.object({ event: slug });
const ofTalk = z.object({ event: slug, talk: id });

export const listTalks = endpoint({
  id: 'talks.list',
  method: 'GET',
  path: '/api/events/:event/talks',
  summary: 'Talks of an event, the latest first.',
  params: inEvent,
  query: pageQuery.extend({ state: talkState.optional(), kind: talkKind.optional(), q: z.string().max(100).optional(), missing: z.enum(['abstract', 'answer', 'slides']).optional() }),
  response: pageOf(talkRow),
});
export const readTalk = endpoint({ id: 'talks.read', method: 'GET', path: '/api/events/:event/talks/:talk', summary: 'One talk, for its people and the organisers.', params: ofTalk, response: talkSchema });
export const createTalk = endpoint({
  id: 'talks.create',
  method: 'POST',
  path: '/api/events/:event/talks',
  summary: 'Put a talk, session or social event on the list, accepted.',
  params: inEvent,
  body: z.strictObject({ ...structure, title, people: z.array(personInput).max(20) }),
  response: talkSchema,
});
export const updateTalk = endpoint({
  id: 'talks.update',
  method: 'PUT',
  path: '/api/events/:event/talks/:talk',
  summary: 'Change kind, length, course and people of a talk (organisers).',
  params: ofTalk,
  body: z.strictObject({ ...structure, people: z.array(personInput).max(20) }),
  response: talkSchema,
  versioned: true,
});
export const saveAbstract = endpoint({ id: 'talks.save_abstract', method: 'PUT', path: '/api/events/:event/talks/:talk/abstract', summary: 'Save title, abstract and subjects; saved as typed, also with mistakes in the LaTeX.', params: ofTalk, body: abstractInput, response: talkSchema, versioned: true });
export const handInAbstract = endpoint({ id: 'talks.hand_in', method: 'POST', path: '/api/events/:event/talks/:talk/hand-in', summary: 'Hand the abstract in; refused while it has mistakes.', params: ofTalk, body: z.strictObject({}), response: talkSchema, versioned: true });
export const decideTalk = endpoint({
  id: 'talks.decide',
  method: 'POST',
  path: '/api/events/:event/talks/:talk/decision',
  summary: 'Accept or decline a submitted talk; the speaker gets a letter.',
  params: ofTalk,
  body: z.strictObject({ decision: z.enum(['accepted', 'declined']), note: z.string().trim().max(2000).default('') }),
  response: talkSchema,
  versioned: true,
});
export const withdrawTalk = endpoint({ id: 'talks.withdraw', method: 'POST', path: '/api/events/:event/talks/:talk/withdrawal', summary: 'Withdraw a talk.', params: ofTalk, body: z.strictObject({ note: z.string().trim().max(2000).default('') }), response: talkSchema, versioned: true });
export const submitTalk = endpoint({
  id: 'talks.submit',
  method: 'POST',
  path: '/api/events/:event/submissions',
  summary: 'Answer the call for abstracts with a contributed talk.',
  params: inEvent,
  body: abstractInput,
  response: talkSchema,
});
export const callView = z.object({ open: z.boolean(), title: z.string(), until: instant.nullable(), timeZone: z.string(), minutes: z.number().int(), questionMinutes: z.number().int() });
export const readCall = endpoint({ id: 'talks.call', method: 'GET', path: '/api/events/:event/call', summary: 'The call for abstracts: open or not, until when.', params: inEvent, response: callView });
export const inviteSpeaker = endpoint({
  id: 'talks.invite',
  method: 'POST',
  path: '/api/events/:event/speaker-invitations',
  summary: 'Invite a speaker by mail; makes the talk as a draft.',
  params: inEvent,
  body: z.strictObject({ email, givenName: name, familyName: name, affiliation: z.string().trim().max(200).default(''), kind: z.enum(['plenary', 'invited', 'course_lecture']).default('invited'), minutes, questionMinutes: z.number().int().min(0).max(120).default(5), message: z.string().trim().max(3000).default('') }),
  response: talkSchema,
});
export const remindSpeakers = endpoint({ id: 'talks.remind', method: 'POST', path: '/api/events/:event/abstract-reminders', summary: 'Write to those who owe an abstract; at most once a day each.', params: inEvent, body: z.strictObject({}), response: z.object({ written: z.number().int() }) });

const byToken = z.object({ token: z.string().min(20).max(200) });
export const speakerInvitationView = z.object({
  eventSlug: z.string(),
  eventTitle: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  town: z.string(),
  talkId: id,
  kind: talkKind,
  minutes: z.number().int(),
  questionMinutes: z.number().int(),
  name: z.string(),
  email: z.string(),
  message: z.string(),
  answer: z.enum(['invited', 'accepted', 'declined']),
  hasPassword: z.boolean(),
});
export const readSpeakerInvitation = endpoint({ id: 'talks.read_invitation', method: 'GET', path: '/api/speaker-invitations/:token', summary: 'What an invitation to speak says.', params: byToken, response: speakerInvitationView });
export const answerSpeakerInvitation = endpoint({
  id: 'talks.answer_invitation',
  method: 'POST',
  path: '/api/speaker-invitations/:token',
  summary: 'Accept or decline an invitation to speak; accepting sets the password of a new account and signs in.',
  params: byToken,
  body: z.strictObject({ answer: z.enum(['accepted', 'declined']), note: z.string().trim().max(2000).default(''), password: password.optional() }),
  response: z.object({ answer: z.enum(['accepted', 'declined']), session: sessionSchema, eventSlug: z.string(), talkId: id }),
});

export const presenceInput = z.strictObject({
  /** Local date and time in the event's zone; null = not known yet. */
  arrivesAt: localDateTime.nullable(),
  leavesAt: localDateTime.nullable(),
  /** Times within the stay at which the person is away. */
  blocked: z.array(z.strictObject({ from: localDateTime, to: localDateTime })).max(20),
  wishes: z.string().trim().max(1000),
});
export type PresenceInput = z.infer<typeof presenceInput>;
export const presenceSchema = presenceInput.extend({ version: z.number().int() });
export const readMyPresence = endpoint({ id: 'talks.read_presence', method: 'GET', path: '/api/events/:event/my-presence', summary: 'One’s own travel window.', params: inEvent, response: presenceSchema });
export const saveMyPresence = endpoint({ id: 'talks.save_presence', method: 'PUT', path: '/api/events/:event/my-presence', summary: 'Save one’s own travel window.', params: inEvent, body: presenceInput, response: presenceSchema, versioned: true });

export const courseInput = z.strictObject({
  letter: z.string().regex(/^[A-Z]$/, 'One capital letter.'),
  title,
  shortTitle: z.string().trim().min(1, 'This is needed.').max(18, 'At most 18 letters.'),
  /** Nights between lectures, at least. */
  minNights: z.number().int().min(0).max(6),
  /** Lectures of the course a day, at most. */
  maxPerDay: z.number().int().min(1).max(4),
});
export const courseSchema = courseInput.extend({ id, lectures: z.array(z.object({ talkId: id, number: z.number().int(), title: z.string() })), version: z.number().int() });
export type Course = z.infer<typeof courseSchema>;
export const listCourses = endpoint({ id: 'talks.courses', method: 'GET', path: '/api/events/:event/courses', summary: 'Lecture courses with their lectures in order.', params: inEvent, response: z.object({ items: z.array(courseSchema), prerequisites: z.array(z.object({ before: id, after: id })) }) });
export const createCourse = endpoint({
  id: 'talks.create_course',
  method: 'POST',
  path: '/api/events/:event/courses',
  summary: 'Create a lecture course with so many lectures, and exercise sessions where wanted.',
  params: inEvent,
  body: courseInput.extend({ lectures: z.number().int().min(1).max(30), minutes, exerciseMinutes: minutes.nullable().default(null), lecturers: z.array(personInput).max(4), tutors: z.array(personInput).max(6).default([]) }),
  response: courseSchema,
});
export const updateCourse = endpoint({ id: 'talks.update_course', method: 'PUT', path: '/api/events/:event/courses/:course', summary: 'Change the particulars of a course.', params: z.object({ event: slug, course: id }), body: courseInput, response: courseSchema, versioned: true });
export const replacePrerequisites = endpoint({
  id: 'talks.prerequisites',
  method: 'PUT',
  path: '/api/events/:event/prerequisites',
  summary: 'Save which lecture needs which other before it; circles are refused.',
  params: inEvent,
  body: z.strictObject({ pairs: z.array(z.strictObject({ before: id, after: id })).max(500) }),
  response: z.object({ pairs: z.array(z.object({ before: id, after: id })) }),
});

/** What a speaker needs to know of an event, also before it is announced. */
export const stageSchema = z.object({
  slug: z.string(),
  title: z.string(),
  shortTitle: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  /** IANA zone of all local times. */
  timeZone: z.string(),
  venue: z.string(),
  town: z.string(),
  contactEmail: z.string(),
  deadlines: z.array(deadlineSchema),
  rooms: z.array(z.object({ name: z.string(), shortName: z.string(), capacity: z.number().int(), features: z.array(roomFeature) })),
});
export type Stage = z.infer<typeof stageSchema>;
export const readStage = endpoint({ id: 'talks.stage', method: 'GET', path: '/api/events/:event/stage', summary: 'Dates, deadlines and rooms of an event, for those who speak there.', params: inEvent, response: stageSchema });

export const myTalk = z.object({ id, eventSlug: z.string(), eventTitle: z.string(), kind: talkKind, label: z.string(), title: z.string(), minutes: z.number().int(), state: talkState, part: talkPart, abstractAt: instant.nullable() });
export const listMyTalks = endpoint({ id: 'talks.mine', method: 'GET', path: '/api/my/talks', summary: 'Talks in which the person has a part.', response: z.object({ items: z.array(myTalk) }) });

/** Bytes of one file, at most. */
export const MAX_UPLOAD = 60_000_000;
export const uploadMaterial = endpoint({
  id: 'talks.upload',
  method: 'POST',
  path: '/api/events/:event/talks/:talk/materials',
  summary: 'Upload slides, notes or a problem sheet; earlier versions stay.',
  params: ofTalk,
  body: z.strictObject({ kind: z.enum(materialKinds) }),
  response: talkSchema,
  upload: { field: 'file', maxBytes: MAX_UPLOAD },
});
export const setMaterialAccess = endpoint({
  id: 'talks.material_access',
  method: 'PUT',
  path: '/api/events/:event/talks/:talk/materials/:material',
  summary: 'Who may see a material, from when, under which licence.',
  params: z.object({ event: slug, talk: id, material: id }),
  body: z.strictObject({ visibility: z.enum(visibilities), visibleFrom: localDate.nullable(), licence: z.enum(licences) }),
  response: talkSchema,
  versioned: true,
});
export const downloadMaterial = endpoint({ id: 'talks.download', method: 'GET', path: '/api/events/:event/materials/:file', summary: 'A version of a material, for those who may see it.', params: z.object({ event: slug, file: id }), response: 'file' });
export const setRecordingConsent = endpoint({ id: 'talks.recording', method: 'PUT', path: '/api/events/:event/talks/:talk/recording', summary: 'Give or withdraw one’s consent to being recorded.', params: ofTalk, body: z.strictObject({ consent: z.boolean() }), response: talkSchema });

export const talksEndpoints = [
  listTalks, readTalk, createTalk, updateTalk, saveAbstract, handInAbstract, decideTalk, withdrawTalk, submitTalk, readCall, inviteSpeaker, remindSpeakers,
  readSpeakerInvitation, answerSpeakerInvitation, readMyPresence, saveMyPresence, listCourses, createCourse, updateCourse, replacePrerequisites, listMyTalks, readStage,
  uploadMaterial, setMaterialAccess, downloadMaterial, setRecordingConsent,
];
