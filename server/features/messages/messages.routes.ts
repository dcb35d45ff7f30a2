import type { Router } from 'express';
import * as letters from '@shared/features/messages/letters.contract';
import * as contract from '@shared/features/messages/messages.contract';
import { env } from '@server/env';
import { anyone, inEvent, inInstitute, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { myFeedToken } from './messages-feeds.service';
import { answersOf, readAnswer, recordAnswer } from './messages-invitations.service';
import { letterGroupsOf, previewLetter, sendLetter, testLetter } from './messages-letters.service';
import { listTestMail, readTestMail, testAttachment, testCalendar } from './messages-test-mail.service';
import { listMessages, readMessage, sendAgain } from './messages.service';

const organiser = inEvent('organiser');
const office = inInstitute('administrator');

export function messagesRoutes(router: Router): void {
  serve(router, contract.listEventMessages, {
    access: organiser,
    handle: ({ eventId, query }) => listMessages(eventId, query),
  });
  serve(router, contract.readEventMessage, {
    access: organiser,
    handle: ({ eventId, params }) => readMessage(eventId, params.message),
  });
  serve(router, contract.retryEventMessage, {
    access: organiser,
    handle: ({ eventId, params }) => sendAgain(eventId, params.message),
  });
  serve(router, contract.listAllMessages, {
    access: office,
    handle: ({ query }) => listMessages(null, query),
  });
  serve(router, contract.readAnyMessage, {
    access: office,
    handle: ({ params }) => readMessage(null, params.message),
  });
  serve(router, contract.retryMessage, {
    access: office,
    handle: ({ params }) => sendAgain(null, params.message),
  });

  serve(router, letters.listLetterGroups, {
    access: organiser,
    handle: async ({ eventId }) => ({ items: await letterGroupsOf(eventId) }),
  });
  serve(router, letters.previewLetter, {
    access: organiser,
    handle: ({ eventId, body }) => previewLetter(eventId, body),
  });
  serve(router, letters.testLetter, {
    access: organiser,
    handle: ({ actor, eventId, body, now }) => testLetter(actor, eventId, body, now),
  });
  serve(router, letters.sendLetter, {
    access: organiser,
    handle: async ({ actor, eventId, body }) => ({ people: await sendLetter(actor, eventId, body) }),
  });

  serve(router, contract.listTestMail, {
    access: signedIn,
    handle: async ({ actor, query }) => listTestMail(actor, query.q),
  });
  serve(router, contract.readTestMail, {
    access: signedIn,
    handle: async ({ actor, params }) => readTestMail(actor, params.mail),
  });
  serve(router, contract.downloadTestCalendar, {
    access: signedIn,
    handle: async ({ actor, params }) => testCalendar(actor, params.mail),
  });
  serve(router, contract.downloadTestAttachment, {
    access: signedIn,
    handle: async ({ actor, params }) => testAttachment(actor, params.mail, params.index),
  });

  serve(router, contract.readInvitationAnswer, {
    access: anyone,
    handle: ({ params }) => readAnswer(params.token),
  });
  serve(router, contract.answerInvitation, {
    access: anyone,
    handle: ({ params, body }) => recordAnswer(params.token, body.answer),
  });
  serve(router, contract.talkAnswers, {
    access: organiser,
    handle: async ({ eventId }) => ({ items: await answersOf(eventId) }),
  });
  serve(router, contract.readMyFeed, {
    access: signedIn,
    handle: async ({ actor, body }) => ({
      url: `${env.BASE_URL}/calendars/${await myFeedToken(actor, body.renew)}.ics`,
    }),
  });
}
