import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll, afterEach, beforeAll, beforeEach, expect, it } from 'vitest';
import type { FeeCategory } from '../../../shared/features/finance/finance.contract';
import * as contract from '../../../shared/features/registration/registration.contract';
import { reconcile, startCheckout } from '../../../server/features/finance/finance-payments.service';
import { OrderRow, PaymentRow } from '../../../server/features/finance/finance.model';
import { replaceFeeTable } from '../../../server/features/finance/finance.service';
import { ApplicationRow } from '../../../server/features/registration/registration.model';
import { placesOf } from '../../../server/features/registration/registration.service';
import {
  decideApplication,
  lapseOffers,
} from '../../../server/features/registration/registration-applications.service';
import { systemActor } from '../../../server/features/accounts/accounts.service';
import { startLocalStripe, type LocalStripe } from '../../../server/fakes/stripe/local-stripe';
import { newId } from '../../../server/db/id';
import { transaction } from '../../../server/db/transaction';
import { buildAccount } from '../../support/build';
import { buildOpenEvent, registrationInput } from '../../support/build-registration';
import { startTestApp, type TestApp } from '../../support/server';

let t: TestApp;
let server: Server;
let stripe: LocalStripe;
beforeAll(async () => {
  t = await startTestApp();
  server = t.app.listen(0);
});
afterAll(() => void server.close());
beforeEach(async () => {
  await t.reset();
  stripe = await startLocalStripe({ appPort: (server.address() as AddressInfo).port, port: 0, forget: true });
});
afterEach(() => stripe.stop());
const onlyOrder = async (): Promise<OrderRow> => (await OrderRow.findOne()) as OrderRow;
const urls = {
  title: 'x',
  email: 'a@example.org',
  successUrl: 'http://localhost/a',
  cancelUrl: 'http://localhost/b',
};

it('an extra named twice is not oversold', async () => {
  const { event, category, dinner } = await buildOpenEvent();
  const c = await t.signIn(await buildAccount());
  const r = await c.call(contract.register, {
    params: { event: event.slug },
    body: registrationInput(category, {
      extras: [
        { extraId: dinner, quantity: 4 },
        { extraId: dinner, quantity: 4 },
      ],
    }),
  });
  expect(r.status).toBe(422);
});
it('a category of another career stage is refused', async () => {
  const { event, fees } = await buildOpenEvent();
  const next = await replaceFeeTable(systemActor, event.slug, {
    taxNote: '',
    categories: [
      { ...(fees.categories[0] as FeeCategory), name: 'Students', stages: ['student'], regularMinor: 100 },
    ],
    extras: [],
  });
  const c = await t.signIn(await buildAccount({ careerStage: 'faculty' }));
  const r = await c.call(contract.register, {
    params: { event: event.slug },
    body: registrationInput(next.categories[0]?.id ?? ''),
  });
  expect(r.status).toBe(422);
});
it('a KWD price that the card service cannot take is refused in words, not a 500', async () => {
  const { event, fees } = await buildOpenEvent({ currency: 'KWD' });
  const next = await replaceFeeTable(systemActor, event.slug, {
    taxNote: '',
    categories: [{ ...(fees.categories[0] as FeeCategory), regularMinor: 13_787 }],
    extras: [],
  });
  const c = await t.signIn(await buildAccount());
  const r = await c.call(contract.register, {
    params: { event: event.slug },
    body: registrationInput(next.categories[0]?.id ?? ''),
  });
  expect(r.status).toBe(409);
  expect(r.body).toMatchObject({ code: 'finance.not_chargeable' });
  expect(await OrderRow.count()).toBe(0);
});
it('opening the payment page never shortens the reservation', async () => {
  const { event, category } = await buildOpenEvent();
  const c = await t.signIn(await buildAccount());
  await c.call(contract.register, { params: { event: event.slug }, body: registrationInput(category) });
  const before = (await onlyOrder()).reservedUntil as Date;
  await c.call(contract.pay, { params: { event: event.slug }, body: {} });
  const after = (await onlyOrder()).reservedUntil as Date;
  expect(after.getTime()).toBeGreaterThanOrEqual(before.getTime());
});
it('a crash between session and payment row does not block paying again', async () => {
  const { event, category } = await buildOpenEvent();
  const c = await t.signIn(await buildAccount());
  await c.call(contract.register, { params: { event: event.slug }, body: registrationInput(category) });
  const order = await onlyOrder();
  const now = new Date();
  await startCheckout(order.id, urls, now);
  await transaction(async () => {
    await PaymentRow.destroy({ where: {} });
    await OrderRow.update({ reservedUntil: order.reservedUntil }, { where: {} });
  });
  await expect(startCheckout(order.id, urls, new Date(now.getTime() + 5000))).resolves.toHaveProperty('url');
});
it('one session that the card service does not know does not stop reconciliation of the others', async () => {
  const { event, category } = await buildOpenEvent();
  const c = await t.signIn(await buildAccount());
  await c.call(contract.register, { params: { event: event.slug }, body: registrationInput(category) });
  const order = await onlyOrder();
  await transaction(() =>
    PaymentRow.create({
      id: newId(),
      orderId: order.id,
      provider: 'stripe',
      providerId: 'cs_lost',
      amountMinor: 1,
      currency: 'EUR',
      state: 'pending',
    }),
  );
  await expect(reconcile(new Date(Date.now() + 60_000))).resolves.toBe(1);
});
it('in an event by application, a cancelled registration gives its place back', async () => {
  const { event, category } = await buildOpenEvent({ admission: 'application', capacity: 1 });
  const c = await t.signIn(await buildAccount());
  const a = await c.call(contract.applyForPlace, {
    params: { event: event.slug },
    body: { motivation: 'I want to come to this event.', background: 'x' },
  });
  expect(a.status).toBe(200);
  await decideApplication(
    systemActor,
    event.id,
    a.body.id,
    undefined,
    { decision: 'offered', note: '', answerBy: null },
    new Date(),
  );
  const r = await c.call(contract.register, {
    params: { event: event.slug },
    body: registrationInput(category),
  });
  expect(r.status).toBe(200);
  await c.call(contract.cancelRegistration, {
    params: { event: event.slug },
    version: r.body.version,
    body: {},
  });
  await t.runJobs();
  expect((await placesOf(event.id)).free).toBe(1);
});
it('whose offer has lapsed can go on the waiting list again', async () => {
  const { event, category } = await buildOpenEvent({ capacity: 1 });
  const first = await t.signIn(await buildAccount());
  await first.call(contract.register, { params: { event: event.slug }, body: registrationInput(category) });
  const c = await t.signIn(await buildAccount());
  const a = await c.call(contract.applyForPlace, {
    params: { event: event.slug },
    body: { motivation: 'I want to come to this event.', background: 'x' },
  });
  await transaction(() =>
    ApplicationRow.update(
      { state: 'offered', answerBy: new Date(Date.now() - 1000) },
      { where: { id: a.body.id } },
    ),
  );
  await lapseOffers(new Date());
  const again = await c.call(contract.applyForPlace, {
    params: { event: event.slug },
    body: { motivation: 'I want to come to this event.', background: 'x' },
  });
  expect(again.status).toBe(200);
});
