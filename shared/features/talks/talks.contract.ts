import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { pageOf, pageQuery } from '../../http/page';
import { id, slug } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { email } from '../accounts/accounts.contract';
import { roomFeature } from '../events/events.contract';
import { abstractInput, talkMinutes, talkTitle } from './talks-abstract.contract';

export const talkKinds = [
  'plenary',
  'invited',
  'contributed',
  'course_lecture',
  'exercise',
  'poster',
  'discussion',
  'social',
] as const;
export const talkKind = z.enum(talkKinds);
export type TalkKind = z.infer<typeof talkKind>;
export const talkStates = ['draft', 'submitted', 'accepted', 'declined', 'withdrawn'] as const;
export const talkState = z.enum(talkStates);
export type TalkState = z.infer<typeof talkState>;
export const talkParts = ['speaker', 'chair', 'tutor'] as const;
export const talkPart = z.enum(talkParts);
export type TalkPart = z.infer<typeof talkPart>;

const structure = {
  kind: talkKind,
  /** Whole length in minutes, questions included. */
  minutes: talkMinutes,
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
export const personInput = z.strictObject({
  accountId: id.optional(),
  email: email.optional(),
  givenName: z.string().trim().max(120).optional(),
  familyName: z.string().trim().max(120).optional(),
  part: talkPart,
});

export const talkPerson = z.object({
  accountId: id,
  part: talkPart,
  printedName: z.string(),
  affiliation: z.string(),
});
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
  can: z.object({
    edit: z.boolean(),
    write: z.boolean(),
    decide: z.boolean(),
    withdraw: z.boolean(),
    upload: z.boolean(),
    handIn: z.boolean(),
  }),
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

export const inEvent = z.object({ event: slug });
export const ofTalk = z.object({ event: slug, talk: id });

export const listTalks = endpoint({
  id: 'talks.list',
  method: 'GET',
  path: '/api/events/:event/talks',
  summary: 'Talks of an event, the latest first.',
  params: inEvent,
  query: pageQuery.extend({
    state: talkState.optional(),
    kind: talkKind.optional(),
    q: z.string().max(100).optional(),
    missing: z.enum(['abstract', 'answer', 'slides']).optional(),
  }),
  response: pageOf(talkRow),
});
export const readTalk = endpoint({
  id: 'talks.read',
  method: 'GET',
  path: '/api/events/:event/talks/:talk',
  summary: 'One talk, for its people and the organisers.',
  params: ofTalk,
  response: talkSchema,
});
export const createTalk = endpoint({
  id: 'talks.create',
  method: 'POST',
  path: '/api/events/:event/talks',
  summary: 'Put a talk, session or social event on the list, accepted.',
  params: inEvent,
  body: z.strictObject({ ...structure, title: talkTitle, people: z.array(personInput).max(20) }),
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
export const saveAbstract = endpoint({
  id: 'talks.save_abstract',
  method: 'PUT',
  path: '/api/events/:event/talks/:talk/abstract',
  summary: 'Save title, abstract and subjects; saved as typed, also with mistakes in the LaTeX.',
  params: ofTalk,
  body: abstractInput,
  response: talkSchema,
  versioned: true,
});
export const handInAbstract = endpoint({
  id: 'talks.hand_in',
  method: 'POST',
  path: '/api/events/:event/talks/:talk/hand-in',
  summary: 'Hand the abstract in; refused while it has mistakes.',
  params: ofTalk,
  body: z.strictObject({}),
  response: talkSchema,
  versioned: true,
});
export const decideTalk = endpoint({
  id: 'talks.decide',
  method: 'POST',
  path: '/api/events/:event/talks/:talk/decision',
  summary: 'Accept or decline a submitted talk; the speaker gets a letter.',
  params: ofTalk,
  body: z.strictObject({
    decision: z.enum(['accepted', 'declined']),
    note: z.string().trim().max(2000).default(''),
  }),
  response: talkSchema,
  versioned: true,
});
export const withdrawTalk = endpoint({
  id: 'talks.withdraw',
  method: 'POST',
  path: '/api/events/:event/talks/:talk/withdrawal',
  summary: 'Withdraw a talk.',
  params: ofTalk,
  body: z.strictObject({ note: z.string().trim().max(2000).default('') }),
  response: talkSchema,
  versioned: true,
});
export const submitTalk = endpoint({
  id: 'talks.submit',
  method: 'POST',
  path: '/api/events/:event/submissions',
  summary: 'Answer the call for abstracts with a contributed talk.',
  params: inEvent,
  body: abstractInput,
  response: talkSchema,
});
export const callView = z.object({
  open: z.boolean(),
  title: z.string(),
  until: instant.nullable(),
  timeZone: z.string(),
  minutes: z.number().int(),
  questionMinutes: z.number().int(),
});
export const readCall = endpoint({
  id: 'talks.call',
  method: 'GET',
  path: '/api/events/:event/call',
  summary: 'The call for abstracts: open or not, until when.',
  params: inEvent,
  response: callView,
});
export const myTalk = z.object({
  id,
  eventSlug: z.string(),
  eventTitle: z.string(),
  kind: talkKind,
  label: z.string(),
  title: z.string(),
  minutes: z.number().int(),
  state: talkState,
  part: talkPart,
  abstractAt: instant.nullable(),
});
export const listMyTalks = endpoint({
  id: 'talks.mine',
  method: 'GET',
  path: '/api/my/talks',
  summary: 'Talks in which the person has a part.',
  response: z.object({ items: z.array(myTalk) }),
});

export const talksEndpoints = [
  listTalks,
  readTalk,
  createTalk,
  updateTalk,
  saveAbstract,
  handInAbstract,
  decideTalk,
  withdrawTalk,
  submitTalk,
  readCall,
  listMyTalks,
];
