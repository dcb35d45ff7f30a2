import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id } from '../../lib/ids';
import { localDate } from '../../lib/time';
import { email, password, sessionSchema } from '../accounts/accounts.contract';
import { inEvent, talkKind, talkSchema } from './talks.contract';
import { personName, talkMinutes } from './talks-abstract.contract';

export const inviteSpeaker = endpoint({
  id: 'talks.invite',
  method: 'POST',
  path: '/api/events/:event/speaker-invitations',
  summary: 'Invite a speaker by mail; makes the talk as a draft.',
  params: inEvent,
  body: z.strictObject({
    email,
    givenName: personName,
    familyName: personName,
    affiliation: z.string().trim().max(200).default(''),
    kind: z.enum(['plenary', 'invited', 'course_lecture']).default('invited'),
    minutes: talkMinutes,
    questionMinutes: z.number().int().min(0).max(120).default(5),
    message: z.string().trim().max(3000).default(''),
  }),
  response: talkSchema,
});
export const remindSpeakers = endpoint({
  id: 'talks.remind',
  method: 'POST',
  path: '/api/events/:event/abstract-reminders',
  summary: 'Write to those who owe an abstract; at most once a day each.',
  params: inEvent,
  body: z.strictObject({}),
  response: z.object({ written: z.number().int() }),
});

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
export const readSpeakerInvitation = endpoint({
  id: 'talks.read_invitation',
  method: 'GET',
  path: '/api/speaker-invitations/:token',
  summary: 'What an invitation to speak says.',
  params: byToken,
  response: speakerInvitationView,
});
export const answerSpeakerInvitation = endpoint({
  id: 'talks.answer_invitation',
  method: 'POST',
  path: '/api/speaker-invitations/:token',
  summary:
    'Accept or decline an invitation to speak; accepting sets the password of a new account and signs in.',
  params: byToken,
  body: z.strictObject({
    answer: z.enum(['accepted', 'declined']),
    note: z.string().trim().max(2000).default(''),
    password: password.optional(),
  }),
  response: z.object({
    answer: z.enum(['accepted', 'declined']),
    session: sessionSchema,
    eventSlug: z.string(),
    talkId: id,
  }),
});

export const talksInvitationEndpoints = [
  inviteSpeaker,
  remindSpeakers,
  readSpeakerInvitation,
  answerSpeakerInvitation,
];
