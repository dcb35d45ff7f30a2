import chromium from '@sparticuz/chromium';
import ICAL from 'ical.js';
import { chromium as playwright, type Browser, type Locator, type Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { demoAccounts } from '../../seeds/demo-accounts';
import { addDays, instantToLocal } from '../../shared/lib/time';
import { startRunningDemo, type RunningDemo } from '../support/running-demo';

let demo: RunningDemo;
let browser: Browser;
let office: Page;

const today = instantToLocal(new Date(), 'Europe/Copenhagen').date;
const firstDay = addDays(today, 40);
const lastDay = addDays(today, 41);
const slug = `quandle-days-${firstDay.slice(0, 4)}`;
const accountOf = (role: string) =>
  demoAccounts.find((account) => account.role === role) as (typeof demoAccounts)[number];

async function newPage(): Promise<Page> {
  const context = await browser.newContext({
    viewport: { width: 1440, height: 900 },
    locale: 'en-GB',
    timezoneId: 'Europe/Copenhagen',
  });
  context.setDefaultTimeout(15_000);
  return context.newPage();
}

async function signIn(role: string): Promise<Page> {
  const page = await newPage();
  const { email, password } = accountOf(role);
  await page.goto(`${demo.url}/sign-in`);
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL((address) => !address.pathname.startsWith('/sign-in'));
  return page;
}

interface Mail {
  id: string;
  to: string;
  subject: string;
  calendarMethod: string | null;
  text: string;
  calendar: string | null;
}

/** Letters to an address in the test mailbox, the oldest first. */
async function mailsTo(address: string): Promise<Mail[]> {
  const list = (await (
    await office.request.get(`${demo.url}/api/test-mail?q=${encodeURIComponent(address)}`)
  ).json()) as { items: { id: string }[] };
  const mails = await Promise.all(
    list.items.map(
      async ({ id }) => (await (await office.request.get(`${demo.url}/api/test-mail/${id}`)).json()) as Mail,
    ),
  );
  return mails.reverse();
}
async function mailWhen(address: string, fits: (mail: Mail) => boolean): Promise<Mail> {
  let found: Mail | undefined;
  await expect
    .poll(async () => (found = (await mailsTo(address)).find(fits)) !== undefined, {
      timeout: 90_000,
      interval: 400,
    })
    .toBe(true);
  return found as Mail;
}

beforeAll(async () => {
  demo = await startRunningDemo();
  browser = await playwright.launch({
    executablePath: await chromium.executablePath(),
    args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run'],
  });
  office = await signIn('administrator');
}, 180_000);
afterAll(async () => {
  await browser?.close();
  await demo?.stop();
});

const speaker = { email: 'yuko@example.org', password: 'kites above the fjord' };
let talkId = '';
let speakerPage: Page;
let participantPage: Page;
let funderPage: Page;

interface Board {
  rows: { id: string; person: object | null; awards: { state: string }[] }[];
  funds: { id: string }[];
}
const board = async (): Promise<Board> =>
  (await (await office.request.get(`${demo.url}/api/events/${slug}/grant-applications`)).json()) as Board;

/** FullCalendar's column of a room on the lens day, at a minute of the day. */
async function pointAt(page: Page, column: number, minute: number): Promise<{ x: number; y: number }> {
  const box = await page.locator('.fc-timegrid-cols .fc-timegrid-col[data-date]').nth(column).boundingBox();
  const slots = page.locator('.fc-timegrid-slot-lane');
  const first = (await slots.first().getAttribute('data-time')) as string;
  const [hours = 0, minutes = 0] = first.split(':').map(Number);
  const height = (box?.height ?? 0) / ((await slots.count()) * 5);
  return {
    x: (box?.x ?? 0) + (box?.width ?? 0) / 2,
    y: (box?.y ?? 0) + (minute - hours * 60 - minutes) * height + 1,
  };
}

async function drag(page: Page, from: Locator, to: { x: number; y: number }): Promise<void> {
  const box = await from.boundingBox();
  if (!box) throw new Error('nothing to drag');
  await page.mouse.move(box.x + 12, box.y + 3);
  await page.mouse.down();
  await page.mouse.move(to.x, to.y - 20, { steps: 6 });
  await page.mouse.move(to.x, to.y + 1, { steps: 6 });
  await page.mouse.up();
}

describe('the main job, from a list of names to a paid place', () => {
  it('the office creates an event with two rooms and invites a speaker', async () => {
    await office.goto(`${demo.url}/organise/new`);
    await office.getByLabel('Title', { exact: true }).fill('Quandle Days');
    await office.getByLabel('Short title').fill('Quandle Days');
    await office.getByLabel('First day').fill(firstDay);
    await office.getByLabel('Last day').fill(lastDay);
    await office.getByLabel('Venue').fill('Lindgard House');
    await office.getByLabel('Town').fill('Tarnholt');
    await office.getByLabel('Time zone').selectOption('Europe/Copenhagen');
    await office.getByLabel('Places').fill('20');
    await office.getByLabel('E-mail for questions').fill('quandles@tarnholt.example.org');
    await office.getByLabel('Paragraph for the public page').fill('Two days on quandles.');
    await office.getByRole('button', { name: 'Create the draft' }).click();
    await office.waitForURL(`**/organise/${slug}/settings?part=rooms`);
    for (const [index, [name, short, seats]] of [
      ['Great Hall', 'G', '120'],
      ['Ivar', 'I', '40'],
    ].entries()) {
      await office.getByRole('button', { name: 'Add a room' }).click();
      const room = office.getByRole('group', { name: `Room ${index + 1}` });
      await room.getByLabel('Name', { exact: true }).fill(name as string);
      await room.getByLabel('Short name').fill(short as string);
      await room.getByLabel('Seats').fill(seats as string);
    }
    await office.getByRole('button', { name: 'Save the rooms' }).click();
    await office.getByText('Rooms saved.').waitFor();
    await office.getByRole('button', { name: 'Days', exact: true }).click();
    await office.getByRole('button', { name: 'Begin with a usual day' }).click();
    await office.getByRole('button', { name: 'Copy this day to all days' }).click();
    await office.getByRole('button', { name: 'Save the days' }).click();
    await office.getByText('Days saved.').waitFor();
    await office.getByRole('link', { name: 'Fees and extras' }).click();
    await office.getByRole('button', { name: 'Add a category' }).click();
    await office.getByRole('group', { name: 'Category 1' }).getByLabel('Name').fill('everybody');
    await office.getByRole('group', { name: 'Category 1' }).getByLabel('Regular').fill('120.50');
    await office.getByRole('button', { name: 'Save the fees' }).click();
    await office.getByText('Fees saved.').waitFor();
    await office.goto(`${demo.url}/organise/${slug}/settings`);
    await office.getByRole('button', { name: 'Announce…' }).click();
    await office.getByRole('dialog').getByRole('button', { name: 'Announce' }).click();
    await office.getByText('The event is announced now.').waitFor();
    await office.getByRole('button', { name: 'Open registration…' }).click();
    await office.getByRole('dialog').getByRole('button', { name: 'Open registration' }).click();
    await office.getByText('The event is open now.').waitFor();
    await office.goto(`${demo.url}/organise/${slug}/talks`);
    await office.getByRole('button', { name: /Invite a speaker/ }).click();
    const dialog = office.getByRole('dialog');
    await dialog.getByLabel('Given name').fill('Yūko');
    await dialog.getByLabel('Family name').fill('Minatogawa');
    await dialog.getByLabel('E-mail address').fill(speaker.email);
    await dialog.locator('button[type=submit]').click();
    await mailWhen(speaker.email, (mail) => mail.subject.startsWith('Invitation to speak: Quandle Days'));
  });

  it('the speaker follows the link, accepts, tells the stay, writes an abstract with mathematics and uploads a PDF', async () => {
    const letter = await mailWhen(speaker.email, (mail) => mail.subject.startsWith('Invitation to speak'));
    const link = /http:\/\/\S+\/speaker-invitation\/[\w-]+/.exec(letter.text)?.[0] ?? '';
    speakerPage = await newPage();
    await speakerPage.goto(link);
    await speakerPage.getByLabel('Choose a password').fill(speaker.password);
    await speakerPage.locator('button[type=submit]').click();
    await speakerPage.waitForURL('**/my-talks/*');
    const talks = (await (await speakerPage.request.get(`${demo.url}/api/my/talks`)).json()) as {
      items: { id: string }[];
    };
    talkId = talks.items[0]?.id ?? '';
    await speakerPage.goto(`${demo.url}/events/${slug}/my-talks/${talkId}`);
    await speakerPage.getByLabel('Title, LaTeX').fill('Quandles of surfaces $F\\subset S^4$');
    await speakerPage
      .getByLabel('Abstract, LaTeX')
      .fill('We show that the quandle of $F\\subset S^4$ is a quotient: \\[ Q(F)\\cong Q/\\!\\sim \\]');
    await speakerPage.locator('.katex').first().waitFor();
    await speakerPage.getByLabel('Add a code').fill('57K10');
    await speakerPage.getByLabel('Add a code').press('Enter');
    await speakerPage.getByLabel('Arrive').fill(`${firstDay}T08:00`);
    await speakerPage.getByLabel('Leave').fill(`${firstDay}T18:00`);
    await speakerPage.getByText('57K10').first().waitFor();
    const pdf = Buffer.from('%PDF-1.4\n1 0 obj\n<<>>\nendobj\ntrailer\n<<>>\n%%EOF\n');
    await speakerPage
      .locator('input[type=file]')
      .first()
      .setInputFiles({ name: 'quandles.pdf', mimeType: 'application/pdf', buffer: pdf });
    await speakerPage.getByText('quandles.pdf').first().waitFor();
    await speakerPage.getByRole('button', { name: 'Hand in the abstract' }).click();
    await expect
      .poll(
        async () =>
          (
            (await (
              await speakerPage.request.get(`${demo.url}/api/events/${slug}/talks/${talkId}`)
            ).json()) as { abstractAt: string | null }
          ).abstractAt,
        { timeout: 15_000 },
      )
      .not.toBeNull();
    const leavesAt = async () =>
      (
        (await (await speakerPage.request.get(`${demo.url}/api/events/${slug}/my-presence`)).json()) as {
          leavesAt: string | null;
        }
      ).leavesAt;
    await expect.poll(leavesAt, { timeout: 10_000 }).toBe(`${firstDay}T18:00`);
  });

  it('the organiser drags the talk onto the calendar, meets a clash, solves it and publishes', async () => {
    await office.goto(`${demo.url}/organise/${slug}/programme`);
    const card = office.locator(`.tray [data-talk="${talkId}"]`);
    await card.waitFor();
    // Over lunch, where there is no session block.
    await drag(office, card, await pointAt(office, 0, 12 * 60 + 30));
    await office.locator(`.week-calendar [data-talk="${talkId}"]`).waitFor();
    await office.getByText('1 must be settled').waitFor();
    await office
      .locator('section', { hasText: 'Clashes' })
      .locator('button', { hasText: /^Move/ })
      .first()
      .click();
    await office
      .getByText(/No clashes/)
      .first()
      .waitFor();
    await office.getByRole('button', { name: /Publish revision 1/ }).click();
    await office
      .getByRole('dialog')
      .getByRole('button', { name: /^Publish/ })
      .last()
      .click();
    await expect
      .poll(
        async () =>
          (
            (await (await office.request.get(`${demo.url}/api/events/${slug}/programme`)).json()) as {
              revision: { number: number } | null;
            }
          ).revision?.number ?? 0,
        { timeout: 10_000 },
      )
      .toBe(1);
  });

  it('the invitation is in the mailbox, and ical.js reads it', async () => {
    const mail = await mailWhen(speaker.email, (candidate) => candidate.calendarMethod === 'REQUEST');
    const event = new ICAL.Component(ICAL.parse(mail.calendar as string) as never).getFirstSubcomponent(
      'vevent',
    ) as ICAL.Component;
    expect(event.getFirstPropertyValue('sequence')).toBe(0);
    expect(event.getFirstPropertyValue('summary')).toBe('Quandles of surfaces F ⊂ S⁴');
    expect(String(event.getFirstPropertyValue('attendee')).toLowerCase()).toBe(`mailto:${speaker.email}`);
    expect(event.getFirstPropertyValue('location')).toMatch(/Great Hall|Ivar/);
  });

  it('a participant registers, is declined by one card, pays with another and gets the receipt', async () => {
    const page = await signIn('participant');
    await page.goto(`${demo.url}/events/${slug}/register`);
    await page.getByLabel('Name on the badge').fill('Tamar K.');
    await page.getByRole('button', { name: 'Continue' }).click();
    await page.getByLabel('Food').selectOption('vegetarian');
    await page.getByRole('button', { name: 'Continue' }).click();
    await page.getByRole('button', { name: 'Continue' }).click();
    await page.getByRole('checkbox', { name: /may keep these data/ }).check();
    await page.getByRole('button', { name: 'Take the place and pay' }).click();
    await page.getByLabel('Card number').fill('4000 0000 0000 9995');
    await page.getByRole('button', { name: /^Pay/ }).click();
    await page.getByText('Your card has insufficient funds.').waitFor();
    await page.getByLabel('Card number').fill('4242 4242 4242 4242');
    await page.getByRole('button', { name: /^Pay/ }).click();
    await page.getByRole('heading', { name: 'You are registered and paid.' }).waitFor();
    const receipt = await mailWhen(
      accountOf('participant').email,
      (mail) => mail.subject === 'Registered: Quandle Days',
    );
    expect(receipt.text).toContain('120.50 EUR');
    participantPage = page;
  });

  it('the office opens a fund and invites its funder', async () => {
    await office.goto(`${demo.url}/organise/${slug}/grants`);
    await office.getByRole('button', { name: 'Add a fund…' }).click();
    const dialog = office.getByRole('dialog');
    await dialog.getByLabel('Name', { exact: true }).fill('Lakeside Bequest');
    await dialog.getByLabel('Given by').fill('Lakeside Trust');
    await dialog.getByLabel(/^Budget/).fill('1000');
    await dialog.getByRole('checkbox', { name: 'Travel', exact: true }).check();
    await dialog.getByRole('button', { name: 'Save the fund' }).click();
    await office.getByText('Fund saved.').waitFor();
    await office.getByRole('button', { name: 'Invite a funder to fund A' }).click();
    await office.getByRole('dialog').getByLabel('E-mail').fill(accountOf('funder').email);
    await office.getByRole('dialog').getByLabel('Given name').fill('Ragnhild');
    await office.getByRole('dialog').getByLabel('Family name').fill('Halvardsen');
    await office.getByRole('button', { name: 'Send the invitation' }).click();
    const letter = await mailWhen(accountOf('funder').email, (mail) =>
      mail.subject.includes('Lakeside Bequest'),
    );
    funderPage = await signIn('funder');
    await funderPage.goto(/http:\/\/\S+\/invitation\/[\w-]+/.exec(letter.text)?.[0] ?? '');
    await funderPage.getByRole('button', { name: 'Take the invitation' }).click();
    await funderPage.waitForURL('**/home');
  });

  it('the participant asks for a grant, the organiser scores and proposes, the funder approves, the decision is accepted', async () => {
    await participantPage.getByRole('link', { name: 'Ask for a travel grant' }).click();
    await participantPage
      .getByRole('group', { name: /^Travel/ })
      .getByLabel('Travel', { exact: true })
      .fill('480');
    await participantPage
      .getByLabel('Why this event, and why a grant')
      .fill('I work on quandles of surfaces, and my institute has no money for the journey this year.');
    await participantPage.getByRole('button', { name: 'Hand in the application' }).click();
    await expect
      .poll(async () => (await board()).rows.filter((row) => row.person).length, { timeout: 10_000 })
      .toBe(1);
    await office.goto(`${demo.url}/organise/${slug}/grants?application=${(await board()).rows[0]?.id ?? ''}`);
    await office.getByLabel('Your score').selectOption('9');
    await office.getByRole('button', { name: 'Save your score' }).click();
    await expect.poll(async () => JSON.stringify((await board()).rows[0])).toContain('"score":9');
    await office.getByRole('button', { name: 'Fill in the request' }).click();
    await office.getByLabel('Travel, EUR').waitFor();
    expect(await office.getByLabel('Travel, EUR').inputValue()).toMatch(/^480/);
    await office.getByRole('button', { name: 'Propose from fund A' }).click();
    await office.getByText('Proposed, 480 EUR').waitFor();
    const fund = (await board()).funds[0]?.id ?? '';
    await funderPage.goto(`${demo.url}/funds/${fund}`);
    await funderPage.getByText('480').first().waitFor();
    expect(await funderPage.locator('main').innerText()).not.toContain('Kvaratskheli');
    await funderPage
      .getByRole('button', { name: /^Approve(?! the)/ })
      .first()
      .click();
    await funderPage.getByText('Approved').first().waitFor();
    await office.reload();
    await office.getByRole('button', { name: 'Send the decisions…' }).click();
    await office.getByLabel('Accept by').fill(addDays(today, 10));
    await office
      .getByRole('dialog')
      .getByRole('button', { name: /^Send 1 letter/ })
      .click();
    const decision = await mailWhen(accountOf('participant').email, (mail) =>
      mail.text.includes('Lakeside Bequest'),
    );
    expect(decision.text).toContain('480');
    await participantPage.goto(`${demo.url}/events/${slug}/grant`);
    await participantPage.getByRole('button', { name: 'Accept the grant' }).click();
    await participantPage.getByText('You have accepted the grant.').first().waitFor();
    expect((await board()).rows[0]?.awards[0]?.state).toBe('accepted');
  });

  it('the talk is moved, an update with SEQUENCE:1 arrives, and nothing else does', async () => {
    const before = (await mailsTo(speaker.email)).length;
    await office.goto(`${demo.url}/organise/${slug}/programme`);
    const tile = office.locator(`.week-calendar [data-talk="${talkId}"]`);
    await tile.waitFor();
    await tile.focus();
    await office.keyboard.press('r');
    await office.getByRole('button', { name: /Publish revision 2/ }).click();
    await office
      .getByRole('dialog')
      .getByRole('button', { name: /^Publish/ })
      .last()
      .click();
    const update = await mailWhen(speaker.email, (mail) => /^SEQUENCE:1\r?$/m.test(mail.calendar ?? ''));
    expect(update.calendarMethod).toBe('REQUEST');
    await new Promise((resolve) => setTimeout(resolve, 2500));
    expect((await mailsTo(speaker.email)).length).toBe(before + 1);
  });
});
