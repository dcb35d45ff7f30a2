import type { Router } from 'express';
import { readOverview } from '@shared/features/runup/runup.contract';
import { inEvent } from '@server/http/authorize';
import { serve } from '@server/http/serve';
import { overviewOf } from './runup.service';

export function runupRoutes(router: Router): void {
  serve(router, readOverview, {
    access: inEvent('organiser', 'finance'),
    handle: ({ actor, params, now }) => overviewOf(actor, params.event, now),
  });
}
