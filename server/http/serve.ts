import type { Request, Response, Router } from 'express';
import { Problem, stale } from '@shared/http/problem';
import type { Endpoint } from '@shared/http/endpoint';
import { enter, type Access, type Actor } from './authorize';
import { asProblem, invalidFields, sendProblem } from './problems';
import { discardUpload, receiveUpload, sendFile, type FileResponse, type ReceivedFile } from './uploads';

/** What a handler gets: everything parsed, the actor known, the door passed. */
export interface Context<P, Q, B> {
  /** Null only where access is `anyone`; see `signedInActor`. */
  actor: Actor;
  maybeActor: Actor | null;
  params: P;
  query: Q;
  body: B;
  /** From If-Match; present when the endpoint is `versioned`. */
  version: number;
  /** Present when the endpoint takes an upload and one came. */
  file: ReceivedFile | undefined;
  /** Id of the event in the path (`:event`), '' without one. */
  eventId: string;
  /** Id of the fund in the path (`:fund`), '' without one. */
  fundId: string;
  now: Date;
  requestId: string;
  req: Request;
  res: Response;
}

interface Door<P, Q, B, R> {
  access: Access;
  handle(context: Context<P, Q, B>): Promise<R extends undefined ? FileResponse | void : R>;
}

export interface MountedDoor {
  // eslint-disable-next-line @typescript-eslint/no-explicit-any
  endpoint: Endpoint<any, any, any, any>;
  access: Access;
}

/** Every door that was mounted; the architecture test compares it with the contracts. */
export const doors: MountedDoor[] = [];

type Resolver = (key: string) => Promise<string | null>;
const resolvers: { event?: Resolver; fund?: Resolver } = {};

/** Tells the doors how to find an event by its slug and a fund by its id (routes.ts, so that http knows no feature). */
export function resolveScopesWith(found: { event: Resolver; fund: Resolver }): void {
  Object.assign(resolvers, found);
}

/** How the doors find the actor of a request; set by app.ts. */
export const whoAsks: { find: (req: Request) => Promise<Actor | null> } = { find: async () => null };

/** Mounts one endpoint: session -> access -> parse -> handler -> response. */
export function serve<P, Q, B, R>(
  router: Router,
  endpoint: Endpoint<P, Q, B, R>,
  door: Door<P, Q, B, R>,
): void {
  doors.push({ endpoint, access: door.access });
  const method = endpoint.method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete';
  router[method](endpoint.path, async (req: Request, res: Response) => {
    res.locals.route = `${endpoint.method} ${endpoint.path}`;
    let file: ReceivedFile | undefined;
    try {
      const maybeActor = await whoAsks.find(req);
      res.locals.accountId = maybeActor?.accountId;
      const eventId = await scopeOf(req, 'event');
      const fundId = await scopeOf(req, 'fund');
      enter(door.access, maybeActor, door.access.kind === 'fund' ? fundId : eventId);
      if (eventId === null || fundId === null)
        throw new Problem(404, 'not_found', 'This does not exist, or is not yours to see.');
      if (endpoint.upload) file = await receiveUpload(req, res, endpoint.upload);
      const answer = await door.handle({
        actor: maybeActor as Actor,
        maybeActor,
        params: parse(endpoint.params, req.params) as P,
        query: parse(endpoint.query, req.query) as Q,
        body: parse(endpoint.body, req.body) as B,
        version: endpoint.versioned ? requiredVersion(req) : 0,
        file,
        eventId: eventId ?? '',
        fundId: fundId ?? '',
        now: new Date(),
        requestId: res.locals.requestId as string,
        req,
        res,
      });
      await respond(endpoint, req, res, answer);
    } catch (error) {
      if (!res.headersSent) sendProblem(res, asProblem(error, res.locals.requestId as string));
    } finally {
      if (file) await discardUpload(file);
    }
  });
}

/** '' without such a part in the path, null when it is not found. */
async function scopeOf(req: Request, kind: 'event' | 'fund'): Promise<string | null> {
  const key = req.params[kind];
  if (typeof key !== 'string') return '';
  return (await resolvers[kind]?.(key)) ?? null;
}

function parse(schema: Endpoint['body'], value: unknown): unknown {
  if (!schema) return undefined;
  const result = schema.safeParse(value ?? {});
  if (!result.success) throw invalidFields(result.error);
  return result.data;
}

function requiredVersion(req: Request): number {
  const match = /^"?v?(\d+)"?$/.exec(req.get('if-match') ?? '');
  if (!match) throw new Problem(428, 'version_missing', 'Say which version you are changing (If-Match).');
  return Number(match[1]);
}

async function respond(endpoint: Endpoint, req: Request, res: Response, answer: unknown): Promise<void> {
  if (res.headersSent) return;
  if (endpoint.response === 'file') return sendFile(req, res, answer as FileResponse);
  res.setHeader('Cache-Control', 'no-store');
  if (endpoint.response === 'empty') {
    res.status(204).end();
    return;
  }
  const version = (answer as { version?: unknown } | null)?.version;
  if (typeof version === 'number') res.setHeader('ETag', `"v${version}"`);
  res.status(200).json(answer);
}

/** Refuses a change of an outdated version (412). */
export function sameVersion(present: number, wanted: number): void {
  if (present !== wanted) throw stale(present);
}
