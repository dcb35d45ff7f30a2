import { mkdtempSync, rmSync } from 'node:fs';
import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import os from 'node:os';
import path from 'node:path';
import sqlite3 from 'sqlite3';
import { lineOf, medianOf } from './measure';

/**
 * List endpoints over HTTP against the same statements through the bare driver plus JSON.stringify, in the same run and
 * in turn. Run: npx tsx tests/bench/list-endpoints.ts --scale 10
 */

const RUNS = 40;
const scale = Number(process.argv[process.argv.indexOf('--scale') + 1] ?? 1) || 1;
const folder = mkdtempSync(path.join(os.tmpdir(), 'analemma-bench-'));
Object.assign(process.env, {
  NODE_ENV: 'test',
  DATABASE_FILE: path.join(folder, 'bench.sqlite'),
  UPLOADS_DIR: path.join(folder, 'uploads'),
  BASE_URL: 'http://127.0.0.1',
  LOG_LEVEL: 'silent',
  DEMO: 'true',
});

const lists = [
  ['events of the public', '/api/public/events'],
  ['published programme', '/api/events/combinatorial-structures/programme'],
  ['talks, 50 a page', '/api/events/combinatorial-structures/talks?limit=50'],
  ['registrations, 50 a page', '/api/events/combinatorial-structures/registrations?limit=50'],
  ['applications, 50 a page', '/api/events/tilings-and-knots/applications?limit=50'],
  ['grant applications', '/api/events/tilings-and-knots/grant-applications'],
  ['accounts, 50 a page', '/api/accounts?limit=50'],
  ['messages, 50 a page', '/api/messages?limit=50'],
  ['audit trail, 50 a page', '/api/audit?limit=50'],
] as const;

async function startApp(): Promise<{ url: string; server: Server }> {
  const { migrate } = await import('../../server/db/migrate');
  await import('../../server/db/models');
  await migrate();
  const { seedDemo } = await import('../../seeds/run');
  const started = performance.now();
  await seedDemo({ scale });
  console.log(`scale ${scale}: filled in ${((performance.now() - started) / 1000).toFixed(1)} s`);
  const { buildApp } = await import('../../server/app');
  const server = await new Promise<Server>((resolve) => {
    const listening = buildApp({ clientDir: null }).listen(0, '127.0.0.1', () => resolve(listening));
  });
  return { url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`, server };
}

/** The cookie of the event office. */
async function signIn(url: string): Promise<string> {
  const { demoAccounts } = await import('../../seeds/demo-accounts');
  const office = demoAccounts.find((account) => account.role === 'administrator');
  const session = await fetch(`${url}/api/session`);
  const { csrfToken } = (await session.json()) as { csrfToken: string };
  const cookie = (response: Response): string =>
    response.headers
      .getSetCookie()
      .map((one) => one.split(';')[0])
      .join('; ');
  const answer = await fetch(`${url}/api/session`, {
    method: 'POST',
    headers: {
      'content-type': 'application/json',
      cookie: cookie(session),
      'x-csrf-token': csrfToken,
      'sec-fetch-site': 'same-origin',
    },
    body: JSON.stringify({ email: office?.email, password: office?.password, stay: false }),
  });
  if (!answer.ok) throw new Error(`sign-in: ${answer.status} ${await answer.text()}`);
  return cookie(answer);
}

/** The statements that one request sends to the database, as Sequelize logs them (values inside). */
async function statementsOf(request: () => Promise<unknown>): Promise<string[]> {
  const { sequelize } = await import('../../server/db/connection');
  const heard: string[] = [];
  const options = (sequelize as unknown as { options: { logging: unknown } }).options;
  const before = options.logging;
  options.logging = (text: string) => heard.push(text.replace(/^Executing \([^)]*\): /, ''));
  await request();
  options.logging = before;
  return heard.filter((text) => text.startsWith('SELECT'));
}

const all = (driver: sqlite3.Database, text: string): Promise<unknown[]> =>
  new Promise((resolve, reject) =>
    driver.all(text, (error, rows) => (error ? reject(error) : resolve(rows))),
  );

async function measure(
  url: string,
  cookie: string,
  driver: sqlite3.Database,
  name: string,
  address: string,
): Promise<void> {
  const request = async (): Promise<number> => {
    const response = await fetch(url + address, { headers: { cookie, 'accept-encoding': 'identity' } });
    if (!response.ok) throw new Error(`${address}: ${response.status}`);
    return (await response.text()).length;
  };
  const statements = await statementsOf(request);
  if (statements.length === 0) throw new Error(`${address}: no statement was heard`);
  const bare = async (): Promise<number> => {
    let bytes = 0;
    for (const text of statements) bytes += JSON.stringify(await all(driver, text)).length;
    return bytes;
  };
  const bytes = await request();
  await bare();
  const [ours, theirs]: [number[], number[]] = [[], []];
  for (let run = 0; run < RUNS; run++) {
    for (const [times, work] of [
      [ours, request],
      [theirs, bare],
    ] as const) {
      const start = performance.now();
      await work();
      times.push(performance.now() - start);
    }
  }
  lineOf(
    name,
    medianOf(ours),
    medianOf(theirs),
    `${statements.length} statements, ${(bytes / 1000).toFixed(0)} kB`,
  );
}

const { url, server } = await startApp();
const cookie = await signIn(url);
const driver = new sqlite3.Database(process.env.DATABASE_FILE as string, sqlite3.OPEN_READONLY);
for (const [name, address] of lists) await measure(url, cookie, driver, name, address);
driver.close();
server.closeAllConnections();
await new Promise((resolve) => server.close(resolve));
const { closeDatabase } = await import('../../server/db/connection');
await closeDatabase();
rmSync(folder, { recursive: true, force: true });
process.exit(0);
