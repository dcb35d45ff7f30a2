import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import Stripe from 'stripe';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/registration/registration.contract';
import { trialBalance } from '../../../server/features/finance/finance-ledger.service';
import { reconcile } from '../../../server/features/finance/finance-payments.service';
import { OrderRow, PaymentRow, ProviderEventRow } from '../../../server/features/finance/finance.model';
import { expireOrders } from '../../../server/features/finance/finance.service';
import { startLocalStripe, type LocalStripe } from '../../../server/fakes/stripe/local-stripe';
import { buildAccount } from '../../support/build';
import { buildOpenEvent, registrationInput } from '../../support/build-registration';
import { startTestApp, type Client, type TestApp } from '../../support/server';

let t: TestApp;
let server: Server;
let stripe: LocalStripe;
let client: Client;
let slug: string;

beforeAll(async () => {
  t = await startTestApp();
  server = t.app.listen(0);
});
afterAll(() => void server.close());
beforeEach(async () => {
  await t.reset();
  stripe = await startLocalStripe({ appPort: (server.address() as AddressInfo).port, port: 0, forget: true });
  const { event, category, dinner } = await buildOpenEvent();
  slug = event.slug;
  client = await t.signIn(await buildAccount({ email: 'mira@example.org' }));
  const made = await client.call(contract.register, {
    params: { event: slug },
    body: registrationInput(category, { extras: [{ extraId: dinner, quantity: 2 }] }),
  });
  expect(made.body, JSON.stringify(made.body)).toMatchObject({
    state: 'reserved',
    order: { state: 'placed', price: { totalMinor: 33_000 } },
  });
});
afterEach(() => stripe.stop());

const openPage = async (): Promise<string> =>
  (await client.call(contract.pay, { params: { event: slug }, body: {} })).body.url;
const payWith = (url: string, card: string) =>
  fetch(url, { method: 'POST', body: new URLSearchParams({ card }), redirect: 'manual' });
const mine = async () =>
  (await client.call(contract.readDoor, { params: { event: slug } })).body.registration;
async function until(check: () => Promise<boolean>): Promise<void> {
  for (let i = 0; i < 100; i++) {
    await t.runJobs();
    if (await check()) return;
    await new Promise((resolve) => setTimeout(resolve, 30));
  }
  throw new Error('it did not come true');
}
const balanced = async (): Promise<boolean> =>
  (await trialBalance()).reduce((sum, row) => sum + row.debitMinor - row.creditMinor, 0) === 0;
const notice = (event: object, options: { secret?: string; timestamp?: number } = {}) => {
  const payload = JSON.stringify(event);
  const signature = Stripe.webhooks.generateTestHeaderString({
    payload,
    secret: options.secret ?? stripe.webhookSecret,
    ...(options.timestamp && { timestamp: options.timestamp }),
  });
  return fetch(`http://127.0.0.1:${(server.address() as AddressInfo).port}/api/webhooks/stripe`, {
    method: 'POST',
    body: payload,
    headers: { 'Stripe-Signature': signature },
  });
};
const completed = (session: string, id = 'evt_1') => ({
  id,
  object: 'event',
  type: 'checkout.session.completed',
  created: 1,
  data: { object: { id: session, object: 'checkout.session', metadata: {} } },
});

describe('G2 card payment through Checkout', () => {
  it('is declined by 4000 0000 0000 9995, then paid by 4242, and the receipt goes out once', async () => {
    const url = await openPage();
    expect((await payWith(url, '4000 0000 0000 9995')).status).toBe(402);
    await until(async () => (await mine())?.order?.lastFailure === 'Your card has insufficient funds.');
    expect((await payWith(url, '4242 4242 4242 4242')).status).toBe(303);
    await until(async () => (await mine())?.state === 'registered');
    await until(async () => t.mail.length === 2);
    expect(t.mail.map((mail) => mail.subject)).toEqual([
      'Payment not made: Conference on Lattices',
      'Registered: Conference on Lattices',
    ]);
    expect(t.mail[1]?.text).toContain('330.00 EUR');
    expect(await trialBalance()).toEqual(
      expect.arrayContaining([
        { account: 'card clearing', currency: 'EUR', debitMinor: 33_000, creditMinor: 0 },
        { account: 'receivable', currency: 'EUR', debitMinor: 33_000, creditMinor: 33_000 },
      ]),
    );
  });

  it('takes the same notice once, also when it comes many times at once, and refuses forged, old and future ones', async () => {
    const url = await openPage();
    const session = (await PaymentRow.findOne())?.providerId ?? '';
    expect((await notice(completed(session), { secret: 'whsec_wrong' })).status).toBe(400);
    expect(
      (await notice(completed(session), { timestamp: Math.floor(Date.now() / 1000) - 400 })).status,
    ).toBe(400);
    expect(
      (await notice(completed(session), { timestamp: Math.floor(Date.now() / 1000) + 4000 })).status,
    ).toBe(400);
    // The notice says completed, the session is still open: the state is read back, nothing is booked.
    expect((await notice(completed(session, 'evt_early'))).status).toBe(200);
    expect((await mine())?.order?.state).toBe('placed');
    await payWith(url, '4242424242424242');
    const answers = await Promise.all(
      Array.from({ length: 12 }, () => notice(completed(session, 'evt_many'))),
    );
    expect(answers.map((answer) => answer.status)).toEqual(Array.from({ length: 12 }, () => 200));
    await until(async () => (await mine())?.state === 'registered');
    expect(await ProviderEventRow.count({ where: { id: 'evt_many' } })).toBe(1);
    expect((await trialBalance()).find((row) => row.account === 'card clearing')?.debitMinor).toBe(33_000);
    expect(await balanced()).toBe(true);
  });

  it('flags another amount and books nothing', async () => {
    const url = await openPage();
    const session = Object.values(stripe.state.all.sessions)[0];
    if (session) session.amount_total = 100;
    await payWith(url, '4242424242424242');
    await until(async () =>
      ((await OrderRow.findOne())?.oddity ?? '').includes('The card payment is 100 EUR'),
    );
    expect((await mine())?.state).toBe('reserved');
    expect((await trialBalance()).find((row) => row.account === 'card clearing')).toBeUndefined();
  });

  it('keeps money that arrives after the place is gone, and says so', async () => {
    const url = await openPage();
    await expireOrders(new Date(Date.now() + 100 * 3_600_000));
    await t.runJobs();
    expect(await mine()).toBeNull();
    await payWith(url, '4242424242424242');
    await until(async () =>
      ((await OrderRow.findOne())?.oddity ?? '').startsWith('Paid after the order was expired.'),
    );
    expect((await trialBalance()).find((row) => row.account === 'card clearing')?.debitMinor).toBe(33_000);
    expect(await balanced()).toBe(true);
  });

  it('reconciliation heals a lost notice', async () => {
    const url = await openPage();
    await stripe.stop();
    const session = Object.values(stripe.state.all.sessions)[0];
    expect(url).toContain(session?.id ?? 'no session');
    const again = await startLocalStripe({ appPort: 9, port: 0, forget: true });
    Object.assign(again.state.all, stripe.state.all);
    await payWith(`${again.url}/pay/${session?.id ?? ''}`, '4242424242424242');
    expect((await mine())?.order?.state).toBe('placed');
    await reconcile(new Date(Date.now() + 60_000));
    await until(async () => (await mine())?.state === 'registered');
    await again.stop();
  });
});
