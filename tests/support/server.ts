import type { Express } from 'express';
import request from 'supertest';
import {
  fillPath,
  type BodyOf,
  type Endpoint,
  type ParamsOf,
  type QueryOf,
  type ResponseOf,
} from '../../shared/http/endpoint';
import { buildApp } from '../../server/app';
import { reactions } from '../../server/jobs/registry';
import { runDueJobs } from '../../server/jobs/worker';
import { dispatchMail } from '../../server/mail/dispatch';
import { useTransport } from '../../server/mail/transport';
import { letterDelay, signInDelay } from '../../server/features/accounts/accounts-sign-in.service';
import { testPassword } from './build';
import { freshDatabase } from './database';

export interface CapturedMail {
  to: string;
  subject: string;
  text: string;
  html: string;
  /** The calendar part, where there is one. */
  calendar?: { method: string; content: string };
  messageId: string;
}

export interface Answer<R> {
  status: number;
  body: R;
  headers: Record<string, string>;
}

export interface CallInput<E> {
  params?: ParamsOf<E>;
  query?: Partial<QueryOf<E>>;
  body?: BodyOf<E> | unknown;
  version?: number;
  file?: { field: string; name: string; content: Buffer };
  headers?: Record<string, string>;
}

export interface Client {
  /** Sends the operation as a browser of this site would (same origin, CSRF token). */
  // eslint-disable-next-line @typescript-eslint/no-explicit-any
  call<E extends Endpoint<any, any, any, any>>(
    endpoint: E,
    input?: CallInput<E>,
  ): Promise<Answer<ResponseOf<E>>>;
  /** A bare request with this client's cookies. */
  get(path: string): request.Test;
}

/** A browser-like client with its own cookies. */
export function clientOf(app: Express): Client {
  const agent = request.agent(app);
  const fetchToken = async (): Promise<string> => {
    const response = await agent.get('/api/session');
    return (response.body as { csrfToken: string }).csrfToken;
  };
  return {
    get: (path) => agent.get(path),
    async call(endpoint, input = {}) {
      const path = fillPath(endpoint.path, (input.params ?? {}) as Record<string, unknown>);
      const method = endpoint.method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete';
      // The agent attaches its cookies when a request is made, so the token's cookie must be there before.
      const token = method === 'get' ? undefined : await fetchToken();
      let test = agent[method](path).query((input.query ?? {}) as object);
      if (token) {
        test = test.set('Sec-Fetch-Site', 'same-origin').set('X-CSRF-Token', token);
      }
      if (input.version !== undefined) test = test.set('If-Match', `"v${input.version}"`);
      for (const [name, value] of Object.entries(input.headers ?? {})) test = test.set(name, value);
      if (input.file) {
        for (const [key, value] of Object.entries((input.body ?? {}) as Record<string, unknown>))
          test = test.field(key, String(value));
        test = test.attach(input.file.field, input.file.content, input.file.name);
      } else if (input.body !== undefined) {
        test = test.send(input.body as object);
      }
      const response = await test;
      const body = response.headers['content-type']?.includes('problem+json')
        ? (JSON.parse(response.text || response.body.toString()) as never)
        : response.body;
      return {
        status: response.status,
        body: body as never,
        headers: response.headers as Record<string, string>,
      };
    },
  };
}

export interface TestApp {
  app: Express;
  stranger: Client;
  /** Signs in with the test password (see build.ts). */
  signIn(account: string | { email: string }): Promise<Client>;
  /** Runs all due jobs and sends all due mail, until nothing is left. */
  runJobs(): Promise<void>;
  mail: CapturedMail[];
  /** The empty, migrated database again; call it in beforeEach. */
  reset(): Promise<void>;
}

/** The real application on a real SQLite file, without a port; mail is captured. */
export async function startTestApp(): Promise<TestApp> {
  await freshDatabase();
  const mail: CapturedMail[] = [];
  useTransport({
    send: async (message) => {
      mail.push({
        to: message.to.address,
        subject: message.subject,
        text: message.text,
        html: message.html,
        calendar: message.calendar ?? undefined,
        messageId: message.messageId,
      });
      return '250 taken by the test';
    },
  });
  const app = buildApp({ clientDir: null });
  const { signIn } = await import('../../shared/features/accounts/accounts.contract');
  return {
    app,
    stranger: clientOf(app),
    mail,
    signIn: async (account) => {
      const client = clientOf(app);
      const email = typeof account === 'string' ? account : account.email;
      const answer = await client.call(signIn, { body: { email, password: testPassword, stay: false } });
      if (answer.status !== 200)
        throw new Error(`sign-in failed: ${answer.status} ${JSON.stringify(answer.body)}`);
      return client;
    },
    runJobs: async () => {
      for (let round = 0; round < 20; round++) {
        const ran = await runDueJobs(reactions);
        const sent = await dispatchMail();
        if (ran === 0 && sent === 0) return;
      }
      throw new Error('jobs do not come to an end');
    },
    reset: async () => {
      await freshDatabase();
      mail.length = 0;
      signInDelay.reset();
      letterDelay.reset();
    },
  };
}
