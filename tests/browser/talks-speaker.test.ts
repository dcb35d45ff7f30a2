import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startBrowserApp, type BrowserApp } from '../support/browser';

let app: BrowserApp;
let page: Page;
let slug: string;
const letters: { to: string; subject: string; text: string }[] = [];

beforeAll(async () => {
  app = await startBrowserApp();
  const { useTransport } = await import('../../server/mail/transport');
  useTransport({
    send: async (message) => {
      letters.push({ to: message.to.address, subject: message.subject, text: message.text });
      return '250 taken by the test';
    },
  });
  const { buildEvent } = await import('../support/build-events');
  const { buildAccount } = await import('../support/build');
  const event = await buildEvent();
  slug = event.slug;
  await buildAccount({ email: 'organiser@example.org' }, [
    { role: 'organiser', scope: 'event', scopeId: event.id },
  ]);
});
afterAll(() => app.stop());

async function sendLetters(): Promise<void> {
  const { runDueJobs } = await import('../../server/jobs/worker');
  const { reactions } = await import('../../server/jobs/registry');
  const { dispatchMail } = await import('../../server/mail/dispatch');
  while ((await runDueJobs(reactions)) + (await dispatchMail()) > 0);
}

const expectNoViolation = async (on: Page) =>
  expect(
    (await new AxeBuilder({ page: on }).analyze()).violations.map((v) => `${v.id} ${v.nodes[0]?.html}`),
  ).toEqual([]);
const saved = (on: Page) =>
  on
    .getByText(/Draft saved \d+:\d\d/)
    .first()
    .waitFor();

describe('from the invitation to slides', () => {
  it('B5 the organiser invites by mail', async () => {
    const organiser = await app.pageFor('organiser@example.org', { viewport: { width: 1440, height: 900 } });
    await organiser.goto(`${app.url}/organise/${slug}/talks`);
    await organiser.getByRole('button', { name: 'Invite a speaker …' }).click();
    const dialog = organiser.getByRole('dialog');
    await dialog.getByLabel('Given name').fill('Lena');
    await dialog.getByLabel('Family name').fill('Ørsted');
    await dialog.getByLabel('E-mail address').fill('lena@example');
    await dialog.getByRole('button', { name: 'Send the invitation' }).click();
    await dialog.locator('[aria-invalid=true]').waitFor();
    await dialog.getByLabel('E-mail address').fill('lena@example.org');
    await expectNoViolation(organiser);
    await dialog.getByRole('button', { name: 'Send the invitation' }).click();
    await organiser.getByText('The invitation to Lena Ørsted is on its way.').waitFor();
    await organiser.getByText('Invited, no answer yet').waitFor();
    await organiser.context().close();
    await sendLetters();
    expect(letters.map((letter) => letter.to)).toEqual(['lena@example.org']);
  });

  it('B5 the speaker answers on a phone, without an account before', async () => {
    const path = /\/speaker-invitation\/[\w-]+/.exec(letters[0]?.text ?? '')?.[0];
    page = await (await app.browser.newContext({ viewport: { width: 390, height: 844 } })).newPage();
    await page.goto(app.url + path);
    await page.getByRole('heading', { name: 'Invitation to speak' }).waitFor();
    await expectNoViolation(page);
    await page.getByLabel('Choose a password').fill('short');
    await page.getByRole('button', { name: 'Accept the invitation' }).click();
    await page.locator('[aria-invalid=true]').waitFor();
    await page.getByLabel('Choose a password').fill('kites above the fjord');
    await page.getByRole('button', { name: 'Accept the invitation' }).click();
    await page.waitForURL(/my-talks/);
    await page.getByLabel('Arrive').fill('2027-07-05T08:00');
    await page.getByLabel('Leave', { exact: true }).fill('2027-07-04T08:00');
    await page.getByText('You leave before you arrive.').waitFor();
    await page.getByLabel('Leave', { exact: true }).fill('2027-07-07T12:30');
    await page.getByText(/Stay saved/).waitFor();
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(390);
  });

  it('C2 writes, is told the line of a mistake, mends it and hands in; nothing is lost on the way', async () => {
    await page.setViewportSize({ width: 1440, height: 900 });
    await page.getByLabel('Title, LaTeX').fill('On $h^*$-vectors');
    await page.getByLabel('Abstract, LaTeX').fill('Let $x_1$ be\nsmall \\textsc{hand}.');
    await page.getByText('\\textsc is not known here. Use \\emph, or write the word plainly.').waitFor();
    expect(await page.locator('[role=status]', { hasText: 'Line 2' }).count()).toBe(1);
    await page.locator('article .katex').first().waitFor();
    expect(await page.locator('article .katex math').count(), 'title and text').toBe(2);
    await saved(page);
    await page.reload();
    expect(await page.getByLabel('Abstract, LaTeX').inputValue()).toContain('\\textsc{hand}');
    await page.getByRole('button', { name: 'Hand in the abstract' }).click();
    await page.getByText('Not handed in.').waitFor();
    await page.getByLabel('Abstract, LaTeX').fill('Let $x_1$ be small. <img src=x onerror=alert(1)>');
    await page.getByLabel('Add a code').fill('52B99x');
    await page.getByRole('button', { name: 'Add the code' }).click();
    await page.getByText('An MSC 2020 code looks like 05C15; this is 52B99x.').waitFor();
    await page.getByLabel('Add a code').fill('52B20');
    await page.getByRole('button', { name: 'Add the code' }).click();
    expect(await page.locator('article img').count()).toBe(0);
    await page.getByRole('button', { name: 'Hand in the abstract' }).click();
    await page.getByText('✓ Abstract handed in').waitFor();
    await expectNoViolation(page);
  });

  it('C3 uploads slides with versions, and is told when the content is something else', async () => {
    const slides = page.locator('section', { has: page.getByRole('heading', { name: 'Slides' }) });
    const file = (name: string, content: string) => ({
      name,
      mimeType: 'application/pdf',
      buffer: Buffer.from(content),
    });
    const pdf = '%PDF-1.4\n1 0 obj\n<<>>\nendobj\ntrailer\n<<>>\n%%EOF\n';
    await slides.locator('input[type=file]').setInputFiles(file('kites.pdf', pdf));
    await slides.getByRole('link', { name: 'kites.pdf' }).waitFor();
    await slides
      .locator('input[type=file]')
      .setInputFiles(file('page.pdf', '<html><script>alert(1)</script></html>'));
    await slides.getByRole('alert').waitFor();
    expect(await slides.getByRole('alert').textContent()).toContain(
      'the content of this file is none of them',
    );
    await slides.locator('input[type=file]').setInputFiles(file('kites-2.pdf', pdf));
    await slides.getByRole('link', { name: 'kites-2.pdf' }).waitFor();
    expect(await slides.locator('ol > li').allTextContents()).toEqual([
      expect.stringMatching(/^2kites-2\.pdf.*shown$/),
      expect.stringMatching(/^1kites\.pdf/),
    ]);
    const answered = page.waitForResponse(/\/recording$/);
    await page.getByLabel('May be recorded').check();
    await answered;
    await page.reload();
    await page.getByLabel('May be recorded').waitFor();
    expect(await page.getByLabel('May be recorded').isChecked()).toBe(true);
  });
});

it('C1 a talk is submitted to the call, and the committee’s answer goes out by letter', async () => {
  const { buildAccount } = await import('../support/build');
  await buildAccount({ email: 'author@example.org', givenName: 'Ada', familyName: 'Quist' });
  const author = await app.pageFor('author@example.org', { viewport: { width: 390, height: 844 } });
  await author.goto(`${app.url}/events/${slug}/submit`);
  await author.getByLabel('Title, LaTeX').fill('Kites');
  await author.getByRole('button', { name: 'Submit the talk' }).click();
  await author.getByText('Write the abstract first.').waitFor();
  await author.getByLabel('Abstract, LaTeX').fill('About kites.');
  await author.reload();
  expect(await author.getByLabel('Abstract, LaTeX').inputValue()).toBe('About kites.');
  await author.getByLabel('Add a code').fill('52C20');
  await author.getByLabel('Add a code').press('Enter');
  await author.getByRole('button', { name: 'Submit the talk' }).click();
  await author.waitForURL(/my-talks/);
  await author.context().close();
  const organiser = await app.pageFor('organiser@example.org', { viewport: { width: 390, height: 844 } });
  await organiser.goto(`${app.url}/organise/${slug}/talks?state=submitted`);
  await organiser.getByRole('row', { name: /Kites/ }).press('Enter');
  await organiser.getByRole('button', { name: 'Accept the talk …' }).click();
  await organiser.getByLabel('A word in the letter').fill('We look forward to it.');
  await organiser.getByRole('button', { name: 'Accept and write' }).click();
  await organiser.getByText('The talk is accepted. Ada Quist will hear by mail.').waitFor();
  await sendLetters();
  const letter = letters.find((entry) => entry.to === 'author@example.org');
  expect(letter?.subject).toBe('Your talk is accepted: Conference on Lattices');
  expect(letter?.text).toContain('We look forward to it.');
  await organiser.context().close();
});

it('C4 the organiser makes two lecture courses and says what is heard before what; a circle is refused in words', async () => {
  const organiser = await app.pageFor('organiser@example.org', { viewport: { width: 1440, height: 900 } });
  await organiser.goto(`${app.url}/organise/${slug}/talks?view=courses`);
  await organiser.getByText('No lecture courses.').waitFor();
  for (const [letter, title] of [
    ['A', 'Tilings and $\\Delta$'],
    ['B', 'Knots'],
  ] as const) {
    await organiser.getByRole('button', { name: 'Create a lecture course …' }).click();
    const dialog = organiser.getByRole('dialog');
    await dialog.getByLabel('Letter').fill(letter);
    await dialog.getByLabel('Title, LaTeX').fill(title);
    await dialog.getByLabel('Short title').fill(title.slice(0, 7));
    await dialog.getByLabel('Lectures', { exact: true }).fill('2');
    await dialog.getByLabel('With an exercise session to each lecture').uncheck();
    await dialog.getByRole('button', { name: 'Create the course' }).click();
    await dialog.getByText('Name at least one lecturer.').waitFor();
    await dialog.getByLabel('Given name').fill('Ben');
    await dialog.getByLabel('Family name').fill('Osei');
    await dialog.getByLabel('E-mail address').fill('ben@example.org');
    await dialog.getByRole('button', { name: 'Add the person' }).click();
    await expectNoViolation(organiser);
    await dialog.getByRole('button', { name: 'Create the course' }).click();
    await organiser.getByText(`Course ${letter} is saved.`).waitFor();
  }
  const before = organiser.getByLabel('This lecture');
  const after = organiser.getByLabel('before this one');
  await before.selectOption({ label: 'A 2 Tilings and Δ, lecture 2' });
  await after.selectOption({ label: 'B 1 Knots, lecture 1' });
  await organiser.getByRole('button', { name: 'Add the pair' }).click();
  await before.selectOption({ label: 'B 1 Knots, lecture 1' });
  await after.selectOption({ label: 'A 2 Tilings and Δ, lecture 2' });
  await organiser.getByText(/This closes a circle/).waitFor();
  expect(await organiser.getByRole('button', { name: 'Add the pair' }).isDisabled()).toBe(true);
  await organiser.getByRole('button', { name: 'Save the pairs' }).click();
  await organiser.getByText('Saved what is heard before what.').waitFor();
  await organiser.reload();
  await organiser.getByText('A 2 Tilings and Δ, lecture 2 before B 1 Knots, lecture 1').waitFor();
  await organiser.context().close();
});
