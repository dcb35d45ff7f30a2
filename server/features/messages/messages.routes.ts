import type { Router } from 'express';
import * as contract from '@shared/features/messages/messages.contract';
import { conflict } from '@shared/http/problem';
import { env } from '@server/env';
import { anyone, inEvent, inInstitute, signedIn } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { retryMessage } from '@server/mail/dispatch';
import { listTestMail, readTestMail, testCalendar } from './messages-test-mail.service';
import { answersOf, listMessages, myFeedToken, readAnswer, readMessage, recordAnswer } from './messages.service';

export function messagesRoutes(router: Router): void {
  serve(router, contract.listEventMessages, { access: inEvent('organiser'), handle: ({ eventId, query }) => listMessages(eventId, query) });
  serve(router, contract.readMessage, { access: inEvent('organiser'), handle: ({ eventId, params }) => readMessage(eventId, params.message) });
  serve(router, contract.listAllMessages, { access: inInstitute('administrator'), handle: ({ query }) => listMessages(null, query) });
  serve(router, contract.retryMessage, {
    access: inInstitute('administrator'),
    handle: async ({ params }) => {
      if (!(await retryMessage(params.message))) throw conflict('messages.not_failed', 'Only a failed message is sent again.');
    },
  });
  serve(router, contract.listTestMail, { access: signedIn, handle: async ({ actor, query }) => listTestMail(actor, query.q) });
  serve(router, contract.readTestMail, { access: signedIn, handle: async ({ actor, params }) => readTestMail(actor, params.mail) });
  serve(router, contract.downloadTestCalendar, { access: signedIn, handle: async ({ actor, params }) => testCalendar(actor, params.mail) });
  serve(router, contract.readInvitationAnswer, { access: anyone, handle: ({ params }) => readAnswer(params.token) });
  serve(router, contract.answerInvitation, { access: anyone, handle: ({ params, body }) => recordAnswer(params.token, body.answer) });
  serve(router, contract.talkAnswers, { access: inEvent('organiser'), handle: async ({ eventId }) => ({ items: await answersOf(eventId) }) });
  serve(router, contract.readMyFeed, { access: signedIn, handle: async ({ actor, body }) => ({ url: `${env.BASE_URL}/calendars/${await myFeedToken(actor, body.renew)}.ics` }) });
}
