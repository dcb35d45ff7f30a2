import type { ErrorRequestHandler, RequestHandler, Response } from 'express';
import type { ZodError } from 'zod';
import { Problem, notFound, type ProblemBody } from '@shared/http/problem';
import { log } from './request-log';

const TITLES: Record<number, string> = {
  400: 'Not understood',
  401: 'Sign in first',
  403: 'Not allowed',
  404: 'Not found',
  409: 'Not possible now',
  412: 'Changed meanwhile',
  413: 'Too large',
  415: 'Kind of file not accepted',
  422: 'Some fields are wrong',
  428: 'Version missing',
  429: 'Too many tries',
  500: 'Internal error',
  503: 'Not available now',
};

/** Field errors of a zod parse, keyed by path. */
export function invalidFields(error: ZodError): Problem {
  const fields: Record<string, string> = {};
  for (const issue of error.issues) {
    const unknown = issue.code === 'unrecognized_keys' ? issue.keys : [];
    const path = [...issue.path, ...unknown.slice(0, 1)].join('.') || '_';
    fields[path] ??= unknown.length > 0 ? 'This field is not known here.' : sentence(issue.message);
  }
  return new Problem(422, 'invalid', 'Some fields need another look.', fields);
}

const sentence = (message: string): string =>
  /^Invalid input: expected .* received undefined/.test(message) ? 'This is needed.' : message;

/** Writes the problem document (RFC 9457). */
export function sendProblem(res: Response, problem: Problem): void {
  const body: ProblemBody = {
    type: 'about:blank',
    title: TITLES[problem.status] ?? 'Problem',
    status: problem.status,
    detail: problem.message,
    code: problem.code,
    ...(problem.fields && { fields: problem.fields }),
    ...(problem.facts && { facts: problem.facts }),
    requestId: res.locals.requestId as string | undefined,
  };
  if (problem.status === 429 && typeof problem.facts?.retryAfter === 'number') {
    res.setHeader('Retry-After', String(problem.facts.retryAfter));
  }
  res.status(problem.status).type('application/problem+json').send(JSON.stringify(body));
}

/** Known errors of the frameworks, in our words; everything else is logged whole and shown as internal. */
export function asProblem(error: unknown, requestId?: string): Problem {
  if (error instanceof Problem) return error;
  const known = error as { type?: string; code?: string; name?: string; status?: number };
  if (known.type === 'entity.too.large')
    return new Problem(413, 'too_large', 'This is larger than is accepted here.');
  if (known.type === 'entity.parse.failed')
    return new Problem(400, 'not_json', 'The body is not valid JSON.');
  if (known.code === 'LIMIT_FILE_SIZE')
    return new Problem(413, 'too_large', 'The file is larger than is accepted here.');
  if (known.name === 'MulterError' || known.status === 400)
    return new Problem(400, 'not_understood', 'The request was not understood.');
  log.error({ err: error, requestId }, 'unexpected');
  return new Problem(
    500,
    'internal',
    'Something went wrong on our side. What was saved before is safe; please try again, or write to the office with the number below.',
  );
}

export const problemHandler: ErrorRequestHandler = (error, _req, res, next) => {
  if (res.headersSent) return next(error);
  sendProblem(res, asProblem(error, res.locals.requestId as string));
};

export const unknownApi: RequestHandler = () => {
  throw notFound();
};
