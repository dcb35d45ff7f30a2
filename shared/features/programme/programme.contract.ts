import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { problemSchema } from './timetable/problem';

/** Kinds of talk as the programme shows them; each has an edge pattern and a word. */
const talkKinds = [
  'plenary',
  'invited',
  'contributed',
  'course_lecture',
  'exercise',
  'poster',
  'discussion',
] as const;
export const programmeKind = z.enum([...talkKinds, 'social']);
export type ProgrammeKind = z.infer<typeof programmeKind>;

const spotFields = {
  /** Room of the event. */
  roomId: id,
  /** Local date in the event's zone. */
  day: localDate,
  /** Minutes since local midnight, a multiple of 5. */
  startMinute: z.number().int().min(0).max(1435).multipleOf(5),
  /** Length in minutes with questions. */
  minutes: z.number().int().min(5).max(1440).multipleOf(5),
};

/** A talk's place in the draft. */
export const draftPlacement = z.object({ talkId: id, ...spotFields, fixed: z.boolean() });
export type DraftPlacement = z.infer<typeof draftPlacement>;

/** A place with the room's name, as it is compared and printed. */
export const spotSchema = z.object({ ...spotFields, roomName: z.string() });
export type Spot = z.infer<typeof spotSchema>;

export const clashSchema = z.object({
  /** Rule id of the timetable, e.g. `presence:<person>`. */
  rule: z.string(),
  /** Talks that break it together. */
  items: z.array(z.string()),
  /** What is wrong in a few words, the beginning of the sentence. */
  title: z.string(),
  sentence: z.string(),
});

export const programmePerson = z.object({
  accountId: id,
  printedName: z.string(),
  /** Family name, for tiles. */
  shortName: z.string(),
  part: z.enum(['speaker', 'co_author', 'chair', 'tutor']),
});
export type ProgrammePerson = z.infer<typeof programmePerson>;

/** A talk as a tile shows it. */
export const talkCard = z.object({
  talkId: id,
  kind: programmeKind,
  /** The word of the kind with course and number: `Course B 4`, `Invited`, `Exercises B 3`. */
  word: z.string(),
  /** How sentences name it: `B 4`, `the talk by Abubakar`. */
  label: z.string(),
  /** May contain LaTeX between dollar signs. */
  title: z.string(),
  /** Minutes with questions, as the talk asks for. */
  minutes: z.number().int(),
  /** Null: not known. */
  expectedAudience: z.number().int().nullable(),
  /** Room features that the talk needs. */
  needs: z.array(z.string()),
  /** Letter of the lecture course. */
  courseLetter: z.string().nullable(),
  number: z.number().int().nullable(),
  people: z.array(programmePerson),
});
export type TalkCard = z.infer<typeof talkCard>;

/** A break between blocks: a band on the calendar. */
export const bandSchema = z.object({
  day: localDate,
  startMinute: z.number().int(),
  endMinute: z.number().int(),
  kind: z.enum(['coffee', 'lunch']),
  title: z.string(),
});
export type Band = z.infer<typeof bandSchema>;

const revisionHead = {
  /** Counts from 1 without gaps. */
  number: z.number().int(),
  publishedAt: instant,
  byName: z.string(),
  note: z.string(),
};
export const revisionSummary = z.object({ ...revisionHead, talks: z.number().int() });
export type RevisionSummary = z.infer<typeof revisionSummary>;

export const draftSchema = z.object({
  version: z.number().int(),
  event: z.object({ slug, title: z.string(), startsOn: localDate, endsOn: localDate, timeZone: z.string() }),
  /** Everything the hard rules need, so that the browser judges a drag by itself; fixed places are not in it. */
  problem: problemSchema,
  cards: z.array(talkCard),
  bands: z.array(bandSchema),
  placements: z.array(draftPlacement),
  /** The server's own check of these placements. */
  clashes: z.array(clashSchema),
  /** The latest revision, to count the changes since. */
  revision: z.object({ ...revisionHead, placements: z.array(draftPlacement) }).nullable(),
  can: z.object({ change: z.boolean(), publish: z.boolean() }),
});
export type Draft = z.infer<typeof draftSchema>;

export const draftChange = z.strictObject({
  talkId: id,
  /** Null takes the talk off the calendar, back to what is to be placed. */
  to: z.strictObject(spotFields).nullable(),
  /** Fix it there, or release it; left out, that stays as it is. */
  fixed: z.boolean().optional(),
});
export type DraftChange = z.infer<typeof draftChange>;

export const draftAfterChange = z.object({
  version: z.number().int(),
  placements: z.array(draftPlacement),
  clashes: z.array(clashSchema),
});
export type DraftAfterChange = z.infer<typeof draftAfterChange>;

export const programmeChange = z.object({
  talkId: id,
  kind: programmeKind,
  word: z.string(),
  title: z.string(),
  /** What became of it: `people` means that only who takes part has changed. */
  what: z.enum(['placed', 'time', 'room', 'time_and_room', 'length', 'taken_off', 'people']),
  before: spotSchema.nullable(),
  after: spotSchema.nullable(),
  /** Who takes part before or after. */
  affected: z.array(programmePerson),
});
export type ProgrammeChange = z.infer<typeof programmeChange>;

export const comparisonSchema = z.object({
  /** Null: nothing was published before. */
  from: z.number().int().nullable(),
  /** Null: the draft. */
  to: z.number().int().nullable(),
  fromPublishedAt: instant.nullable(),
  changes: z.array(programmeChange),
  /** Different people who take part in what changes. */
  people: z.number().int(),
});
export type Comparison = z.infer<typeof comparisonSchema>;

const placedFields = { ...spotFields, roomName: z.string(), startsAt: instant, endsAt: instant };
export const publicTalk = z.object({
  talkId: id,
  kind: programmeKind,
  word: z.string(),
  title: z.string(),
  courseLetter: z.string().nullable(),
  people: z.array(
    z.object({ printedName: z.string(), affiliation: z.string(), part: programmePerson.shape.part }),
  ),
  ...placedFields,
});
export type PublicTalk = z.infer<typeof publicTalk>;

export const publicProgramme = z.object({
  timeZone: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  /** Null: not published yet. */
  revision: z.object({ number: z.number().int(), publishedAt: instant }).nullable(),
  rooms: z.array(z.object({ id, name: z.string(), shortName: z.string() })),
  bands: z.array(bandSchema),
  /** By start, then room. */
  talks: z.array(publicTalk),
});
export type PublicProgramme = z.infer<typeof publicProgramme>;

export const myPlacement = z.object({
  talkId: id,
  word: z.string(),
  title: z.string(),
  parts: z.array(programmePerson.shape.part),
  ...placedFields,
});

const params = z.object({ event: slug });
const revisionParams = z.object({ event: slug, number: z.coerce.number().int().min(1).max(100_000) });

export const readProgramme = endpoint({
  id: 'programme.read',
  method: 'GET',
  path: '/api/events/:event/programme',
  summary: 'The published programme.',
  params,
  response: publicProgramme,
});
export const readMyProgramme = endpoint({
  id: 'programme.mine',
  method: 'GET',
  path: '/api/events/:event/my-programme',
  summary: 'Where and when the signed-in person speaks, chairs or leads exercises, as published.',
  params,
  response: z.object({
    revision: z.number().int().nullable(),
    timeZone: z.string(),
    items: z.array(myPlacement),
  }),
});
export const readDraft = endpoint({
  id: 'programme.read_draft',
  method: 'GET',
  path: '/api/events/:event/programme/draft',
  summary: 'The draft: talks, rooms, stays, placements and clashes.',
  params,
  response: draftSchema,
});
export const changeDraft = endpoint({
  id: 'programme.change_draft',
  method: 'POST',
  path: '/api/events/:event/programme/draft/changes',
  summary:
    'Place, move, fix or take off talks, all or none. A clash is allowed in a draft and told in the answer.',
  params,
  body: z.strictObject({ changes: z.array(draftChange).min(1).max(600) }),
  response: draftAfterChange,
  versioned: true,
});
export const compareDraft = endpoint({
  id: 'programme.compare_draft',
  method: 'GET',
  path: '/api/events/:event/programme/draft/comparison',
  summary: 'What has changed in the draft since a revision, by default the latest, and whom it affects.',
  params,
  /** 0 compares with nothing. */
  query: z.strictObject({ from: z.coerce.number().int().min(0).max(100_000).optional() }),
  response: comparisonSchema,
});
export const listRevisions = endpoint({
  id: 'programme.list_revisions',
  method: 'GET',
  path: '/api/events/:event/programme/revisions',
  summary: 'The revisions, newest first.',
  params,
  response: z.object({ items: z.array(revisionSummary) }),
});
export const readRevision = endpoint({
  id: 'programme.read_revision',
  method: 'GET',
  path: '/api/events/:event/programme/revisions/:number',
  summary: 'A revision as it was published.',
  params: revisionParams,
  response: z.object({
    ...revisionHead,
    placements: z.array(draftPlacement.extend({ roomName: z.string(), title: z.string() })),
  }),
});
export const compareRevisions = endpoint({
  id: 'programme.compare_revisions',
  method: 'GET',
  path: '/api/events/:event/programme/revisions/:number/comparison',
  summary: 'What changed from one revision to another, by default from the one before.',
  params: revisionParams,
  query: z.strictObject({ from: z.coerce.number().int().min(0).max(100_000).optional() }),
  response: comparisonSchema,
});
export const publishProgramme = endpoint({
  id: 'programme.publish',
  method: 'POST',
  path: '/api/events/:event/programme/revisions',
  summary: 'Publish the draft as the next revision.',
  params,
  body: z.strictObject({
    /** For the team, kept with the revision. */
    note: z.string().trim().max(500).default(''),
    /** Publish although clashes are left; refused without. */
    withClashes: z.boolean().default(false),
  }),
  response: z.object({ ...revisionHead, talks: z.number().int(), version: z.number().int() }),
  versioned: true,
});

export const programmeEndpoints = [
  readProgramme,
  readMyProgramme,
  readDraft,
  changeDraft,
  compareDraft,
  listRevisions,
  readRevision,
  compareRevisions,
  publishProgramme,
];
