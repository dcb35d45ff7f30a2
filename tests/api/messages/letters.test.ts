import { randomUUID } from 'node:crypto';
import request from 'supertest';
import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as letters from '../../../shared/features/messages/letters.contract';
import * as contract from '../../../shared/features/messages/messages.contract';
import { transaction } from '../../../server/db/transaction';
import { MessageRow } from '../../../server/mail/message.model';
import { buildAccount, administrator } from '../../support/build';
import { buildProgramme } from '../../support/build-programme';
import { startTestApp, type Client, type TestApp } from '../../support/server';

let t: TestApp;
let scene: Awaited<ReturnType<typeof buildProgramme>>;
let organiser: Client;
let at: { params: { event: string } };
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  scene = await buildProgramme();
  organiser = await t.signIn(scene.organiser);
  at = { params: { event: scene.event.slug } };
});

const letter = (over: Partial<letters.FreeLetter> = {}): letters.FreeLetter => ({
  letterId: randomUUID(),
  group: 'speakers',
  subject: 'About {{event}}',
  text: 'Dear {{name}},\n\nyou give {{talks}}.\n\n<b>Bold</b> & so on',
  ...over,
});
const fields = (answer: { body: unknown }) =>
  (answer.body as { fields?: Record<string, string> }).fields ?? {};

describe('E4 a letter to a group', () => {
  it('is previewed with a real reader’s data, tried on oneself, and sent once to each', async () => {
    const groups = (await organiser.call(letters.listLetterGroups, at)).body.items;
    expect(groups.find(({ group }) => group === 'speakers')).toEqual({
      group: 'speakers',
      people: 2,
      refused: 0,
    });
    const body = letter();
    const preview = (await organiser.call(letters.previewLetter, { ...at, body })).body;
    expect(preview).toMatchObject({ people: 2, sample: { subject: 'About Conference on Lattices' } });
    expect(preview.sample?.html).toContain('&lt;b&gt;Bold&lt;/b&gt; &amp; so on');
    expect((await organiser.call(letters.testLetter, { ...at, body })).status).toBe(204);
    await t.runJobs();
    expect(t.mail.map(({ to, subject }) => `${to} ${subject}`)).toEqual([
      `${scene.organiser.email} Test: About Conference on Lattices`,
    ]);
    t.mail.length = 0;
    expect((await organiser.call(letters.sendLetter, { ...at, body })).body).toEqual({ people: 2 });
    expect((await organiser.call(letters.sendLetter, { ...at, body })).body).toEqual({ people: 2 });
    await t.runJobs();
    expect(t.mail).toHaveLength(2);
    expect(t.mail.find(({ to }) => to === scene.speaker.email)?.text).toContain(
      `Dear ${scene.speaker.printedName},\n\nyou give “Cubes”.`,
    );
  });

  it('writes to nobody when a field does not exist or has no value for somebody', async () => {
    expect(
      fields(await organiser.call(letters.sendLetter, { ...at, body: letter({ text: 'Dear {{nickname}}' }) }))
        .text,
    ).toBe('There is no field {{nickname}}. Choose one from the list.');
    const committee = await organiser.call(letters.sendLetter, {
      ...at,
      body: letter({ group: 'committee' }),
    });
    expect(committee.status).toBe(422);
    expect(fields(committee).text).toBe(
      `{{talks}} (Titles of their talks) is not known for ${scene.organiser.printedName}.`,
    );
    expect(
      (
        await organiser.call(letters.sendLetter, {
          ...at,
          body: letter({ subject: 'Two\r\nBcc: x@example.org' }),
        })
      ).status,
    ).toBe(422);
    expect(
      (
        await organiser.call(letters.sendLetter, {
          ...at,
          body: letter({ group: 'participants', text: 'Hello' }),
        })
      ).status,
    ).toBe(409);
    expect(await MessageRow.count()).toBe(0);
  });

  it('lets a reader stop such letters with one click, and only asks when the link is merely opened', async () => {
    await organiser.call(letters.sendLetter, { ...at, body: letter() });
    const row = (await MessageRow.findOne({ where: { accountId: scene.speaker.id } })) as MessageRow;
    const path = new URL(row.unsubscribeUrl ?? '').pathname;
    expect((await request(t.app).get(path)).text).toContain('Stop these letters');
    expect((await organiser.call(letters.previewLetter, { ...at, body: letter() })).body.people).toBe(2);
    // RFC 8058 section 3.2: a POST without cookies.
    expect((await request(t.app).post(path).type('form').send('List-Unsubscribe=One-Click')).status).toBe(
      200,
    );
    expect((await request(t.app).post(path)).status).toBe(200);
    expect((await request(t.app).post(`/unsubscribe/${'x'.repeat(43)}`)).status).toBe(404);
    const groups = (await organiser.call(letters.listLetterGroups, at)).body.items;
    expect(groups.find(({ group }) => group === 'speakers')).toEqual({
      group: 'speakers',
      people: 1,
      refused: 1,
    });
    expect((await organiser.call(letters.sendLetter, { ...at, body: letter() })).body.people).toBe(1);
  });

  it('is for organisers of the event only', async () => {
    const speaker = await t.signIn(scene.speaker);
    for (const endpoint of [letters.previewLetter, letters.testLetter, letters.sendLetter]) {
      expect((await t.stranger.call(endpoint, { ...at, body: letter() })).status).toBe(401);
      expect((await speaker.call(endpoint, { ...at, body: letter() })).status).toBe(404);
    }
    expect((await speaker.call(letters.listLetterGroups, at)).status).toBe(404);
  });
});

describe('E7 the history', () => {
  it('shows what each person was sent, finds, and hides the secrets of links', async () => {
    await organiser.call(letters.sendLetter, {
      ...at,
      body: letter({ text: `Open http://x.example/verify/${'s'.repeat(43)} {{name}}` }),
    });
    await t.runJobs();
    const all = (await organiser.call(contract.listEventMessages, { ...at })).body;
    expect(all.items.map(({ state }) => state)).toEqual(['sent', 'sent']);
    const mine = (
      await organiser.call(contract.listEventMessages, { ...at, query: { account: scene.speaker.id } })
    ).body.items;
    expect(mine.map(({ toAddress }) => toAddress)).toEqual([scene.speaker.email]);
    expect(
      (await organiser.call(contract.listEventMessages, { ...at, query: { q: '%' } })).body.items,
    ).toHaveLength(0);
    expect(
      (await organiser.call(contract.listEventMessages, { ...at, query: { q: 'ABOUT conf' } })).body.items,
    ).toHaveLength(2);
    const one = await organiser.call(contract.readEventMessage, {
      params: { ...at.params, message: mine[0]?.id ?? '' },
    });
    expect(one.body.text).toContain('verify/…');
    expect(one.body.text).not.toContain('sss');
    const first = (await organiser.call(contract.listEventMessages, { ...at, query: { limit: 1 } })).body;
    const rest = (
      await organiser.call(contract.listEventMessages, {
        ...at,
        query: { limit: 1, cursor: first.next ?? '' },
      })
    ).body;
    expect([...first.items, ...rest.items].map(({ id }) => id)).toEqual(all.items.map(({ id }) => id));
    expect(rest.next).toBeNull();
  });

  it('sends a failed message again for its event only', async () => {
    await organiser.call(letters.sendLetter, { ...at, body: letter() });
    const row = (await MessageRow.findOne()) as MessageRow;
    const message = { params: { ...at.params, message: row.id } };
    expect((await organiser.call(contract.retryEventMessage, message)).status).toBe(409);
    await transaction(() => row.update({ state: 'failed', lastError: '550 no such mailbox here' }));
    const listed = (await organiser.call(contract.listEventMessages, { ...at, query: { state: 'failed' } }))
      .body.items;
    expect(listed).toMatchObject([
      { id: row.id, lastError: '550 no such mailbox here', can: { retry: true } },
    ]);
    const other = await buildProgramme();
    const stranger = await t.signIn(other.organiser);
    expect(
      (
        await stranger.call(contract.retryEventMessage, {
          params: { event: other.event.slug, message: row.id },
        })
      ).status,
    ).toBe(404);
    expect((await organiser.call(contract.retryMessage, { params: { message: row.id } })).status).toBe(403);
    expect((await organiser.call(contract.retryEventMessage, message)).status).toBe(204);
    await t.runJobs();
    expect((await MessageRow.findByPk(row.id))?.state).toBe('sent');
    const office = await t.signIn(await buildAccount({}, [administrator]));
    expect((await office.call(contract.listAllMessages)).body.items).toHaveLength(2);
    expect((await office.call(contract.readAnyMessage, { params: { message: row.id } })).body.id).toBe(
      row.id,
    );
    expect((await organiser.call(contract.listAllMessages)).status).toBe(403);
  });
});
