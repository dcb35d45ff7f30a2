import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { instant, localDate, localTime } from '../../lib/time';
import { deadlineKind, eventKind, eventState } from '../events/events.contract';
import { programmeKind } from '../programme/programme.contract';

/** What the public may read. Nothing here depends on who asks. */

export const publicEventSummary = z.object({
  slug,
  kind: eventKind,
  title: z.string(),
  /** Local dates in the event's zone. */
  startsOn: localDate,
  endsOn: localDate,
  timeZone: z.string(),
  venue: z.string(),
  town: z.string(),
  state: eventState,
  /** First paragraph of the page; plain text. */
  lead: z.string(),
});
export type PublicEventSummary = z.infer<typeof publicEventSummary>;

export const publicPerson = z.object({ printedName: z.string(), affiliation: z.string() });

export const publicCourse = z.object({
  letter: z.string(),
  title: z.string(),
  lecturers: z.array(publicPerson),
});

export const publicRegistration = z.object({
  /** The event takes registrations or applications now. */
  open: z.boolean(),
  admission: z.enum(['open', 'application']),
  /** Why not, in a sentence; null when open. */
  closedBecause: z.string().nullable(),
  /** The fee rule as it stands now, in two sentences at most; '' without fees. */
  feeRule: z.array(z.string()).max(3),
  currency: z.string(),
  /** Least and greatest fee now, minor units; null without fees. */
  feeNow: z.object({ leastMinor: z.number().int(), mostMinor: z.number().int() }).nullable(),
  capacity: z.number().int(),
  /** Places that nobody holds. */
  free: z.number().int(),
});
export type PublicRegistration = z.infer<typeof publicRegistration>;

export const publicEvent = publicEventSummary.extend({
  shortTitle: z.string(),
  /** Plain text, paragraphs divided by empty lines. */
  practical: z.string(),
  travel: z.string(),
  safeguarding: z.string(),
  contactEmail: z.string(),
  courses: z.array(publicCourse),
  dates: z.array(z.object({ kind: deadlineKind, date: localDate, time: localTime, at: instant })),
  registration: publicRegistration,
  /** The call for abstracts is open until this instant; null when it is not open. */
  callUntil: instant.nullable(),
  /** Travel grants can be asked for until this instant; null when they can't. */
  grantsUntil: instant.nullable(),
  /** Number of the published revision; null before the first. */
  revision: z.number().int().nullable(),
  /** How many people stand in the published programme. */
  people: z.number().int(),
});
export type PublicEvent = z.infer<typeof publicEvent>;

const spot = z.object({
  /** UTC. */
  startsAt: instant,
  endsAt: instant,
  roomName: z.string(),
});

export const publicTalkPage = z.object({
  id,
  event: publicEventSummary,
  kind: programmeKind,
  /** `Course A 4`, `Invited talk`. */
  word: z.string(),
  /** LaTeX in the line. */
  title: z.string(),
  people: z.array(publicPerson.extend({ part: z.enum(['speaker', 'chair', 'tutor']) })),
  coAuthors: z.array(publicPerson.pick({ affiliation: true }).extend({ name: z.string() })),
  /** LaTeX; '' while none is handed in. */
  abstract: z.string(),
  msc: z.array(z.string()),
  references: z.array(z.string()),
  placement: spot,
});
export type PublicTalkPage = z.infer<typeof publicTalkPage>;

export const publicPersonRow = publicPerson.extend({
  talks: z.array(
    z.object({ id, word: z.string(), title: z.string(), part: z.enum(['speaker', 'chair', 'tutor']) }),
  ),
});
export const publicPeople = z.object({ event: publicEventSummary, items: z.array(publicPersonRow) });
export type PublicPeople = z.infer<typeof publicPeople>;

const inEvent = z.object({ event: slug });

export const listPublicEvents = endpoint({
  id: 'site.events',
  method: 'GET',
  path: '/api/public/events',
  summary: 'Events that have been announced, the running and coming ones first.',
  response: z.object({ items: z.array(publicEventSummary) }),
});
export const readPublicEvent = endpoint({
  id: 'site.event',
  method: 'GET',
  path: '/api/public/events/:event',
  summary: 'The public page of an event.',
  params: inEvent,
  response: publicEvent,
});
export const readPublicTalk = endpoint({
  id: 'site.talk',
  method: 'GET',
  path: '/api/public/events/:event/talks/:talk',
  summary: 'A talk of the published programme with its abstract.',
  params: z.object({ event: slug, talk: id }),
  response: publicTalkPage,
});
export const listPublicPeople = endpoint({
  id: 'site.people',
  method: 'GET',
  path: '/api/public/events/:event/people',
  summary: 'Speakers, lecturers, tutors and chairs of the published programme.',
  params: inEvent,
  response: publicPeople,
});

export const siteEndpoints = [listPublicEvents, readPublicEvent, readPublicTalk, listPublicPeople];
