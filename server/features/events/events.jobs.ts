import { defineFact } from '@server/jobs/job';

export const eventStateChanged = defineFact<{ eventId: string; from: string; to: string }>(
  'eventStateChanged',
);
