import { describe, expect, it } from 'vitest';
import { passwordRefusal, roleFitsScope } from '../../../shared/features/accounts/accounts.rules';
import { orcidCheckDigit, parseOrcid } from '../../../shared/lib/orcid';
import { parseEnv } from '../../../server/env';
import { growingDelay } from '../../../server/http/rate-limit';

// ISO 7064 MOD 11-2 as ORCID publishes it (spreadsheet of the ORCID registry); the last two from memory, recomputed.
describe('ORCID iD', () => {
  it.each([
    '0000-0002-1825-0097',
    '0000-0002-1694-233X',
    '0000-0002-8205-121X',
    '0000-0001-5109-3700',
    '0000-0001-2345-6789',
  ])('%s is valid', (orcid) => {
    expect(parseOrcid(orcid)).toBe(orcid);
    expect(parseOrcid(`https://orcid.org/${orcid}`)).toBe(orcid);
    expect(orcidCheckDigit(orcid.replace(/-/g, '').slice(0, 15))).toBe(orcid.slice(-1));
  });
  it.each([
    '0009-0000-0000-0001',
    '0000-0002-1825-0098',
    '0000-0002-1694-2330',
    '0000-0002-1825',
    'X000-0002-1825-0097',
    '',
  ])('%s is not', (orcid) => expect(parseOrcid(orcid)).toBeUndefined());
});

describe('passwords', () => {
  const person = { email: 'mira.aas@example.org', name: 'Mira Ås' };
  it.each(['walnuts under the snow', 'Zq7!rT0#kLm2xy', 'трава у дома зелёная'])('takes %s', (password) =>
    expect(passwordRefusal(password, person)).toBeUndefined(),
  );
  it.each([
    'password1234',
    'aaaaaaaaaaaaaa',
    'abcdefghijklm',
    '987654321098',
    'mira.aas@example.org',
    'mira.aas1234',
  ])('refuses %s', (password) => expect(passwordRefusal(password, person)).toBeTruthy());
});

it('roles fit their scope', () => {
  expect(roleFitsScope('organiser', 'event')).toBe(true);
  expect(roleFitsScope('organiser', 'institute')).toBe(false);
  expect(roleFitsScope('administrator', 'event')).toBe(false);
  expect(roleFitsScope('funder', 'fund')).toBe(true);
});

describe('the environment', () => {
  it('has defaults for the demo', () =>
    expect(parseEnv({})).toMatchObject({ PORT: 3000, DEMO: true, BASE_URL: 'http://localhost:3000' }));
  it('stops with one sentence per wrong value', () =>
    expect(() => parseEnv({ PORT: 'x', SESSION_SECRET: 'short' })).toThrow(/PORT[\s\S]*SESSION_SECRET/));
  it('refuses production with demo values', () => {
    expect(() => parseEnv({ NODE_ENV: 'production' })).toThrow(
      /SESSION_SECRET must be set[\s\S]*BASE_URL[\s\S]*SMTP_URL[\s\S]*STRIPE/,
    );
    expect(() =>
      parseEnv({
        NODE_ENV: 'production',
        DEMO: 'true',
        SESSION_SECRET: 'x'.repeat(40),
        BASE_URL: 'https://a.example.org',
        SMTP_URL: 'smtp://m.example.org',
        STRIPE_SECRET_KEY: 'sk_live_12345',
        STRIPE_WEBHOOK_SECRET: 'whsec_12345',
      }),
    ).toThrow(/DEMO/);
  });
});

it('delays grow, never lock, and are forgotten after an hour', () => {
  const delay = growingDelay({ free: 2, maxSeconds: 8 });
  const wait = (now: number): number => {
    try {
      delay.check(['a'], now);
      return 0;
    } catch (problem) {
      return (problem as { facts: { retryAfter: number } }).facts.retryAfter;
    }
  };
  const waits = Array.from({ length: 7 }, () => {
    delay.failed(['a'], 1000);
    return wait(1000);
  });
  expect(waits).toEqual([0, 0, 1, 2, 4, 8, 8]);
  expect(wait(1000 + 9000)).toBe(0);
  delay.failed(['a'], 1000 + 3_700_000);
  expect(wait(1000 + 3_700_000)).toBe(0);
});
