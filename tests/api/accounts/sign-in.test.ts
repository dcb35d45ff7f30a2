import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/accounts/accounts.contract';
import { administrator, buildAccount, testPassword } from '../../support/build';
import { clientOf, startTestApp, type TestApp } from '../../support/server';

let t: TestApp;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(() => t.reset());

const person = {
  email: 'mira@example.org',
  givenName: 'Mira',
  familyName: 'Ås',
  password: 'walnuts under the snow',
  timeZone: 'Europe/Oslo',
};
const tokenIn = (text: string, path: string): string => {
  const match = new RegExp(`/${path}/([A-Za-z0-9_-]+)`).exec(text);
  if (!match) throw new Error(`no /${path}/ link in: ${text}`);
  return match[1] as string;
};

describe('A1 sign-up', () => {
  it('opens an account only through the link in the letter', async () => {
    const client = clientOf(t.app);
    expect((await client.call(contract.signUp, { body: person })).body).toEqual({ sent: true });
    expect(
      (await client.call(contract.signIn, { body: { email: person.email, password: person.password } }))
        .status,
    ).toBe(401);
    await t.runJobs();
    expect(t.mail).toHaveLength(1);
    const token = tokenIn(t.mail[0]?.text ?? '', 'verify');
    const verified = await client.call(contract.verifyEmail, { body: { token } });
    expect(verified.body.account).toMatchObject({
      email: person.email,
      printedName: 'Mira Ås',
      emailVerified: true,
    });
    expect((await client.call(contract.verifyEmail, { body: { token } })).status).toBe(404);
    expect(
      (
        await clientOf(t.app).call(contract.signIn, {
          body: { email: 'MIRA@example.org', password: person.password },
        })
      ).status,
    ).toBe(200);
  });

  it('answers alike for a known address and writes to its owner', async () => {
    await buildAccount({ email: person.email });
    expect((await t.stranger.call(contract.signUp, { body: person })).body).toEqual({ sent: true });
    await t.runJobs();
    expect(t.mail.map((m) => m.subject)).toEqual(['You have an account already']);
    expect(
      (await t.stranger.call(contract.signIn, { body: { email: person.email, password: person.password } }))
        .status,
    ).toBe(401);
  });

  it.each([
    ['password1234', 'among the first'],
    ['aaaaaaaaaaaaaaa', 'repeats'],
    ['abcdefghijklmn', 'run of neighbouring'],
    ['mira@example.org', 'little more than your name'],
  ])('refuses the password %s', async (password, words) => {
    const answer = await t.stranger.call(contract.signUp, { body: { ...person, password } });
    expect(answer.status).toBe(422);
    expect((answer.body as unknown as { fields: { password: string } }).fields.password).toContain(words);
  });
});

describe('A1 sign-in and sign-out', () => {
  it('gives a new session each time and ends it', async () => {
    const account = await buildAccount();
    const client = await t.signIn(account);
    expect((await client.call(contract.readSession)).body.account?.email).toBe(account.email);
    expect((await client.call(contract.listSessions)).body.items).toHaveLength(1);
    expect((await client.call(contract.signOut)).status).toBe(204);
    expect((await client.call(contract.readSession)).body.account).toBeNull();
    expect((await client.call(contract.listSessions)).status).toBe(401);
  });

  it('slows down after five wrong passwords and says for how long', async () => {
    const account = await buildAccount();
    const wrong = { email: account.email, password: 'not the password' };
    for (let i = 0; i < 6; i++)
      expect((await t.stranger.call(contract.signIn, { body: wrong })).status).toBe(401);
    const answer = await t.stranger.call(contract.signIn, {
      body: { email: account.email, password: testPassword },
    });
    expect(answer.status).toBe(429);
    expect(Number(answer.headers['retry-after'])).toBeGreaterThan(0);
  });

  it('refuses a change without the token of this browser, and one from another site', async () => {
    const account = await buildAccount();
    const client = await t.signIn(account);
    const foreign = await client.call(contract.signOut, { headers: { 'Sec-Fetch-Site': 'cross-site' } });
    expect(foreign.status).toBe(403);
    const forged = await client.call(contract.signOut, { headers: { 'X-CSRF-Token': 'x'.repeat(43) } });
    expect(forged.status).toBe(403);
    expect((await client.call(contract.readSession)).body.account).not.toBeNull();
  });

  it('sets a new password by link, once, and ends the other sessions', async () => {
    const account = await buildAccount();
    const old = await t.signIn(account);
    await t.stranger.call(contract.askReset, { body: { email: account.email } });
    await t.stranger.call(contract.askReset, { body: { email: 'nobody@example.org' } });
    await t.runJobs();
    expect(t.mail).toHaveLength(1);
    const token = tokenIn(t.mail[0]?.text ?? '', 'reset');
    const client = clientOf(t.app);
    expect(
      (await client.call(contract.resetPassword, { body: { token, password: 'another long sentence' } }))
        .status,
    ).toBe(200);
    expect(
      (await client.call(contract.resetPassword, { body: { token, password: 'another long sentence' } }))
        .status,
    ).toBe(404);
    expect((await old.call(contract.readSession)).body.account).toBeNull();
  });
});

describe('A2 roles and invitations', () => {
  it('an invitation link opens an account with the role', async () => {
    const office = await t.signIn(await buildAccount({}, [administrator]));
    const invited = {
      email: 'new@example.org',
      givenName: 'New',
      familyName: 'Hand',
      role: 'finance' as const,
      scope: 'institute' as const,
      scopeId: null,
    };
    expect((await office.call(contract.invite, { body: invited })).body).toEqual({ sent: true });
    await t.runJobs();
    const token = tokenIn(t.mail[0]?.text ?? '', 'invitation');
    const client = clientOf(t.app);
    expect((await client.call(contract.readInvitation, { params: { token } })).body).toMatchObject({
      role: 'finance',
      hasPassword: false,
    });
    const accepted = await client.call(contract.acceptInvitation, {
      params: { token },
      body: { password: 'a good long phrase' },
    });
    expect(accepted.status, JSON.stringify(accepted.body)).toBe(200);
    expect(accepted.body.account?.grants.map((g) => g.role)).toEqual(['finance']);
  });

  it('only administrators list accounts and give roles; the last one stays', async () => {
    const admin = await buildAccount({}, [administrator]);
    const other = await buildAccount();
    const plain = await t.signIn(other);
    expect((await plain.call(contract.listAccounts)).status).toBe(403);
    expect(
      (
        await plain.call(contract.invite, {
          body: {
            email: 'x@example.org',
            givenName: 'X',
            familyName: 'Y',
            role: 'administrator',
            scope: 'institute',
            scopeId: null,
          },
        })
      ).status,
    ).toBe(403);
    const office = await t.signIn(admin);
    const list = await office.call(contract.listAccounts, { query: { limit: 1 } });
    expect(list.body.items).toHaveLength(1);
    expect(
      (await office.call(contract.listAccounts, { query: { limit: 1, cursor: list.body.next ?? '' } })).body
        .next,
    ).toBeNull();
    const grant = (await office.call(contract.readSession)).body.account?.grants[0];
    const ended = await office.call(contract.endRole, {
      params: { account: admin.id, grant: grant?.id ?? '' },
    });
    expect(ended.status).toBe(409);
  });
});

describe('A3 profile', () => {
  const profile = {
    givenName: 'Mira',
    familyName: 'Ås',
    printedName: 'M. Ås',
    affiliation: 'Norrhamn',
    country: 'NO',
    careerStage: 'postdoc' as const,
    orcid: '0000-0002-1825-0097',
    timeZone: 'Europe/Oslo',
  };

  it('saves with the version and refuses an old one', async () => {
    const client = await t.signIn(await buildAccount());
    const before = (await client.call(contract.readSession)).body.account;
    const saved = await client.call(contract.saveProfile, { body: profile, version: before?.version });
    expect(saved.body).toMatchObject({ printedName: 'M. Ås', orcid: '0000-0002-1825-0097' });
    expect(
      (await client.call(contract.saveProfile, { body: profile, version: before?.version })).status,
    ).toBe(412);
    expect((await client.call(contract.saveProfile, { body: profile })).status).toBe(428);
  });

  it('refuses an ORCID iD whose last character does not fit', async () => {
    const client = await t.signIn(await buildAccount());
    const answer = await client.call(contract.saveProfile, {
      body: { ...profile, orcid: '0009-0000-0000-0001' },
      version: 0,
    });
    expect(answer.status).toBe(422);
    expect((answer.body as unknown as { fields: Record<string, string> }).fields.orcid).toContain(
      'must fit the others',
    );
  });
});
