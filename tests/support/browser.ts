import { mkdtempSync, rmSync } from 'node:fs';
import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import os from 'node:os';
import path from 'node:path';
import chromium from '@sparticuz/chromium';
import { chromium as playwright, type Browser, type Page } from 'playwright-core';

export interface BrowserApp {
  url: string;
  browser: Browser;
  /** A page of its own context, signed in with the test password. */
  pageFor(email: string, options?: Parameters<Browser['newContext']>[0]): Promise<Page>;
  stop(): Promise<void>;
}

/**
 * The real application with the built client on a port of its own, an empty migrated database, and a real Chromium.
 * The environment is read once, when the first module asks: import server modules only after this has been called.
 */
export async function startBrowserApp(): Promise<BrowserApp> {
  const folder = mkdtempSync(path.join(os.tmpdir(), 'analemma-browser-'));
  process.env.NODE_ENV = 'test';
  process.env.DATABASE_FILE = path.join(folder, 'test.sqlite');
  process.env.UPLOADS_DIR = path.join(folder, 'uploads');
  process.env.BASE_URL = 'http://127.0.0.1';
  process.env.LOG_LEVEL ??= 'silent';
  await import('../../server/db/models');
  const { migrate } = await import('../../server/db/migrate');
  await migrate();
  const { clientDir, ensureClient } = await import('../../server/client');
  await ensureClient();
  const { buildApp } = await import('../../server/app');
  const server = await new Promise<Server>((resolve) => {
    const listening = buildApp({ clientDir }).listen(0, '127.0.0.1', () => resolve(listening));
  });
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  // The package's own arguments contain --single-process, under which a second page crashes the browser.
  const browser = await playwright.launch({
    executablePath: await chromium.executablePath(),
    args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run'],
  });
  return {
    url,
    browser,
    pageFor: async (email, options) => signedIn(await browser.newContext(options), url, email),
    stop: async () => {
      await browser.close();
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      const { closeDatabase } = await import('../../server/db/connection');
      await closeDatabase();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

async function signedIn(
  context: Awaited<ReturnType<Browser['newContext']>>,
  url: string,
  email: string,
): Promise<Page> {
  const { testPassword } = await import('./build');
  const page = await context.newPage();
  await page.goto(`${url}/sign-in`);
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(testPassword);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL((address) => !address.pathname.startsWith('/sign-in'));
  return page;
}
