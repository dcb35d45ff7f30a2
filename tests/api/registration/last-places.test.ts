import { beforeAll, beforeEach, expect, it } from 'vitest';
import { register } from '../../../shared/features/registration/registration.contract';
import { RegistrationRow } from '../../../server/features/registration/registration.model';
import { OrderRow } from '../../../server/features/finance/finance.model';
import { trialBalance } from '../../../server/features/finance/finance-ledger.service';
import { AccountRow, SessionRow } from '../../../server/features/accounts/accounts.model';
import { transaction } from '../../../server/db/transaction';
import { hashSecret, newSessionSecret } from '../../../server/http/session';
import { newId } from '../../../server/db/id';
import { buildAccount } from '../../support/build';
import { buildOpenEvent, registrationInput } from '../../support/build-registration';
import { startTestApp, type TestApp } from '../../support/server';
import request from 'supertest';

let t: TestApp;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(() => t.reset());

/** 200 people with a session each, made directly: signing in 200 times would measure argon2, not registration. */
async function people(count: number): Promise<string[]> {
  const first = await buildAccount();
  const template = (await AccountRow.findByPk(first.id)) as AccountRow;
  const secrets: string[] = [];
  await transaction(async () => {
    for (let i = 0; i < count; i++) {
      const id = newId();
      const secret = newSessionSecret();
      await AccountRow.create({ ...template.get({ plain: true }), id, email: `crowd${i}@example.org` });
      const now = new Date();
      await SessionRow.create({
        id: hashSecret(secret),
        accountId: id,
        device: 'test',
        startedAt: now,
        lastSeenAt: now,
        idleSeconds: 3600,
        expiresAt: new Date(now.getTime() + 3_600_000),
      });
      secrets.push(secret);
    }
  });
  return secrets;
}

it('gives the last 10 places to 10 of 200 people who try at once, and a clear answer to the others', async () => {
  const { event, category } = await buildOpenEvent({ capacity: 10 });
  const secrets = await people(200);
  const server = t.app.listen(0);
  const csrf = newSessionSecret();
  const tryOne = (secret: string) =>
    request(server)
      .post(`/api/events/${event.slug}/registrations`)
      .set('Cookie', [`analemma=${secret}`, `analemma-csrf=${csrf}`].join('; '))
      .set('X-CSRF-Token', csrf)
      .set('Sec-Fetch-Site', 'same-origin')
      .send(registrationInput(category));
  const answers = await Promise.all(secrets.map(tryOne));
  server.close();
  const count = (status: number): number => answers.filter((answer) => answer.status === status).length;
  expect(register.path).toBe('/api/events/:event/registrations');
  expect(count(200)).toBe(10);
  expect(count(409)).toBe(190);
  const refused = answers
    .filter((answer) => answer.status === 409)
    .map((answer) => JSON.parse(answer.text) as { code: string; detail: string });
  expect(new Set(refused.map((problem) => problem.code))).toEqual(new Set(['registration.full']));
  expect(refused[0]?.detail).toBe('All places are taken. You can put yourself on the waiting list.');
  expect(await RegistrationRow.count({ where: { eventId: event.id } })).toBe(10);
  expect(await OrderRow.count()).toBe(10);
  const balance = await trialBalance();
  expect(balance.reduce((sum, row) => sum + row.debitMinor - row.creditMinor, 0)).toBe(0);
}, 60_000);
