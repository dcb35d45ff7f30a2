import type { Router } from 'express';
import { resolveScopesWith } from './http/serve';
import { nameScopesWith } from './features/accounts/accounts-office.service';
import { accountsRoutes } from './features/accounts/accounts.routes';
import { eventIdOf, eventsById, knowAboutEvents } from './features/events/events.service';
import { eventsRoutes } from './features/events/events.routes';
import { programmeRoutes } from './features/programme/programme.routes';
import { placedRooms } from './features/programme/programme.service';
import { talksRoutes } from './features/talks/talks.routes';
import { financeRoutes } from './features/finance/finance.routes';
import { countFeeCategories } from './features/finance/finance.service';
import { registrationRoutes } from './features/registration/registration.routes';
import { isParticipant } from './features/registration/registration.service';
import { knowParticipantsBy } from './features/talks/talks-materials.service';
import { feedRoutes } from './features/messages/messages-feeds.routes';
import { grantsRoutes } from './features/grants/grants.routes';
import { fundIdOf, fundsById } from './features/grants/grants-funds.service';
import { messagesRoutes } from './features/messages/messages.routes';
import { siteRoutes } from './features/site/site.routes';
import { unsubscribeRoutes } from './features/messages/messages-unsubscribe.routes';
import { runupRoutes } from './features/runup/runup.routes';
import { demoAccounts } from '../seeds/demo-accounts';

/** The one list of doors: every feature mounts its endpoints here, lower features first. */
export function mountRoutes(router: Router): void {
  accountsRoutes(router, async () => [...demoAccounts]);
  eventsRoutes(router);
  talksRoutes(router);
  programmeRoutes(router);
  financeRoutes(router);
  registrationRoutes(router);
  grantsRoutes(router);
  messagesRoutes(router);
  feedRoutes(router);
  runupRoutes(router);
  siteRoutes(router);
  unsubscribeRoutes(router);
}

/** How doors find what a path names; here, because the doors know no feature. */
export function introduceScopes(): void {
  resolveScopesWith({ event: eventIdOf, fund: fundIdOf });
  knowParticipantsBy(isParticipant);
  knowAboutEvents({ placedRooms, feeCategories: countFeeCategories });
  nameScopesWith(async (ids) => {
    const list = [...ids];
    const [events, funds] = [await eventsById(list), await fundsById(list)];
    return new Map([
      ...[...events].map(([id, event]) => [id, { key: event.slug, title: event.title }] as const),
      ...[...funds].map(([id, fund]) => [id, { key: id, title: fund.name }] as const),
    ]);
  });
}
