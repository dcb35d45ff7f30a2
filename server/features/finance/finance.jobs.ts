import { defineFact } from '@server/jobs/job';

export const orderPaid = defineFact<{ orderId: string; registrationId: string }>('orderPaid');
export const paymentFailed = defineFact<{
  orderId: string;
  registrationId: string;
  sentence: string;
  paymentId: string;
}>('paymentFailed');
export const orderExpired = defineFact<{ orderId: string; registrationId: string }>('orderExpired');
