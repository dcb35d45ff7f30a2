import { createHash, randomBytes } from 'node:crypto';
import type { Request, Response } from 'express';
import { env } from '../env';
import { readCookie } from './csrf';

const secure = env.BASE_URL.startsWith('https:');
/** With TLS the browser itself binds the cookie to this host and path. */
const COOKIE = secure ? '__Host-analemma' : 'analemma';

/** Idle and absolute limits in seconds; `stay` is the 30 days that a person asked for. */
export const sessionLimits = (stay: boolean): { idle: number; absolute: number } =>
  stay ? { idle: 14 * 86_400, absolute: 30 * 86_400 } : { idle: 8 * 3600, absolute: 24 * 3600 };

export const newSessionSecret = (): string => randomBytes(32).toString('base64url');

/** The database keeps only this: who reads the table can't take over a session. */
export const hashSecret = (secret: string): string => createHash('sha256').update(secret).digest('hex');

export function sessionSecret(req: Request): string | undefined {
  const value = readCookie(req, COOKIE);
  return value && /^[A-Za-z0-9_-]{43}$/.test(value) ? value : undefined;
}

export function setSessionCookie(res: Response, secret: string, stay: boolean): void {
  const maxAge = stay ? { maxAge: sessionLimits(true).absolute * 1000 } : {};
  res.cookie(COOKIE, secret, { httpOnly: true, sameSite: 'lax', secure, path: '/', ...maxAge });
}

export function clearSessionCookie(res: Response): void {
  res.clearCookie(COOKIE, { httpOnly: true, sameSite: 'lax', secure, path: '/' });
}

/** `Firefox on Linux`: enough to recognise one's own device, no more. */
export function deviceName(userAgent: string | undefined): string {
  const agent = userAgent ?? '';
  const browser = /Edg\//.test(agent)
    ? 'Edge'
    : /Firefox\//.test(agent)
      ? 'Firefox'
      : /Chrome\//.test(agent)
        ? 'Chrome'
        : /Safari\//.test(agent)
          ? 'Safari'
          : 'A program';
  const system = /Android/.test(agent)
    ? 'Android'
    : /iPhone|iPad/.test(agent)
      ? 'iOS'
      : /Windows/.test(agent)
        ? 'Windows'
        : /Mac OS/.test(agent)
          ? 'macOS'
          : /Linux/.test(agent)
            ? 'Linux'
            : 'an unknown system';
  return `${browser} on ${system}`;
}
