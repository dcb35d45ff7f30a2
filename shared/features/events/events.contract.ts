import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { pageOf, pageQuery } from '../../http/page';
import { id, slug } from '../../lib/ids';
import { instant, localDate, localTime, timeZone } from '../../lib/time';

export const eventKinds = ['conference', 'workshop', 'summer_school', 'thematic_programme'] as const;
export const eventKind = z.enum(eventKinds);
export type EventKind = z.infer<typeof eventKind>;

export const eventStates = ['draft', 'announced', 'open', 'running', 'finished', 'archived'] as const;
export const eventState = z.enum(eventStates);
export type EventState = z.infer<typeof eventState>;

export const admissions = ['open', 'application'] as const;
export const roomFeatures = [
  'blackboard',
  'projector',
  'camera',
  'recording',
  'hearingLoop',
  'stepFree',
  'remoteLink',
] as const;
export const roomFeature = z.enum(roomFeatures);
export type RoomFeature = z.infer<typeof roomFeature>;
export const blockKinds = ['session', 'coffee', 'lunch', 'social'] as const;
export const blockKind = z.enum(blockKinds);
export type BlockKind = z.infer<typeof blockKind>;
export const deadlineKinds = [
  'registration_opens',
  'applications_due',
  'abstracts_due',
  'grants_due',
  'grants_decided',
  'programme_final',
  'registration_closes',
  'slides_due',
  'claims_due',
] as const;
export const deadlineKind = z.enum(deadlineKinds);
export type DeadlineKind = z.infer<typeof deadlineKind>;

const line = (max: number) =>
  z
    .string()
    .trim()
    .max(max, `At most ${max} characters.`)
    .regex(/^[^\p{Cc}]*$/u, 'No line breaks here.');
const needed = (max: number) => line(max).min(1, 'This is needed.');
const prose = (max: number) => z.string().max(max, `At most ${max} characters.`);

export const eventTexts = z.strictObject({
  /** The paragraph at the top of the public page. */
  lead: prose(1200).default(''),
  /** Practical matters: rooms, meals, what to bring. */
  practical: prose(6000).default(''),
  /** How to get there. */
  travel: prose(6000).default(''),
  /** Responsible adult and policy, where under-18s are admitted. */
  safeguarding: prose(2000).default(''),
});

const eventFields = {
  kind: eventKind,
  title: needed(160),
  /** For narrow places: header, run-up line. */
  shortTitle: needed(40),
  /** First day, local date. */
  startsOn: localDate,
  /** Last day, local date. */
  endsOn: localDate,
  /** IANA zone of the venue; all local times of the event are in it. */
  timeZone,
  /** ISO 4217 code of fees. */
  currency: z.string().regex(/^[A-Z]{3}$/, 'Three capital letters, e.g. EUR.'),
  venue: needed(160),
  town: needed(80),
  /** Places for registered participants. */
  capacity: z.number().int().min(1, 'At least 1.').max(100_000),
  /** Open registration, or application with a decision. */
  admission: z.enum(admissions),
  contactEmail: z.email('Write an e-mail address like name@example.org.').max(254),
  texts: eventTexts,
  /** Admits people under 18: a responsible adult and the local policy must be named. */
  admitsMinors: z.boolean().default(false),
};

export const eventInput = z.strictObject(eventFields);
export type EventInput = z.infer<typeof eventInput>;

export const roomSchema = z.object({
  id,
  name: z.string(),
  shortName: z.string(),
  /** Seats, as permitted by the local fire authority. */
  capacity: z.number().int(),
  features: z.array(roomFeature),
  position: z.number().int(),
});
export type Room = z.infer<typeof roomSchema>;

export const blockSchema = z.object({
  id,
  /** Local date. */
  day: localDate,
  startsAt: localTime,
  endsAt: localTime,
  kind: blockKind,
  title: z.string(),
  /** A break may shrink to this when talks run over. */
  minimalMinutes: z.number().int().nullable(),
});
export type Block = z.infer<typeof blockSchema>;

export const deadlineSchema = z.object({
  kind: deadlineKind,
  /** Local date and time in the event's zone. */
  date: localDate,
  time: localTime,
  /** The same as an instant. */
  at: instant,
});
export type Deadline = z.infer<typeof deadlineSchema>;

export const eventSummary = z.object({
  id,
  slug,
  kind: eventKind,
  title: z.string(),
  shortTitle: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  timeZone: z.string(),
  town: z.string(),
  venue: z.string(),
  state: eventState,
  admission: z.enum(admissions),
});
export type EventSummary = z.infer<typeof eventSummary>;

export const eventDetail = eventSummary.extend({
  currency: z.string(),
  capacity: z.number().int(),
  contactEmail: z.string(),
  texts: z.object({ lead: z.string(), practical: z.string(), travel: z.string(), safeguarding: z.string() }),
  admitsMinors: z.boolean(),
  rooms: z.array(roomSchema),
  blocks: z.array(blockSchema),
  deadlines: z.array(deadlineSchema),
  version: z.number().int(),
  /** States that the event may go to now, each with what is still missing for it (empty = possible). */
  nextStates: z.array(z.object({ to: eventState, missing: z.array(z.string()) })),
  can: z.object({ edit: z.boolean(), announce: z.boolean(), manageRoles: z.boolean() }),
});
export type EventDetail = z.infer<typeof eventDetail>;

const params = z.object({ event: slug });

export const listMyEvents = endpoint({
  id: 'events.mine',
  method: 'GET',
  path: '/api/my/events',
  summary: 'Events in which the person has a role to work with, the running and coming ones first.',
  response: z.object({ items: z.array(eventSummary.extend({ roles: z.array(z.string()) })) }),
});
export const listEvents = endpoint({
  id: 'events.list',
  method: 'GET',
  path: '/api/office/events',
  summary: 'All events, drafts included (administrators, finance).',
  query: pageQuery,
  response: pageOf(eventSummary),
});
export const createEvent = endpoint({
  id: 'events.create',
  method: 'POST',
  path: '/api/events',
  summary: 'Create an event as a draft.',
  body: z.strictObject({ ...eventFields, slug: slug.optional() }),
  response: eventDetail,
});
export const readEvent = endpoint({
  id: 'events.read',
  method: 'GET',
  path: '/api/events/:event',
  summary: 'An event with rooms, days and deadlines, for those who work on it.',
  params,
  response: eventDetail,
});
export const updateEvent = endpoint({
  id: 'events.update',
  method: 'PUT',
  path: '/api/events/:event',
  summary: 'Save the particulars of an event.',
  params,
  body: eventInput,
  response: eventDetail,
  versioned: true,
});
export const changeEventState = endpoint({
  id: 'events.change_state',
  method: 'POST',
  path: '/api/events/:event/state',
  summary: 'Take the event to its next state, e.g. announce it.',
  params,
  body: z.strictObject({ to: eventState }),
  response: eventDetail,
  versioned: true,
});

export const roomInput = z.strictObject({
  /** Absent for a new room. */
  id: id.optional(),
  name: needed(80),
  shortName: needed(12),
  capacity: z.number().int().min(1, 'At least 1 seat.').max(20_000),
  features: z.array(roomFeature).max(roomFeatures.length),
});
export type RoomInput = z.infer<typeof roomInput>;
export const replaceRooms = endpoint({
  id: 'events.replace_rooms',
  method: 'PUT',
  path: '/api/events/:event/rooms',
  summary: 'Save the rooms in their order. A room in which talks are placed can’t be left out.',
  params,
  body: z.strictObject({ rooms: z.array(roomInput).max(40) }),
  response: eventDetail,
  versioned: true,
});

export const blockInput = z.strictObject({
  id: id.optional(),
  day: localDate,
  startsAt: localTime,
  endsAt: localTime,
  kind: blockKind,
  title: line(80).default(''),
  minimalMinutes: z.number().int().min(0).max(600).nullable().default(null),
});
export type BlockInput = z.infer<typeof blockInput>;
export const replaceDayFrames = endpoint({
  id: 'events.replace_day_frames',
  method: 'PUT',
  path: '/api/events/:event/day-frames',
  summary: 'Save the session blocks and breaks of all days.',
  params,
  body: z.strictObject({ blocks: z.array(blockInput).max(600) }),
  response: eventDetail,
  versioned: true,
});

export const deadlineInput = z.strictObject({
  kind: deadlineKind,
  date: localDate,
  time: localTime.default('23:59'),
});
export type DeadlineInput = z.infer<typeof deadlineInput>;
export const replaceDeadlines = endpoint({
  id: 'events.replace_deadlines',
  method: 'PUT',
  path: '/api/events/:event/deadlines',
  summary: 'Save the deadlines, each at a local date and time.',
  params,
  body: z.strictObject({ deadlines: z.array(deadlineInput).max(deadlineKinds.length) }),
  response: eventDetail,
  versioned: true,
});

export const teamMember = z.object({
  grantId: id,
  accountId: id,
  role: z.enum(['organiser', 'reviewer', 'desk']),
  printedName: z.string(),
  email: z.string(),
  affiliation: z.string(),
});
export const listTeam = endpoint({
  id: 'events.team',
  method: 'GET',
  path: '/api/events/:event/team',
  summary: 'Organisers, reviewers and desk helpers of the event.',
  params,
  response: z.object({ items: z.array(teamMember) }),
});
export const endTeamRole = endpoint({
  id: 'events.end_team_role',
  method: 'DELETE',
  path: '/api/events/:event/team/:account/:grant',
  summary: 'End a role in this event.',
  params: z.object({ event: slug, account: id, grant: id }),
  response: 'empty',
});

export const eventsEndpoints = [
  listMyEvents,
  listEvents,
  createEvent,
  readEvent,
  updateEvent,
  changeEventState,
  replaceRooms,
  replaceDayFrames,
  replaceDeadlines,
  listTeam,
  endTeamRole,
];
