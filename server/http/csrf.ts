import { randomBytes, timingSafeEqual } from 'node:crypto';
import type { RequestHandler, Request, Response } from 'express';
import { Problem } from '@shared/http/problem';
import { env } from '../env';

const COOKIE = 'analemma-csrf';
const SAFE = new Set(['GET', 'HEAD', 'OPTIONS']);

export function readCookie(req: Request, name: string): string | undefined {
  for (const part of (req.headers.cookie ?? '').split(';')) {
    const [key, ...value] = part.trim().split('=');
    if (key === name) return decodeURIComponent(value.join('='));
  }
  return undefined;
}

/** The token of this browser (a double-submit cookie of 256 random bits), made when there is none. */
export function csrfToken(req: Request, res: Response): string {
  const present = readCookie(req, COOKIE);
  if (present && /^[A-Za-z0-9_-]{43}$/.test(present)) return present;
  return renewCsrf(res);
}

/** A fresh token, at sign-in and sign-out. */
export function renewCsrf(res: Response): string {
  const token = randomBytes(32).toString('base64url');
  res.cookie(COOKIE, token, {
    httpOnly: true,
    sameSite: 'lax',
    secure: env.BASE_URL.startsWith('https:'),
    path: '/',
  });
  return token;
}

/**
 * A change needs a same-origin request (Sec-Fetch-Site or Origin) and the token in a header that no foreign page can
 * set or read.
 */
export const csrfGuard: RequestHandler = (req, _res, next) => {
  if (SAFE.has(req.method)) return next();
  const site = req.headers['sec-fetch-site'];
  const origin = req.headers.origin;
  const foreign =
    site !== undefined
      ? site !== 'same-origin' && site !== 'none'
      : origin !== undefined && !sameOrigin(req, origin);
  if (foreign)
    throw new Problem(403, 'foreign_origin', 'This change came from another site and was not carried out.');
  const cookie = readCookie(req, COOKIE) ?? '';
  const header = req.get('x-csrf-token') ?? '';
  if (
    cookie.length === 0 ||
    cookie.length !== header.length ||
    !timingSafeEqual(Buffer.from(cookie), Buffer.from(header))
  ) {
    throw new Problem(403, 'csrf', 'The page is out of date. Load it again, then repeat the last step.');
  }
  next();
};

function sameOrigin(req: Request, origin: string): boolean {
  try {
    const { host, origin: parsed } = new URL(origin);
    return host === req.headers.host || parsed === new URL(env.BASE_URL).origin;
  } catch {
    return false;
  }
}
