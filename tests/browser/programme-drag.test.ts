import { AxeBuilder } from '@axe-core/playwright';
import type { Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { startBrowserApp, type BrowserApp } from '../support/browser';
import type { buildProgramme } from '../support/build-programme';

type Given = Awaited<ReturnType<typeof buildProgramme>>;

let app: BrowserApp;
let given: Given;
let page: Page;

beforeAll(async () => {
  app = await startBrowserApp();
});
afterAll(() => app.stop());

/** Rooms G (120) and I (40); "Cubes" and "Squares" are to be placed; blocks 9-12 and 14-17, Mon 5 to Wed 7 July 2027. */
beforeEach(async () => {
  const { buildProgramme } = await import('../support/build-programme');
  given = await buildProgramme();
  await page?.context().close();
  page = await app.pageFor(given.organiser.email, { viewport: { width: 1440, height: 900 } });
  await page.goto(`${app.url}/organise/${given.event.slug}/programme`);
  await page.locator('.week-calendar .fc-timegrid-col').first().waitFor();
});

const spotOf = async (talkId: string) => {
  const { draftOf } = await import('../../server/features/programme/programme.service');
  const { placements } = await draftOf(given.event.id);
  const found = placements.find((one) => one.talkId === talkId);
  if (!found) return null;
  const room = found.roomId === given.hall.id ? 'Great Hall' : 'Ivar';
  return `${found.day.slice(8)} ${found.startMinute} ${room} ${found.minutes}`;
};
/** Saving goes over the wire: asks until the draft says so. */
const expectSpot = (talkId: string, wanted: string | null) =>
  expect.poll(() => spotOf(talkId), { timeout: 5000 }).toBe(wanted);

const tile = (talkId: string): Locator => page.locator(`.week-calendar [data-talk="${talkId}"]`);
const card = (talkId: string): Locator => page.locator(`.tray [data-talk="${talkId}"]`);
const columns = (): Locator => page.locator('.fc-timegrid-cols .fc-timegrid-col[data-date]');

/** The point of a column (0 and 1: the lens day's rooms, then the other days) at a minute of the day. */
async function pointAt(column: number, minute: number): Promise<{ x: number; y: number }> {
  const box = await columns().nth(column).boundingBox();
  const slots = page.locator('.fc-timegrid-slot-lane');
  const first = (await slots.first().getAttribute('data-time')) as string;
  const [hours = 0, minutes = 0] = first.split(':').map(Number);
  const height = (box?.height ?? 0) / ((await slots.count()) * 5);
  return {
    x: (box?.x ?? 0) + (box?.width ?? 0) / 2,
    y: (box?.y ?? 0) + (minute - hours * 60 - minutes) * height + 1,
  };
}

async function drag(from: Locator, to: { x: number; y: number }, grip = { x: 12, y: 3 }): Promise<void> {
  const box = await from.boundingBox();
  if (!box) throw new Error('nothing to drag');
  await page.mouse.move(box.x + grip.x, box.y + grip.y);
  await page.mouse.down();
  await page.mouse.move(to.x, to.y - 20, { steps: 6 });
  await page.mouse.move(to.x, to.y + 1, { steps: 6 });
}

const place = async (
  talkId: string,
  roomId: string,
  startMinute: number,
  day = '2027-07-05',
): Promise<void> => {
  const { placeTalk } = await import('../../server/features/programme/programme.service');
  const { systemActor } = await import('../../server/features/accounts/accounts.service');
  await placeTalk(systemActor, given.event.slug, { talkId, roomId, day, startMinute });
  await page.reload();
  await tile(talkId).waitFor();
};

describe('by mouse', () => {
  it('drops a talk from the tray on a room and an hour, telling what would clash', async () => {
    const { first } = given;
    await drag(card(first.id), await pointAt(1, 840));
    await expect
      .poll(() => page.locator('.drag-hint').innerText())
      .toContain('Mon 5 July 14:00, Ivar. Fits.');
    await page.mouse.up();
    await expectSpot(first.id, '05 840 Ivar 60');
    expect(await card(first.id).count()).toBe(0);
    expect(await tile(first.id).count()).toBe(1);
  });

  it('drags a talk to another hour and into another room', async () => {
    const { first, hall } = given;
    await place(first.id, hall.id, 540);
    await drag(tile(first.id), await pointAt(0, 605));
    await page.mouse.up();
    await expectSpot(first.id, '05 605 Great Hall 60');
    await drag(tile(first.id), await pointAt(1, 900));
    await page.mouse.up();
    await expectSpot(first.id, '05 900 Ivar 60');
  });

  it('says in words what a drop would break, while dragging, and lets it be dropped all the same', async () => {
    const { first, second, hall, ivar } = given;
    await place(first.id, hall.id, 540);
    await place(second.id, ivar.id, 840);
    await drag(tile(second.id), await pointAt(0, 570));
    await expect.poll(() => page.locator('.drag-hint').innerText()).toContain('Great Hall is taken twice.');
    await page.mouse.up();
    await expectSpot(second.id, '05 570 Great Hall 60');
    const clashes = page.getByRole('region', { name: 'Clashes' });
    await expect.poll(() => clashes.innerText()).toContain('1 must be settled');
    await clashes
      .getByRole('button', { name: /^Move / })
      .first()
      .click();
    await expect.poll(() => clashes.innerText()).toContain('No clashes.');
  });

  it('drags to another day: same room where it fits', async () => {
    const { first, ivar } = given;
    await place(first.id, ivar.id, 540);
    await drag(tile(first.id), await pointAt(2, 600));
    await page.mouse.up();
    await expectSpot(first.id, '06 600 Ivar 60');
  });

  it('makes a talk longer by its lower edge', async () => {
    const { first, hall } = given;
    await place(first.id, hall.id, 540);
    await tile(first.id).hover();
    const box = await tile(first.id).boundingBox();
    const to = await pointAt(0, 630);
    await page.mouse.move((box?.x ?? 0) + 30, (box?.y ?? 0) + (box?.height ?? 0) - 2);
    await page.mouse.down();
    await page.mouse.move(to.x, to.y - 8, { steps: 4 });
    await page.mouse.move(to.x, to.y - 2, { steps: 4 });
    await page.mouse.up();
    await expectSpot(first.id, '05 540 Great Hall 90');
  });

  it('does not move what is fixed', async () => {
    const { first, hall } = given;
    await place(first.id, hall.id, 540);
    await tile(first.id).click();
    await page.getByRole('button', { name: 'Fix it here' }).click();
    await page.getByRole('button', { name: 'Release it' }).waitFor();
    await drag(tile(first.id), await pointAt(1, 840));
    await page.mouse.up();
    await page.waitForTimeout(400);
    expect(await spotOf(first.id)).toBe('05 540 Great Hall 60');
  });
});

describe('by keys', () => {
  it('M places a talk from the tray: type when and where, Enter', async () => {
    const { first } = given;
    await card(first.id).focus();
    await page.keyboard.press('m');
    await page.getByRole('dialog', { name: /Move Contributed/ }).waitFor();
    await page.keyboard.type('mon 14:00 ivar');
    await page.getByRole('option', { selected: true }).filter({ hasText: 'Mon 5 July 14:00' }).waitFor();
    await page.keyboard.press('Enter');
    await expectSpot(first.id, '05 840 Ivar 60');
    await expect
      .poll(() => page.getByRole('status').first().innerText())
      .toContain('now Mon 5 July 14:00, Ivar. No clashes.');
  });

  it('Alt and arrows shift by five minutes or a day, R takes the next room, the focus stays', async () => {
    const { first, hall } = given;
    await place(first.id, hall.id, 540);
    await tile(first.id).focus();
    await page.keyboard.press('Alt+ArrowDown');
    await expectSpot(first.id, '05 545 Great Hall 60');
    await page.keyboard.press('r');
    await expectSpot(first.id, '05 545 Ivar 60');
    await page.keyboard.press('Alt+ArrowRight');
    await expectSpot(first.id, '06 545 Ivar 60');
    await page.keyboard.press('Alt+ArrowLeft');
    await page.keyboard.press('Alt+ArrowUp');
    await expectSpot(first.id, '05 540 Ivar 60');
    expect(
      await page.evaluate(() => document.activeElement?.closest<HTMLElement>('[data-talk]')?.dataset.talk),
    ).toBe(first.id);
  });

  it('Alt, Shift and arrows make it longer and shorter; 1 to 3 move the lens', async () => {
    const { first, hall } = given;
    await place(first.id, hall.id, 540);
    await tile(first.id).focus();
    await page.keyboard.press('Alt+Shift+ArrowDown');
    await expectSpot(first.id, '05 540 Great Hall 65');
    await page.keyboard.press('Alt+Shift+ArrowUp');
    await page.keyboard.press('Alt+Shift+ArrowUp');
    await expectSpot(first.id, '05 540 Great Hall 55');
    await page.keyboard.press('3');
    await page.getByRole('button', { name: /^Wed 7/, pressed: true }).waitFor();
  });

  it('Delete puts it back, Ctrl+Z and Ctrl+Shift+Z take back and do again', async () => {
    const { first, hall } = given;
    await place(first.id, hall.id, 540);
    await tile(first.id).focus();
    await page.keyboard.press('Delete');
    await expectSpot(first.id, null);
    await card(first.id).waitFor();
    await page.keyboard.press('Control+z');
    await expectSpot(first.id, '05 540 Great Hall 60');
    await page.keyboard.press('Control+Shift+z');
    await expectSpot(first.id, null);
  });

  it('works in the list with the same keys', async () => {
    const { first, hall } = given;
    await place(first.id, hall.id, 540);
    await page.getByText('List', { exact: true }).click();
    await page.locator(`td [data-talk="${first.id}"]`).focus();
    await page.keyboard.press('r');
    await expectSpot(first.id, '05 540 Ivar 60');
    await page.keyboard.press('Alt+ArrowDown');
    await expectSpot(first.id, '05 545 Ivar 60');
  });
});

describe('with others', () => {
  it('rolls back and shows the newest state when somebody else has changed the draft', async () => {
    const { first, second, hall, ivar } = given;
    await place(first.id, hall.id, 540);
    const { placeTalk } = await import('../../server/features/programme/programme.service');
    const { systemActor } = await import('../../server/features/accounts/accounts.service');
    await placeTalk(systemActor, given.event.slug, {
      talkId: second.id,
      roomId: ivar.id,
      day: '2027-07-05',
      startMinute: 840,
    });
    await tile(first.id).focus();
    await page.keyboard.press('Alt+ArrowDown');
    await page.getByText('Somebody else changed the programme meanwhile.').first().waitFor();
    await tile(second.id).waitFor();
    expect(await spotOf(first.id)).toBe('05 540 Great Hall 60');
  });

  it('publishes; with clashes left the safe action has the focus', async () => {
    const { first, second, hall } = given;
    await place(first.id, hall.id, 540);
    await place(second.id, hall.id, 570);
    await page.getByRole('button', { name: 'Publish revision 1…' }).click();
    await expect
      .poll(() => page.evaluate(() => document.activeElement?.textContent))
      .toBe('Settle the 1 clash first');
    await page.getByRole('button', { name: 'Publish all the same' }).click();
    await page.getByText('Revision 1 is public, with 2 talks.').first().waitFor();
  });
});

describe.each(['light', 'dark'] as const)('seen by axe (%s)', (colorScheme) => {
  it('has no violation in the week, the dialog, the list and on a phone', async () => {
    await page.emulateMedia({ colorScheme });
    await place(given.first.id, given.hall.id, 540);
    await tile(given.first.id).click();
    const violations = async (): Promise<string[]> => {
      const found = await new AxeBuilder({ page }).analyze();
      return found.violations.map(
        (one) => `${one.id}: ${one.nodes.map((node) => node.html.slice(0, 140)).join(' | ')}`,
      );
    };
    expect(await violations()).toEqual([]);
    await page.keyboard.press('m');
    await page.getByRole('dialog').waitFor();
    expect(await violations()).toEqual([]);
    await page.keyboard.press('Escape');
    await page.getByText('Whole event').click();
    expect(await violations()).toEqual([]);
    await page.getByText('List', { exact: true }).click();
    expect(await violations()).toEqual([]);
    await page.setViewportSize({ width: 390, height: 844 });
    expect(await violations()).toEqual([]);
  });
});
