import { Op } from 'sequelize';
import { sessionOutcome } from '@shared/features/finance/finance.rules';
import { conflict } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { log } from '@server/http/request-log';
import { announce } from '@server/jobs/job';
import { recordAudit } from '@server/features/accounts/accounts.service';
import {
  createCheckout,
  expireCheckout,
  readCheckout,
  type CardNotice,
  type CheckoutSession,
} from './finance.gateway';
import { paymentFailed } from './finance.jobs';
import { OrderRow, PaymentRow, ProviderEventRow } from './finance.model';
import { bookCardPayment } from './finance.service';

const HALF_HOUR = 30 * 60_000;
const TEN_MINUTES = 10 * 60_000;

/**
 * Opens a payment page for an order and returns its address. Amount and currency come from the order, never from the
 * browser. The order's place is kept while the page is open. An open page of the same order is used again.
 */
export async function startCheckout(
  orderId: string,
  input: { title: string; email: string; successUrl: string; cancelUrl: string },
  now: Date,
): Promise<{ url: string }> {
  const order = (await OrderRow.findByPk(orderId)) as OrderRow;
  if (order.state !== 'placed')
    throw conflict(
      'finance.not_open',
      order.state === 'paid' ? 'This order is paid already.' : 'This order is closed. Register again.',
    );
  const open = await PaymentRow.findOne({ where: { orderId, state: 'pending' }, order: [['id', 'DESC']] });
  if (open) {
    const session = await readCheckout(open.providerId);
    if (sessionOutcome(session) === 'open' && session.url) return { url: session.url };
    await settle(session, now);
  }
  const reserved = order.reservedUntil?.getTime() ?? 0;
  const least = now.getTime() + HALF_HOUR + TEN_MINUTES + 60_000;
  const wanted = Math.min(Math.max(least, reserved), now.getTime() + 23 * 3_600_000);
  // Whole ten minutes: two clicks send the same request, and a try after a crash is not refused as another one.
  const expiresAt = new Date(Math.floor(wanted / TEN_MINUTES) * TEN_MINUTES);
  const tries = await PaymentRow.count({ where: { orderId } });
  const { amountMinor, currency } = { amountMinor: order.totalMinor, currency: order.currency };
  const session = await createCheckout({
    orderId,
    orderNumber: order.number,
    ...input,
    amountMinor,
    currency,
    expiresAt,
    idempotencyKey: `checkout-${orderId}-${tries}-${expiresAt.getTime()}`,
  });
  await transaction(async () => {
    if (!(await PaymentRow.findOne({ where: { provider: 'stripe', providerId: session.id } }))) {
      await PaymentRow.create({
        id: newId(),
        orderId,
        provider: 'stripe',
        providerId: session.id,
        amountMinor,
        currency,
        state: 'pending',
      });
    }
    if (expiresAt.getTime() > reserved)
      await OrderRow.update({ reservedUntil: expiresAt }, { where: { id: orderId, state: 'placed' } });
  });
  return { url: session.url as string };
}

/**
 * Takes in one notice, once: its id is stored in the same transaction as its effect. The state is derived from the
 * session as the provider tells it now, not from the order in which notices arrive.
 */
export async function takeNotice(notice: CardNotice, now: Date): Promise<string> {
  if (await ProviderEventRow.findByPk(notice.id)) return 'known';
  const payment = notice.sessionId
    ? await PaymentRow.findOne({ where: { provider: 'stripe', providerId: notice.sessionId } })
    : await latestPayment(notice.orderId);
  if (!payment) return remember(notice, 'not ours', async () => undefined);
  const session = await readCheckout(payment.providerId);
  return remember(notice, 'settled', () => applySession(payment.id, session, notice, now));
}

const latestPayment = (orderId: string | null): Promise<PaymentRow | null> =>
  orderId ? PaymentRow.findOne({ where: { orderId }, order: [['id', 'DESC']] }) : Promise.resolve(null);

function remember(notice: CardNotice, effect: string, work: () => Promise<unknown>): Promise<string> {
  return transaction(async () => {
    if (await ProviderEventRow.findByPk(notice.id)) return 'known';
    await ProviderEventRow.create({ id: notice.id, type: notice.type, effect });
    await work();
    return effect;
  });
}

/** What the present state of a session means for us. In the ambient transaction. */
async function applySession(
  paymentId: string,
  session: CheckoutSession,
  notice: CardNotice | null,
  now: Date,
): Promise<void> {
  const payment = (await PaymentRow.findByPk(paymentId)) as PaymentRow;
  const order = (await OrderRow.findByPk(payment.orderId)) as OrderRow;
  const outcome = sessionOutcome(session);
  if (outcome === 'paid') {
    if (session.amountMinor !== payment.amountMinor || session.currency !== payment.currency)
      return flagAmount(order, payment, session);
    await bookCardPayment(order, payment, now);
    return;
  }
  if (outcome === 'expired' && payment.state === 'pending') await payment.update({ state: 'failed' });
  if (notice?.type === 'payment_intent.payment_failed' && order.state === 'placed') {
    const sentence = session.failure ?? 'The card was not charged.';
    await order.update({ lastFailure: sentence });
    await announce(paymentFailed, {
      orderId: order.id,
      registrationId: order.registrationId,
      sentence,
      paymentId: notice.id,
    });
  }
}

/** Another amount or currency than ordered is never taken silently: nothing is booked, a person looks at it. */
async function flagAmount(order: OrderRow, payment: PaymentRow, session: CheckoutSession): Promise<void> {
  const why = `The card payment is ${session.amountMinor} ${session.currency}, the order ${payment.amountMinor} ${payment.currency} (minor units).`;
  if (order.oddity === why) return;
  await order.update({ oddity: why });
  await recordAudit({
    actor: null,
    action: 'finance.oddity',
    subject: 'order',
    subjectId: order.id,
    eventId: order.eventId,
    after: { why },
  });
}

const settle = (session: CheckoutSession, now: Date): Promise<void> =>
  transaction(async () => {
    const payment = await PaymentRow.findOne({ where: { provider: 'stripe', providerId: session.id } });
    if (payment) await applySession(payment.id, session, null, now);
  });

/**
 * Asks the provider about every payment that is open with us: heals what a lost notice left behind. One that can't be
 * read does not keep the others waiting. Returns how many were asked.
 */
export async function reconcile(now: Date): Promise<number> {
  const open = await PaymentRow.findAll({
    where: { state: 'pending', createdAt: { [Op.lt]: new Date(now.getTime() - 20_000) } },
    order: ['id'],
  });
  for (const payment of open)
    await reconcileOne(payment, now).catch((error: unknown) =>
      log.error({ err: error, payment: payment.id }, 'reconcile'),
    );
  return open.length;
}

async function reconcileOne(payment: PaymentRow, now: Date): Promise<void> {
  const session = await readCheckout(payment.providerId);
  await settle(session, now);
  const order = (await OrderRow.findByPk(payment.orderId)) as OrderRow;
  if (sessionOutcome(session) === 'open' && order.state !== 'placed')
    await expireCheckout(payment.providerId);
}

/** Asks the provider about one order now, when its owner comes back from the payment page. */
export async function refreshOrder(orderId: string, now: Date): Promise<void> {
  const payment = await PaymentRow.findOne({ where: { orderId, state: 'pending' }, order: [['id', 'DESC']] });
  if (payment) await settle(await readCheckout(payment.providerId), now);
}
