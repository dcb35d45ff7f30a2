import { z } from 'zod';

/** An error as the API tells it: RFC 9457 problem details, media type application/problem+json. */
export const problemSchema = z.object({
  /** `about:blank` or a path below /problems. */
  type: z.string(),
  /** A short name of the kind of problem. */
  title: z.string(),
  status: z.number().int(),
  /** A sentence for people: what did not happen and what to do. */
  detail: z.string(),
  /** Machine-readable code, unique per kind: `talk.already_decided`. */
  code: z.string(),
  /** Field errors keyed by the path in the body, e.g. `rooms.0.capacity`. */
  fields: z.record(z.string(), z.string()).optional(),
  /** To be quoted to the office; the log has it. */
  requestId: z.string().optional(),
  /** Further facts about this problem, e.g. the present version. */
  facts: z.record(z.string(), z.unknown()).optional(),
});
export type ProblemBody = z.infer<typeof problemSchema>;

/** Thrown by services and rules; the door turns it into a problem document. */
export class Problem extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly fields?: Record<string, string>,
    readonly facts?: Record<string, unknown>,
  ) {
    super(message);
    this.name = 'Problem';
  }
}

export const notFound = (what = 'This page or record'): Problem =>
  new Problem(404, 'not_found', `${what} does not exist, or is not yours to see.`);
export const forbidden = (why = 'Your role does not allow this.'): Problem =>
  new Problem(403, 'forbidden', why);
export const unauthenticated = (): Problem => new Problem(401, 'unauthenticated', 'Please sign in first.');
export const conflict = (code: string, message: string, facts?: Record<string, unknown>): Problem =>
  new Problem(409, code, message, undefined, facts);
export const stale = (present: number): Problem =>
  new Problem(
    412,
    'stale',
    'Somebody else has changed this meanwhile. Compare both versions, then save again.',
    undefined,
    {
      version: present,
    },
  );
/** Wrong input found after parsing; fields are keyed by their path in the body. */
export const invalid = (
  fields: Record<string, string>,
  message = 'Some fields need another look.',
): Problem => new Problem(422, 'invalid', message, fields);
