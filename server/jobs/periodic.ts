import { reconcile } from '../features/finance/finance-payments.service';
import { expireOrders } from '../features/finance/finance.service';
import { lapseOffers } from '../features/registration/registration-applications.service';
import { lapseAwards } from '../features/grants/grants-decisions.service';
import type { Periodic } from './schedule';

/** Everything that runs by the clock: one line per job. */
export const periodic: readonly Periodic[] = [
  { name: 'expire unpaid orders', everySeconds: 60, run: expireOrders },
  { name: 'lapse offers', everySeconds: 300, run: lapseOffers },
  { name: 'lapse grant offers', everySeconds: 300, run: lapseAwards },
  { name: 'reconcile card payments', everySeconds: 60, run: reconcile },
];
