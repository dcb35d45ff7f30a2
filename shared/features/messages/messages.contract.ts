import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { pageOf, pageQuery } from '../../http/page';
import { id, slug } from '../../lib/ids';
import { instant } from '../../lib/time';
import { answers } from './invitations.rules';
import { letterEndpoints } from './letters.contract';

export const messageState = z.enum(['queued', 'sending', 'sent', 'failed']);
export const messageRow = z.object({
  id,
  /** Feature and name of the letter: `talks.invitation`. */
  letter: z.string(),
  /** Whose account; null for an address without one. */
  accountId: id.nullable(),
  toName: z.string(),
  toAddress: z.string(),
  subject: z.string(),
  state: messageState,
  /** Tries so far. */
  attempts: z.number().int(),
  /** Why it did not go, in the mail server's own words. */
  lastError: z.string().nullable(),
  /** The mail server's answer when it took the letter. */
  serverReply: z.string().nullable(),
  queuedAt: instant,
  /** When it is tried next; null when it is not going to be. */
  nextAt: instant.nullable(),
  sentAt: instant.nullable(),
  /** Carries a calendar invitation. */
  hasCalendar: z.boolean(),
  can: z.object({ retry: z.boolean() }),
});
export type MessageListRow = z.infer<typeof messageRow>;
export type MessageState = MessageListRow['state'];
const listQuery = pageQuery.extend({
  state: messageState.optional(),
  /** Part of a name, an address or a subject. */
  q: z.string().max(100).optional(),
  /** What this person was sent. */
  account: id.optional(),
});
const withText = messageRow.extend({
  /** The plain text; secret parts of links are left out. */
  text: z.string(),
});
const inEvent = z.object({ event: slug });
const oneOfEvent = z.object({ event: slug, message: id });
const one = z.object({ message: id });

export const listEventMessages = endpoint({
  id: 'messages.list',
  method: 'GET',
  path: '/api/events/:event/messages',
  summary: 'What was sent for an event, the latest first.',
  params: inEvent,
  query: listQuery,
  response: pageOf(messageRow),
});
export const readEventMessage = endpoint({
  id: 'messages.read',
  method: 'GET',
  path: '/api/events/:event/messages/:message',
  summary: 'A message that was sent for an event, with its text.',
  params: oneOfEvent,
  response: withText,
});
export const retryEventMessage = endpoint({
  id: 'messages.retry_in_event',
  method: 'POST',
  path: '/api/events/:event/messages/:message/retry',
  summary: 'Queue a failed message of an event again.',
  params: oneOfEvent,
  response: 'empty',
});
export const listAllMessages = endpoint({
  id: 'messages.all',
  method: 'GET',
  path: '/api/messages',
  summary: 'Every message, the latest first (administrators).',
  query: listQuery,
  response: pageOf(messageRow),
});
export const readAnyMessage = endpoint({
  id: 'messages.read_any',
  method: 'GET',
  path: '/api/messages/:message',
  summary: 'Any message with its text (administrators).',
  params: one,
  response: withText,
});
export const retryMessage = endpoint({
  id: 'messages.retry',
  method: 'POST',
  path: '/api/messages/:message/retry',
  summary: 'Queue a failed message again (administrators).',
  params: one,
  response: 'empty',
});

export const testMailRow = z.object({
  id: z.string(),
  to: z.string(),
  subject: z.string(),
  at: instant,
  /** REQUEST, CANCEL ... of the calendar part; null without one. */
  calendarMethod: z.string().nullable(),
});
export type TestMailRow = z.infer<typeof testMailRow>;
export const testMailDetail = testMailRow.extend({
  from: z.string(),
  text: z.string(),
  html: z.string(),
  /** The iCalendar text as it came. */
  calendar: z.string().nullable(),
  attachments: z.array(z.object({ name: z.string(), type: z.string(), bytes: z.number().int() })),
  headers: z.array(z.object({ name: z.string(), value: z.string() })),
});
export type TestMail = z.infer<typeof testMailDetail>;
const oneMail = z.object({ mail: z.string().max(80) });
export const listTestMail = endpoint({
  id: 'messages.test_mail',
  method: 'GET',
  path: '/api/test-mail',
  summary:
    'The local test mailbox, the latest first; exists in demo mode only. Administrators see all, others what was sent to them.',
  query: z.strictObject({ q: z.string().max(100).optional() }),
  response: z.object({ items: z.array(testMailRow) }),
});
export const readTestMail = endpoint({
  id: 'messages.read_test_mail',
  method: 'GET',
  path: '/api/test-mail/:mail',
  summary: 'One letter of the test mailbox.',
  params: oneMail,
  response: testMailDetail,
});
export const downloadTestCalendar = endpoint({
  id: 'messages.test_calendar',
  method: 'GET',
  path: '/api/test-mail/:mail/calendar',
  summary: 'The calendar part of a letter of the test mailbox.',
  params: oneMail,
  response: 'file',
});
export const downloadTestAttachment = endpoint({
  id: 'messages.test_attachment',
  method: 'GET',
  path: '/api/test-mail/:mail/attachments/:index',
  summary: 'An attachment of a letter of the test mailbox, by its place from 0.',
  params: oneMail.extend({ index: z.coerce.number().int().min(0).max(50) }),
  response: 'file',
});

export { answers };
export const answerView = z.object({
  eventTitle: z.string(),
  eventSlug: slug,
  talkTitle: z.string(),
  startsAt: instant,
  endsAt: instant,
  /** IANA zone of the event. */
  timeZone: z.string(),
  roomName: z.string(),
  answer: z.enum(answers).nullable(),
  /** No longer in the programme: nothing to answer. */
  cancelled: z.boolean(),
});
export type AnswerView = z.infer<typeof answerView>;
const byToken = z.object({ token: z.string().min(1).max(200) });
export const readInvitationAnswer = endpoint({
  id: 'messages.read_answer',
  method: 'GET',
  path: '/api/calendar-answers/:token',
  summary: 'What an answer link is about.',
  params: byToken,
  response: answerView,
});
export const answerInvitation = endpoint({
  id: 'messages.answer',
  method: 'POST',
  path: '/api/calendar-answers/:token',
  summary: 'Say whether one comes; the organiser sees it.',
  params: byToken,
  body: z.strictObject({ answer: z.enum(answers) }),
  response: answerView,
});
export const talkAnswer = z.object({
  talkId: id,
  /** Without LaTeX. */
  talkTitle: z.string(),
  startsAt: instant,
  roomName: z.string(),
  accountId: id,
  printedName: z.string(),
  answer: z.enum(answers).nullable(),
  /** Of the last message; 0 is the first invitation. */
  sequence: z.number().int(),
  method: z.enum(['REQUEST', 'CANCEL']),
});
export type TalkAnswer = z.infer<typeof talkAnswer>;
export const talkAnswers = endpoint({
  id: 'messages.talk_answers',
  method: 'GET',
  path: '/api/events/:event/calendar-answers',
  summary: 'Answers to calendar invitations, by talk and person (organisers).',
  params: inEvent,
  response: z.object({ items: z.array(talkAnswer) }),
});

export const feedAddress = z.object({
  /** Whoever has it can read the times and rooms. */
  url: z.string(),
});
export const readMyFeed = endpoint({
  id: 'messages.my_feed',
  method: 'POST',
  path: '/api/my/feed',
  summary: 'The address of one’s own calendar feed; `renew` ends the old one.',
  body: z.strictObject({ renew: z.boolean().default(false) }),
  response: feedAddress,
});

export const messagesEndpoints = [
  listEventMessages,
  readEventMessage,
  retryEventMessage,
  listAllMessages,
  readAnyMessage,
  retryMessage,
  listTestMail,
  readTestMail,
  downloadTestCalendar,
  downloadTestAttachment,
  readInvitationAnswer,
  answerInvitation,
  talkAnswers,
  readMyFeed,
  ...letterEndpoints,
];
