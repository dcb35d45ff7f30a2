import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import pino from 'pino';
import { env } from '../env';

/** The one log. Never bodies, tokens or addresses. */
export const log = pino({
  level: env.NODE_ENV === 'test' ? (process.env.TEST_LOG ?? 'silent') : env.LOG_LEVEL,
  base: undefined,
});

/** Gives every request an id and one line: id, account, route pattern, status, milliseconds. */
export const requestLog: RequestHandler = (req, res, next) => {
  const started = performance.now();
  const requestId = randomUUID();
  res.locals.requestId = requestId;
  res.setHeader('X-Request-Id', requestId);
  res.on('finish', () => {
    const line = {
      requestId,
      account: (res.locals.accountId as string | undefined) ?? null,
      method: req.method,
      route: (res.locals.route as string | undefined) ?? (req.path.startsWith('/api') ? 'unmatched' : 'page'),
      status: res.statusCode,
      ms: Math.round((performance.now() - started) * 10) / 10,
    };
    if (res.statusCode >= 500) log.error(line, 'request');
    else log.debug(line, 'request');
  });
  next();
};
