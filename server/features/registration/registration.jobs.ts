import { defineFact } from '@server/jobs/job';

export const registrationConfirmed = defineFact<{ registrationId: string; orderId: string }>(
  'registrationConfirmed',
);
export const registrationCancelled = defineFact<{ registrationId: string }>('registrationCancelled');
export const applicationReceived = defineFact<{ applicationId: string }>('applicationReceived');
export const applicationDecided = defineFact<{
  applicationId: string;
  decision: 'offered' | 'waiting' | 'declined';
}>('applicationDecided');
