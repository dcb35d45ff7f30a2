import argon2 from 'argon2';
import type { Request, Response } from 'express';
import passport from 'passport';
import { Strategy as LocalStrategy } from 'passport-local';
import { passwordRefusal } from '@shared/features/accounts/accounts.rules';
import { Problem, forbidden, invalid } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import { renewCsrf } from '@server/http/csrf';
import { growingDelay } from '@server/http/rate-limit';
import {
  clearSessionCookie,
  deviceName,
  hashSecret,
  newSessionSecret,
  sessionLimits,
  sessionSecret,
  setSessionCookie,
} from '@server/http/session';
import { queueMessage } from '@server/mail/outbox';
import { knownAddressLetter, resetLetter, verificationLetter } from './accounts.mail';
import { AccountRow, SessionRow } from './accounts.model';
import {
  ensureAccountForEmail,
  issueToken,
  recordAudit,
  redeemToken,
  revokeTokens,
} from './accounts.service';

/** argon2id with the OWASP minimum: 19 MiB, 2 passes, 1 lane (Password Storage Cheat Sheet). */
const ARGON = { type: argon2.argon2id, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;
export const hashPassword = (password: string): Promise<string> => argon2.hash(password, ARGON);

/** Verified against when the address is unknown, so that both answers take the same time. */
let dummyHash: Promise<string> | undefined;

export const signInDelay = growingDelay({ free: 5, maxSeconds: 900 });
export const letterDelay = growingDelay({ free: 5, maxSeconds: 900 });

const WRONG = 'Address and password do not fit together.';

passport.use(
  new LocalStrategy({ usernameField: 'email', session: false }, (email, password, done) => {
    void checkPassword(email, password).then(
      (account) => done(null, account ?? false),
      (error: unknown) => done(error),
    );
  }),
);

async function checkPassword(email: string, password: string): Promise<AccountRow | null> {
  const account = await AccountRow.byEmail(email);
  const hash = account?.passwordHash ?? (await (dummyHash ??= hashPassword(newSessionSecret())));
  const fits = await argon2.verify(hash, password);
  return fits && account?.passwordHash && !account.disabledAt ? account : null;
}

/** Checks address and password (passport-local) and opens a session. @throws 401 with the same words for every reason; 429 while waiting; 403 before the address is confirmed. */
export async function signIn(
  req: Request,
  res: Response,
  input: { email: string; password: string; stay: boolean },
) {
  const keys = [`account:${input.email}`, `address:${req.ip ?? ''}`];
  signInDelay.check(keys);
  req.body = input;
  const account = await new Promise<AccountRow | false>((resolve, reject) => {
    const done = (error: unknown, user?: unknown): void =>
      error ? reject(error as Error) : resolve((user || false) as AccountRow | false);
    (passport.authenticate('local', { session: false }, done) as (...args: unknown[]) => void)(
      req,
      res,
      reject,
    );
  });
  if (!account) {
    signInDelay.failed(keys);
    throw new Problem(401, 'accounts.wrong', WRONG, { password: WRONG });
  }
  if (!account.emailVerifiedAt) {
    await sendVerification(account);
    throw forbidden('Please confirm your address first: we have just sent you the link again.');
  }
  signInDelay.succeeded(`account:${input.email}`);
  await openSession(req, res, account.id, input.stay);
  return account;
}

/** Opens a session with a new secret (never the one that a browser brought) and a new CSRF token. */
export async function openSession(
  req: Request,
  res: Response,
  accountId: string,
  stay = false,
): Promise<void> {
  const secret = newSessionSecret();
  const limits = sessionLimits(stay);
  const now = new Date();
  const old = sessionSecret(req);
  await transaction(async () => {
    if (old) await SessionRow.update({ endedAt: now }, { where: { id: hashSecret(old), endedAt: null } });
    await SessionRow.create({
      id: hashSecret(secret),
      accountId,
      device: deviceName(req.get('user-agent')),
      startedAt: now,
      lastSeenAt: now,
      idleSeconds: limits.idle,
      expiresAt: new Date(now.getTime() + limits.absolute * 1000),
    });
  });
  setSessionCookie(res, secret, stay);
  res.locals.csrfToken = renewCsrf(res);
}

export async function signOut(req: Request, res: Response): Promise<void> {
  const secret = sessionSecret(req);
  if (secret) {
    await transaction(() =>
      SessionRow.update({ endedAt: new Date() }, { where: { id: hashSecret(secret), endedAt: null } }),
    );
  }
  clearSessionCookie(res);
  renewCsrf(res);
}

/** @throws 422 with the reason beside the field. */
export function refuseWeak(password: string, person: { email: string; name: string }): void {
  const refusal = passwordRefusal(password, person);
  if (refusal) throw invalid({ password: refusal });
}

/** Opens an account and sends the link that confirms it; a known address gets a letter that says so. The caller can't tell which. */
export async function signUp(
  req: Request,
  input: { email: string; password: string; givenName: string; familyName: string; timeZone: string },
): Promise<void> {
  refuseWeak(input.password, { email: input.email, name: `${input.givenName} ${input.familyName}` });
  const keys = [`letter:${input.email}`, `letters:${req.ip ?? ''}`];
  letterDelay.check(keys);
  letterDelay.failed(keys);
  const passwordHash = await hashPassword(input.password);
  await transaction(async () => {
    const known = await AccountRow.byEmail(input.email);
    if (known?.passwordHash && known.emailVerifiedAt) {
      const mail = knownAddressLetter({
        name: known.printedName,
        signInUrl: `${env.BASE_URL}/sign-in`,
        resetUrl: `${env.BASE_URL}/reset`,
      });
      await queueMessage({
        letter: 'accounts.known_address',
        accountId: known.id,
        to: { name: known.printedName, address: known.email },
        subjectId: known.id,
        dedupKey: `known-address:${newId()}`,
        mail,
      });
      return;
    }
    const person = await ensureAccountForEmail(input);
    const account = (await AccountRow.findByPk(person.id)) as AccountRow;
    // The password waits in the token: whoever reads the letter proves the address, and only then it counts.
    await sendVerification(account, passwordHash);
  });
}

async function sendVerification(account: AccountRow, passwordHash?: string): Promise<void> {
  await transaction(async () => {
    const token = await issueToken({
      purpose: 'verify',
      accountId: account.id,
      data: { passwordHash },
      hours: 48,
    });
    await queueMessage({
      letter: 'accounts.verification',
      accountId: account.id,
      to: { name: account.printedName, address: account.email },
      subjectId: account.id,
      dedupKey: `verification:${newId()}`,
      mail: verificationLetter({
        name: account.printedName,
        url: `${env.BASE_URL}/verify/${token}`,
        institute: env.INSTITUTE_NAME,
      }),
    });
  });
}

/** Uses the link of the letter: the address is confirmed, the password that waited counts, a session opens. */
export async function verifyEmail(req: Request, res: Response, token: string): Promise<string> {
  const accountId = await transaction(async () => {
    const row = await redeemToken('verify', token);
    const account = (await AccountRow.findByPk(row.accountId as string)) as AccountRow;
    const waiting = (row.data as { passwordHash?: string } | null)?.passwordHash;
    await account.update({ emailVerifiedAt: new Date(), ...(waiting && { passwordHash: waiting }) });
    await recordAudit({
      actor: null,
      action: 'accounts.verified',
      subject: 'account',
      subjectId: account.id,
    });
    return account.id;
  });
  await openSession(req, res, accountId);
  return accountId;
}

/** Sends the link for a new password when the address is known; answers alike when not. */
export async function askReset(req: Request, email: string): Promise<void> {
  const keys = [`letter:${email}`, `letters:${req.ip ?? ''}`];
  letterDelay.check(keys);
  letterDelay.failed(keys);
  await transaction(async () => {
    const account = await AccountRow.byEmail(email);
    if (!account || account.disabledAt) return;
    const token = await issueToken({ purpose: 'reset', accountId: account.id, hours: 2 });
    await queueMessage({
      letter: 'accounts.reset',
      accountId: account.id,
      to: { name: account.printedName, address: account.email },
      subjectId: account.id,
      dedupKey: `reset:${newId()}`,
      mail: resetLetter({ name: account.printedName, url: `${env.BASE_URL}/reset/${token}` }),
    });
  });
}

/** Sets the password of the link's account, ends all its sessions, opens a new one. The link proves the address, too. */
export async function resetPassword(
  req: Request,
  res: Response,
  input: { token: string; password: string },
): Promise<string> {
  const passwordHash = await hashPassword(input.password);
  const accountId = await transaction(async () => {
    const row = await redeemToken('reset', input.token);
    const account = (await AccountRow.findByPk(row.accountId as string)) as AccountRow;
    refuseWeak(input.password, { email: account.email, name: account.printedName });
    await setPassword(account.id, passwordHash);
    return account.id;
  });
  await openSession(req, res, accountId);
  return accountId;
}

/** Stores the hash, confirms the address, ends sessions and open reset links. In a transaction. */
export function setPassword(accountId: string, passwordHash: string): Promise<void> {
  return transaction(async () => {
    const account = (await AccountRow.findByPk(accountId)) as AccountRow;
    await account.update({ passwordHash, emailVerifiedAt: account.emailVerifiedAt ?? new Date() });
    await SessionRow.update({ endedAt: new Date() }, { where: { accountId, endedAt: null } });
    await revokeTokens({ purpose: 'reset', accountId });
    await recordAudit({
      actor: null,
      action: 'accounts.password_set',
      subject: 'account',
      subjectId: accountId,
    });
  });
}

/** @throws 422 when the present password is wrong. All other sessions end. */
export async function changePassword(
  req: Request,
  res: Response,
  accountId: string,
  input: { current: string; password: string },
): Promise<void> {
  const account = (await AccountRow.findByPk(accountId)) as AccountRow;
  const keys = [`account:${account.email}`];
  signInDelay.check(keys);
  if (!account.passwordHash || !(await argon2.verify(account.passwordHash, input.current))) {
    signInDelay.failed(keys);
    throw invalid({ current: 'This is not the present password.' });
  }
  refuseWeak(input.password, { email: account.email, name: account.printedName });
  await setPassword(accountId, await hashPassword(input.password));
  await openSession(req, res, accountId);
}
