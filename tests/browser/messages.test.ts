import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { startBrowserApp, type BrowserApp } from '../support/browser';

/** Mail as people see it: the organiser's history, a letter to a group, the test mailbox, the answer to an invitation. */
let app: BrowserApp;
let mailbox: { stop(): Promise<void> };
let scene: Awaited<ReturnType<typeof import('../support/build-programme').buildProgramme>>;
let sendAll: () => Promise<void>;

beforeAll(async () => {
  process.env.DEMO = 'true';
  app = await startBrowserApp();
  const { startLocalMailbox } = await import('../../server/fakes/smtp/local-mailbox');
  mailbox = await startLocalMailbox({ forget: true });
  const { buildProgramme } = await import('../support/build-programme');
  const { systemActor } = await import('../../server/features/accounts/accounts.service');
  const { placeTalk, publishRevision } = await import('../../server/features/programme/programme.service');
  const { reactions } = await import('../../server/jobs/registry');
  const { runDueJobs } = await import('../../server/jobs/worker');
  const { dispatchMail } = await import('../../server/mail/dispatch');
  sendAll = async () => {
    while ((await runDueJobs(reactions)) + (await dispatchMail()) > 0);
  };
  scene = await buildProgramme();
  await placeTalk(systemActor, scene.event.slug, {
    talkId: scene.first.id,
    roomId: scene.hall.id,
    day: '2027-07-05',
    startMinute: 540,
  });
  await publishRevision(systemActor, scene.event.slug, {});
  await sendAll();
}, 240_000);
afterAll(async () => {
  await mailbox.stop();
  await app.stop();
});

async function noViolations(page: Page, name: string): Promise<void> {
  for (const colorScheme of ['light', 'dark'] as const) {
    await page.emulateMedia({ colorScheme });
    await page.waitForTimeout(250); // colours change within 120 ms
    // Scripts can't run in the letter's sandbox, axe's neither.
    const { violations } = await new AxeBuilder({ page }).exclude('iframe').analyze();
    expect(
      violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html}`),
      `${name}, ${colorScheme}`,
    ).toEqual([]);
  }
}

it('the speaker reads the invitation in the test mailbox and says yes by its link; the organiser sees it', async () => {
  const page = await app.pageFor(scene.speaker.email);
  const outside: string[] = [];
  page
    .context()
    .on(
      'request',
      (request) =>
        void (
          /^(data|about|blob):/.test(request.url()) ||
          request.url().startsWith(app.url) ||
          outside.push(request.url())
        ),
    );
  await page.goto(`${app.url}/office/test-mail`);
  await page.getByRole('button', { name: /Invitation: Cubes/ }).click();
  await page.getByRole('button', { name: 'Calendar part', exact: true }).click();
  await page.getByText('METHOD:REQUEST').waitFor();
  await noViolations(page, 'test mail');
  await page.getByRole('button', { name: 'As it looks' }).click();
  const link = await page
    .frameLocator('iframe')
    .getByRole('link', { name: 'Say whether you come' })
    .getAttribute('href');
  await page.goto(`${app.url}${new URL(link ?? '').pathname}`);
  await page.getByRole('button', { name: 'Say yes, I come' }).click();
  await page.getByText('You have said that you come.').waitFor();
  await noViolations(page, 'answer');
  expect(outside).toEqual([]);
  await page.context().close();

  const organiser = await app.pageFor(scene.organiser.email);
  await organiser.goto(`${app.url}/organise/${scene.event.slug}/messages?view=answers`);
  await organiser.getByRole('cell', { name: 'Comes' }).waitFor();
  await noViolations(organiser, 'answers');
  await organiser.context().close();
}, 120_000);

it('the organiser writes to the speakers with a field, corrects a wrong one, reads it first, sends it, and finds it in the history', async () => {
  const page = await app.pageFor(scene.organiser.email, { viewport: { width: 390, height: 844 } });
  await page.goto(`${app.url}/organise/${scene.event.slug}/messages`);
  await page.getByRole('button', { name: 'Write a letter…' }).click();
  await page.getByLabel('Subject').fill('Boards in {{hall}}');
  await page.getByRole('button', { name: 'Titles of their talks' }).click();
  await page.getByRole('button', { name: 'Preview the letter' }).click();
  await page.getByText('There is no field {{hall}}. Choose one from the list.').waitFor();
  await page.getByLabel('Subject').fill('Boards at {{event}}');
  await page.getByRole('button', { name: 'Preview the letter' }).click();
  await page.getByText('Boards at Conference on Lattices', { exact: true }).first().waitFor();
  await noViolations(page, 'letter');
  await page.getByRole('button', { name: 'Send to 2 people' }).click();
  await page.getByText('Queued for 2 people.').waitFor();
  await sendAll();
  await page.reload();
  await page
    .getByRole('row', { name: /Hằng.*Boards at Conference on Lattices/ })
    .first()
    .press('Enter');
  await page.getByText('“Cubes”').waitFor();
  await noViolations(page, 'message');
  await page.getByRole('button', { name: 'Show everything this person was sent' }).click();
  await page.getByText('Only what').waitFor();
  await expect.poll(() => page.getByRole('row').count()).toBe(3);
  expect(
    await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth),
  ).toBeLessThanOrEqual(0);
  await page.context().close();
}, 120_000);
