import type { Router } from 'express';
import * as contract from '@shared/features/site/site.contract';
import { anyone } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { listPublicEvents, listPublicPeople, readPublicEvent, readPublicTalk } from './site.service';

export function siteRoutes(router: Router): void {
  serve(router, contract.listPublicEvents, {
    access: anyone,
    handle: async () => ({ items: await listPublicEvents() }),
  });
  serve(router, contract.readPublicEvent, {
    access: anyone,
    handle: ({ params, now }) => readPublicEvent(params.event, now),
  });
  serve(router, contract.readPublicTalk, {
    access: anyone,
    handle: ({ params }) => readPublicTalk(params.event, params.talk),
  });
  serve(router, contract.listPublicPeople, {
    access: anyone,
    handle: ({ params }) => listPublicPeople(params.event),
  });
}
