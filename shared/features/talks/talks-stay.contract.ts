import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { localDate, localDateTime } from '../../lib/time';
import { deadlineSchema, roomFeature } from '../events/events.contract';
import { inEvent } from './talks.contract';

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
export const readMyPresence = endpoint({
  id: 'talks.read_presence',
  method: 'GET',
  path: '/api/events/:event/my-presence',
  summary: 'One’s own travel window.',
  params: inEvent,
  response: presenceSchema,
});
export const saveMyPresence = endpoint({
  id: 'talks.save_presence',
  method: 'PUT',
  path: '/api/events/:event/my-presence',
  summary: 'Save one’s own travel window.',
  params: inEvent,
  body: presenceInput,
  response: presenceSchema,
  versioned: true,
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
  rooms: z.array(
    z.object({
      name: z.string(),
      shortName: z.string(),
      capacity: z.number().int(),
      features: z.array(roomFeature),
    }),
  ),
});
export type Stage = z.infer<typeof stageSchema>;
export const readStage = endpoint({
  id: 'talks.stage',
  method: 'GET',
  path: '/api/events/:event/stage',
  summary: 'Dates, deadlines and rooms of an event, for those who speak there.',
  params: inEvent,
  response: stageSchema,
});

export const talksStayEndpoints = [readMyPresence, saveMyPresence, readStage];
