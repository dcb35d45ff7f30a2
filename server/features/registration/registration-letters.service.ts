import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import { on, announce, type Reaction } from '@server/jobs/job';
import { queueMessage } from '@server/mail/outbox';
import {
  accountById,
  recordAudit,
  systemActor,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { orderExpired, orderPaid, paymentFailed } from '@server/features/finance/finance.jobs';
import { orderOf } from '@server/features/finance/finance.service';
import { offerFreedPlaces } from './registration-applications.service';
import {
  applicationDecided,
  applicationReceived,
  registrationCancelled,
  registrationConfirmed,
} from './registration.jobs';
import {
  applicationDecisionLetter,
  applicationReceivedLetter,
  paymentFailedLetter,
  receiptLetter,
} from './registration.mail';
import { ApplicationRow, RegistrationRow } from './registration.model';
import { useUpOffer } from './registration.service';

async function partsOf(registrationId: string) {
  const row = (await RegistrationRow.findByPk(registrationId)) as RegistrationRow;
  const [event, person, order] = await Promise.all([
    eventById(row.eventId),
    accountById(row.accountId),
    orderOf(registrationId),
  ]);
  return {
    row,
    event,
    person: person as PersonView,
    order,
    url: `${env.BASE_URL}/events/${event.slug}/registration`,
  };
}

async function applicationParts(applicationId: string) {
  const row = (await ApplicationRow.findByPk(applicationId)) as ApplicationRow;
  const [event, person] = await Promise.all([eventById(row.eventId), accountById(row.accountId)]);
  return { row, event, person: person as PersonView, url: `${env.BASE_URL}/events/${event.slug}/register` };
}

/** What follows from money and decisions: places, letters, the waiting list. */
export const registrationReactions: readonly Reaction[] = [
  on(orderPaid, 'confirm the place', async ({ orderId, registrationId }) => {
    await transaction(async () => {
      const row = (await RegistrationRow.findByPk(registrationId)) as RegistrationRow;
      if (row.state !== 'reserved') return;
      await row.update({ state: 'registered' });
      await recordAudit({
        actor: systemActor,
        action: 'registration.confirmed',
        subject: 'registration',
        subjectId: row.id,
        eventId: row.eventId,
      });
      await announce(registrationConfirmed, { registrationId, orderId });
    });
  }),
  on(registrationConfirmed, 'receipt', async ({ registrationId, orderId }) => {
    const { row, event, person, order, url } = await partsOf(registrationId);
    if (!order) return;
    await queueMessage({
      letter: 'registration.receipt',
      accountId: person.id,
      eventId: event.id,
      subjectId: registrationId,
      to: { name: person.printedName, address: person.email },
      replyTo: event.contactEmail,
      dedupKey: `registration.receipt:${orderId}`,
      mail: receiptLetter({
        name: person.printedName,
        event,
        number: order.number,
        code: row.code,
        paidAt: (order.paidAt ?? new Date()).toISOString(),
        price: order.price,
        url,
      }),
    });
  }),
  on(paymentFailed, 'say that the card was not charged', async ({ registrationId, sentence, paymentId }) => {
    const { event, person, order, url } = await partsOf(registrationId);
    await queueMessage({
      letter: 'registration.payment_failed',
      accountId: person.id,
      eventId: event.id,
      subjectId: registrationId,
      to: { name: person.printedName, address: person.email },
      replyTo: event.contactEmail,
      dedupKey: `registration.payment_failed:${paymentId}`,
      mail: paymentFailedLetter({
        name: person.printedName,
        event,
        sentence,
        until: order?.reservedUntil?.toISOString() ?? null,
        url,
      }),
    });
  }),
  on(orderExpired, 'give the place back', async ({ registrationId }) => {
    const eventId = await transaction(async () => {
      const row = (await RegistrationRow.findByPk(registrationId)) as RegistrationRow;
      if (row.state === 'reserved') {
        await row.update({ state: 'cancelled' });
        await useUpOffer(row);
        await recordAudit({
          actor: systemActor,
          action: 'registration.lapsed',
          subject: 'registration',
          subjectId: row.id,
          eventId: row.eventId,
        });
      }
      return row.eventId;
    });
    await offerFreedPlaces(eventId, new Date());
  }),
  on(registrationCancelled, 'offer the place', async ({ registrationId }) => {
    const row = (await RegistrationRow.findByPk(registrationId)) as RegistrationRow;
    await offerFreedPlaces(row.eventId, new Date());
  }),
  on(applicationReceived, 'letter', async ({ applicationId }) => {
    const { row, event, person, url } = await applicationParts(applicationId);
    await queueMessage({
      letter: 'registration.application_received',
      accountId: person.id,
      eventId: event.id,
      subjectId: applicationId,
      to: { name: person.printedName, address: person.email },
      replyTo: event.contactEmail,
      dedupKey: `registration.application_received:${applicationId}`,
      mail: applicationReceivedLetter({
        name: person.printedName,
        event,
        waiting: row.state === 'waiting',
        url,
      }),
    });
  }),
  on(applicationDecided, 'letter', async ({ applicationId, decision }, job) => {
    const { row, event, person, url } = await applicationParts(applicationId);
    await queueMessage({
      letter: 'registration.application_decision',
      accountId: person.id,
      eventId: event.id,
      subjectId: applicationId,
      to: { name: person.printedName, address: person.email },
      replyTo: event.contactEmail,
      dedupKey: `registration.application_decision:${job.id}`,
      mail: applicationDecisionLetter({
        name: person.printedName,
        event,
        decision,
        note: row.note,
        answerBy: row.answerBy?.toISOString() ?? null,
        url,
      }),
    });
  }),
] as unknown as Reaction[];
