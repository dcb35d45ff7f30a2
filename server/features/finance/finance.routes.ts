import type { Router } from 'express';
import * as contract from '@shared/features/finance/finance.contract';
import { notFound } from '@shared/http/problem';
import { anyone, inEvent, inInstitute } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { eventById } from '@server/features/events/events.service';
import { trialBalance } from './finance-ledger.service';
import { feeTableOf, replaceFeeTable } from './finance.service';
import { holds } from '@server/http/authorize';

export function financeRoutes(router: Router): void {
  serve(router, contract.readFeeTable, {
    access: anyone,
    handle: async ({ maybeActor, eventId }) => {
      const event = await eventById(eventId);
      if (event.state === 'draft' && !holds(maybeActor, 'organiser', eventId)) throw notFound('This event');
      return feeTableOf(eventId);
    },
  });
  serve(router, contract.replaceFeeTable, {
    access: inEvent('organiser'),
    handle: ({ actor, params, body }) => replaceFeeTable(actor, params.event, body),
  });
  serve(router, contract.readTrialBalance, {
    access: inInstitute('finance'),
    handle: async () => ({ rows: await trialBalance() }),
  });
}
