import type { z } from 'zod';

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';

/** One operation of the HTTP API: what goes in, what comes out. The door, the client, the tests and the documentation all read it. */
export interface Endpoint<P = unknown, Q = unknown, B = unknown, R = unknown> {
  /** Unique, feature first: `talks.decide`. */
  readonly id: string;
  readonly method: Method;
  /** Express pattern below the site's root, e.g. `/api/events/:event/talks/:talkId`. */
  readonly path: `/api/${string}`;
  /** One sentence for the documentation. */
  readonly summary: string;
  readonly params?: z.ZodType<P>;
  readonly query?: z.ZodType<Q>;
  readonly body?: z.ZodType<B>;
  /** A schema, or `file` for bytes and `empty` for 204. */
  readonly response: z.ZodType<R> | 'file' | 'empty';
  /** A change to a versioned thing: the door demands `If-Match` (428 without it) and hands the version to the handler. */
  readonly versioned?: true;
  /** One file in a multipart body under this field; the other fields are the body. */
  readonly upload?: { readonly field: string; readonly maxBytes: number };
}

// eslint-disable-next-line @typescript-eslint/no-explicit-any
export type AnyEndpoint = Endpoint<any, any, any, any>;

export type ParamsOf<E> = E extends Endpoint<infer P, infer _Q, infer _B, infer _R> ? P : never;
export type QueryOf<E> = E extends Endpoint<infer _P, infer Q, infer _B, infer _R> ? Q : never;
export type BodyOf<E> = E extends Endpoint<infer _P, infer _Q, infer B, infer _R> ? B : never;
export type ResponseOf<E> = E extends Endpoint<infer _P, infer _Q, infer _B, infer R> ? R : never;

/** Declares an endpoint; only here so that the four types are inferred. */
export function endpoint<P = Record<string, never>, Q = Record<string, never>, B = undefined, R = undefined>(
  definition: Endpoint<P, Q, B, R>,
): Endpoint<P, Q, B, R> {
  return definition;
}

/** Fills `:name` parts of a path, percent-encoded. Throws when one is missing. */
export function fillPath(path: string, params: Record<string, unknown>): string {
  return path.replace(/:([A-Za-z]+)/g, (_whole, name: string) => {
    const value = params[name];
    if (value === undefined || value === null || value === '') throw new Error(`path ${path} needs ${name}`);
    return encodeURIComponent(String(value));
  });
}
