import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { pageOf, pageQuery } from '../../http/page';
import { id, slug } from '../../lib/ids';
import { instant } from '../../lib/time';

export const messageState = z.enum(['queued', 'sending', 'sent', 'failed']);
export const messageRow = z.object({
  id,
  letter: z.string(),
  toName: z.string(),
  toAddress: z.string(),
  subject: z.string(),
  state: messageState,
  attempts: z.number().int(),
  /** In the mail server's own words. */
  lastError: z.string().nullable(),
  queuedAt: instant,
  sentAt: instant.nullable(),
  hasCalendar: z.boolean(),
});
export type MessageListRow = z.infer<typeof messageRow>;
const listQuery = pageQuery.extend({ state: messageState.optional(), q: z.string().max(100).optional() });

export const listEventMessages = endpoint({ id: 'messages.list', method: 'GET', path: '/api/events/:event/messages', summary: 'What was sent for an event, the latest first.', params: z.object({ event: slug }), query: listQuery, response: pageOf(messageRow) });
export const listAllMessages = endpoint({ id: 'messages.all', method: 'GET', path: '/api/messages', summary: 'Every message, the latest first (administrators).', query: listQuery, response: pageOf(messageRow) });
export const readMessage = endpoint({ id: 'messages.read', method: 'GET', path: '/api/events/:event/messages/:message', summary: 'The text of a message that was sent for an event.', params: z.object({ event: slug, message: id }), response: messageRow.extend({ text: z.string() }) });
export const retryMessage = endpoint({ id: 'messages.retry', method: 'POST', path: '/api/messages/:message/retry', summary: 'Queue a failed message again (administrators).', params: z.object({ message: id }), response: 'empty' });

export const testMailRow = z.object({ id: z.string(), to: z.string(), subject: z.string(), at: instant, calendarMethod: z.string().nullable() });
export const testMailDetail = testMailRow.extend({ from: z.string(), text: z.string(), html: z.string(), calendar: z.string().nullable(), attachments: z.array(z.object({ name: z.string(), type: z.string(), bytes: z.number().int() })), headers: z.array(z.object({ name: z.string(), value: z.string() })) });
export type TestMail = z.infer<typeof testMailDetail>;
export const listTestMail = endpoint({ id: 'messages.test_mail', method: 'GET', path: '/api/test-mail', summary: 'The local test mailbox, the latest first; exists in demo mode only. Administrators see all, others what was sent to them.', query: z.strictObject({ q: z.string().max(100).optional() }), response: z.object({ items: z.array(testMailRow) }) });
export const readTestMail = endpoint({ id: 'messages.read_test_mail', method: 'GET', path: '/api/test-mail/:mail', summary: 'One letter of the test mailbox.', params: z.object({ mail: z.string().max(80) }), response: testMailDetail });
export const downloadTestCalendar = endpoint({ id: 'messages.test_calendar', method: 'GET', path: '/api/test-mail/:mail/calendar', summary: 'The calendar part of a letter of the test mailbox.', params: z.object({ mail: z.string().max(80) }), response: 'file' });

export const answers = ['ACCEPTED', 'TENTATIVE', 'DECLINED'] as const;
export const answerView = z.object({ eventTitle: z.string(), talkTitle: z.string(), startsAt: instant, endsAt: instant, timeZone: z.string(), roomName: z.string(), answer: z.enum(answers).nullable(), cancelled: z.boolean() });
const byToken = z.object({ token: z.string().min(20).max(200) });
export const readInvitationAnswer = endpoint({ id: 'messages.read_answer', method: 'GET', path: '/api/calendar-answers/:token', summary: 'What an answer link is about.', params: byToken, response: answerView });
export const answerInvitation = endpoint({ id: 'messages.answer', method: 'POST', path: '/api/calendar-answers/:token', summary: 'Say whether one comes; the organiser sees it.', params: byToken, body: z.strictObject({ answer: z.enum(answers) }), response: answerView });
export const talkAnswers = endpoint({ id: 'messages.talk_answers', method: 'GET', path: '/api/events/:event/calendar-answers', summary: 'Answers to calendar invitations, by talk and person (organisers).', params: z.object({ event: slug }), response: z.object({ items: z.array(z.object({ talkId: id, accountId: id, printedName: z.string(), answer: z.enum(answers).nullable(), sequence: z.number().int(), method: z.enum(['REQUEST', 'CANCEL']) })) }) });

export const feedAddress = z.object({ url: z.string() });
export const readMyFeed = endpoint({ id: 'messages.my_feed', method: 'POST', path: '/api/my/feed', summary: 'The address of one’s own calendar feed; `renew` ends the old one.', body: z.strictObject({ renew: z.boolean().default(false) }), response: feedAddress });

export const messagesEndpoints = [listEventMessages, listAllMessages, readMessage, retryMessage, listTestMail, readTestMail, downloadTestCalendar, readInvitationAnswer, answerInvitation, talkAnswers, readMyFeed];
