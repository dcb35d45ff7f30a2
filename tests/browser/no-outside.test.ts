import { AxeBuilder } from '@axe-core/playwright';
import type { BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { demoAccounts } from '../../seeds/demo-accounts';
import { startBrowserApp, type BrowserApp } from '../support/browser';
import { screens, type ScreenRole } from './screens';

/** Every screen, in paper and in slate: nothing is asked of another host, and axe finds nothing to object to. */

const themes = ['light', 'dark'] as const;
let app: BrowserApp;
const filled: Record<string, string> = {};
const contexts = new Map<string, BrowserContext>();
const outside: string[] = [];
const broken: string[] = [];

beforeAll(async () => {
  app = await startBrowserApp();
  const { seedDemo } = await import('../../seeds/run');
  await seedDemo();
  const { FundRow } = await import('../../server/features/grants/grants.model');
  const { accountByEmail } = await import('./find');
  const { talksOfPerson } = await import('../../server/features/talks/talks.service');
  const speaker = await accountByEmail('speaker@example.org');
  const talks = await talksOfPerson(speaker);
  filled.talk = talks.find((talk) => talk.eventSlug === 'combinatorial-structures')?.id ?? '';
  filled.fund = (await FundRow.findOne({ where: { name: 'Ness Bequest' } }))?.id ?? '';
  expect(filled.talk && filled.fund).toBeTruthy();
});

afterAll(async () => app?.stop());

async function contextFor(role: ScreenRole, colorScheme: (typeof themes)[number]): Promise<BrowserContext> {
  const key = `${role} ${colorScheme}`;
  const known = contexts.get(key);
  if (known) return known;
  const context = await app.browser.newContext({
    colorScheme,
    reducedMotion: 'reduce',
    viewport: { width: 1440, height: 900 },
  });
  contexts.set(key, context);
  context.on('request', (request) => {
    const { protocol, host } = new URL(request.url());
    if (['http:', 'https:', 'ws:', 'wss:'].includes(protocol) && host !== new URL(app.url).host)
      outside.push(request.url());
  });
  const account = demoAccounts.find((candidate) => candidate.role === role);
  if (account) await signIn(await context.newPage(), account);
  return context;
}

async function signIn(page: Page, account: { email: string; password: string }): Promise<void> {
  await page.goto(`${app.url}/sign-in`);
  await page.getByLabel('E-mail').fill(account.email);
  await page.getByLabel('Password', { exact: true }).fill(account.password);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL((address) => !address.pathname.startsWith('/sign-in'));
  await page.close();
}

describe.each(themes)('in the %s theme', (theme) => {
  it.each(screens)('%s at %s', async (role, route) => {
    const context = await contextFor(role, theme);
    const page = await context.newPage();
    page.on('pageerror', (error) => broken.push(`${route}: ${error.message}`));
    await page.goto(app.url + route.replace(/:(\w+)/g, (_all, name: string) => filled[name] ?? ''), {
      waitUntil: 'networkidle',
    });
    const { violations } = await new AxeBuilder({ page }).analyze();
    await page.close();
    const found = violations.map(
      (one) =>
        `${one.id}: ${one.nodes
          .map(
            (node) =>
              `${node.html.slice(0, 160)} (${node.any[0]?.message ?? node.all[0]?.message ?? node.failureSummary ?? ''})`,
          )
          .slice(0, 3)
          .join(' | ')}`,
    );
    expect(found).toEqual([]);
    expect(outside).toEqual([]);
    expect(broken).toEqual([]);
  });
});
