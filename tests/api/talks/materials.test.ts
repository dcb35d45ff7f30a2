import { createHash } from 'node:crypto';
import { readdirSync } from 'node:fs';
import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/talks/talks.contract';
import * as materials from '../../../shared/features/talks/talks-materials.contract';
import type { EventDetail } from '../../../shared/features/events/events.contract';
import { addDays } from '../../../shared/lib/time';
import { env } from '../../../server/env';
import { knowParticipantsBy } from '../../../server/features/talks/talks-materials.service';
import { buildAccount } from '../../support/build';
import { buildEvent } from '../../support/build-events';
import { startTestApp, type Client, type TestApp } from '../../support/server';
import { pdf, problemOf, submitted } from './build-talk';

let t: TestApp;
let event: EventDetail;
let organiser: Client;
let speaker: Client;
let talk: string;
let version: number;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  event = await buildEvent();
  organiser = await t.signIn(
    await buildAccount({}, [{ role: 'organiser', scope: 'event', scopeId: event.id }]),
  );
  ({ speaker, talk, version } = await submitted(t, event.slug));
});

const ofTalk = () => ({ params: { event: event.slug, talk } });
const upload = (client: Client, content: Buffer, name: string, kind: 'slides' | 'notes' = 'slides') =>
  client.call(materials.uploadMaterial, {
    ...ofTalk(),
    body: { kind },
    file: { field: 'file', name, content },
  });
const address = (file: string) => `/api/events/${event.slug}/materials/${file}`;
const PNG = Buffer.from(
  'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg==',
  'base64',
);

describe('C3 what is taken', () => {
  it.each([
    ['text that calls itself PDF', Buffer.from('%PD-not really'), 'a.pdf', 415],
    ['a page that calls itself PDF', Buffer.from('<!doctype html><script>alert(1)</script>'), 'a.pdf', 415],
    ['a PDF that calls itself PNG', pdf, 'a.png', 415],
    ['a program', Buffer.from('MZ\x90\x00'.padEnd(200, '\0'), 'latin1'), 'a.pdf', 415],
    ['a picture as slides', PNG, 'a.png', 415],
    ['nothing', Buffer.alloc(0), 'a.pdf', 415],
  ])('%s is refused and kept nowhere', async (_name, content, name, status) => {
    const before = kept();
    const refused = await upload(speaker, content, name);
    expect([refused.status, problemOf(refused).fields]).toEqual([
      status,
      { file: expect.any(String) as string },
    ]);
    expect(kept()).toBe(before);
  });

  it('a picture is taken as notes, without the folders that its name carries', async () => {
    const taken = await upload(speaker, PNG, '..\\..\\etc\\sketch.png', 'notes');
    expect(taken.body.materials).toMatchObject([
      {
        kind: 'notes',
        visibility: 'participants',
        versions: [
          {
            fileName: 'sketch.png',
            type: 'image/png',
            sha256: createHash('sha256').update(PNG).digest('hex'),
          },
        ],
      },
    ]);
  });

  it('more than the limit is refused while it arrives', async () => {
    const before = kept();
    const refused = await upload(
      speaker,
      Buffer.concat([pdf, Buffer.alloc(materials.MAX_UPLOAD)]),
      'big.pdf',
    );
    expect(refused.status).toBe(413);
    expect(kept()).toBe(before);
  });

  it('without a file it says so; to another person’s talk it is not found; nobody gets 401', async () => {
    const empty = await speaker.call(materials.uploadMaterial, { ...ofTalk(), body: { kind: 'slides' } });
    expect(problemOf(empty).fields).toEqual({ file: 'Choose a file.' });
    const other = await t.signIn(await buildAccount());
    const before = kept();
    expect((await upload(other, pdf, 'a.pdf')).status).toBe(404);
    expect((await upload(t.stranger, pdf, 'a.pdf')).status).toBe(401);
    expect(kept()).toBe(before);
  });
});

const kept = (): number => {
  try {
    return readdirSync(env.UPLOADS_DIR).length;
  } catch {
    return 0;
  }
};

describe('C3 versions', () => {
  it('stay as they were, newest first; each can still be fetched byte by byte', async () => {
    await upload(speaker, pdf, 'a.pdf');
    const second = Buffer.concat([pdf, Buffer.from('% more')]);
    const { body } = await upload(speaker, second, 'b.pdf');
    const [b, a] = body.materials[0]?.versions ?? [];
    expect([b?.number, b?.fileName, a?.number, a?.fileName]).toEqual([2, 'b.pdf', 1, 'a.pdf']);
    const old = await speaker
      .get(address(a?.id ?? ''))
      .buffer()
      .parse(bytes);
    expect(
      createHash('sha256')
        .update(old.body as Buffer)
        .digest('hex'),
    ).toBe(a?.sha256);
    expect(old.headers).toMatchObject({
      'content-type': 'application/pdf',
      'x-content-type-options': 'nosniff',
    });
    expect(old.headers['content-security-policy']).toContain('sandbox');
    const { MaterialVersionRow } = await import('../../../server/features/talks/talks.model');
    const { transaction } = await import('../../../server/db/transaction');
    await expect(
      transaction(() => MaterialVersionRow.update({ fileName: 'c.pdf' }, { where: { id: a?.id } })),
    ).rejects.toMatchObject({ parent: { message: expect.stringContaining('never overwritten') as string } });
  });
});

const bytes = (answer: unknown, done: (error: Error | null, body: Buffer) => void) => {
  const res = answer as NodeJS.ReadableStream;
  const parts: Buffer[] = [];
  res.on('data', (part: Buffer) => parts.push(part));
  res.on('end', () => done(null, Buffer.concat(parts)));
};

describe('C3 who may see it', () => {
  const tomorrow = addDays(new Date().toISOString().slice(0, 10), 2);
  const cases: [
    talk: 'accepted' | 'submitted',
    visibility: 'organisers' | 'participants' | 'public',
    from: string | null,
    seen: string[],
  ][] = [
    ['accepted', 'organisers', null, ['organiser', 'speaker']],
    ['accepted', 'participants', null, ['organiser', 'speaker', 'participant']],
    ['accepted', 'participants', tomorrow, ['organiser', 'speaker']],
    ['accepted', 'public', null, ['organiser', 'speaker', 'participant', 'other', 'stranger']],
    ['accepted', 'public', tomorrow, ['organiser', 'speaker']],
    ['submitted', 'public', null, ['organiser', 'speaker']],
  ];
  it.each(cases)('%s talk, %s, from %s: %j', async (state, visibility, visibleFrom, seen) => {
    if (state === 'accepted')
      await organiser.call(contract.decideTalk, { ...ofTalk(), version, body: { decision: 'accepted' } });
    const { body } = await upload(speaker, pdf, 'a.pdf');
    const material = body.materials[0] as contract.Material;
    const set = await speaker.call(materials.setMaterialAccess, {
      params: { event: event.slug, talk, material: material.id },
      version: material.version,
      body: { visibility, visibleFrom, licence: 'cc_by' },
    });
    expect(set.status, JSON.stringify(set.body)).toBe(200);
    const account = await buildAccount();
    knowParticipantsBy(async (_event, id) => id === account.id);
    const readers = {
      organiser,
      speaker,
      participant: await t.signIn(account),
      other: await t.signIn(await buildAccount()),
      stranger: t.stranger,
    };
    const statuses = await Promise.all(
      Object.entries(readers).map(async ([name, client]) => [
        name,
        (await client.get(address(material.versions[0]?.id ?? ''))).status,
      ]),
    );
    expect(Object.fromEntries(statuses)).toEqual(
      Object.fromEntries(Object.keys(readers).map((name) => [name, seen.includes(name) ? 200 : 404])),
    );
    const listed = await Promise.all(
      Object.entries(readers).map(async ([name, client]) => {
        const { items } = (await client.call(materials.listMaterials, { params: { event: event.slug } }))
          .body;
        return items.some((item) => item.file === material.versions[0]?.id) ? [name] : [];
      }),
    );
    expect(listed.flat()).toEqual(state === 'accepted' ? seen : []);
  });

  it('of a draft event nothing is told', async () => {
    const draft = await buildEvent({}, 'draft');
    const at = { params: { event: draft.slug } };
    expect((await t.stranger.call(materials.listMaterials, at)).status).toBe(404);
    expect((await speaker.call(materials.listMaterials, at)).status).toBe(404);
  });

  it('is set by the talk’s people on the version they saw', async () => {
    const { body } = await upload(speaker, pdf, 'a.pdf');
    const material = body.materials[0] as contract.Material;
    const at = {
      params: { event: event.slug, talk, material: material.id },
      body: { visibility: 'public' as const, visibleFrom: null, licence: 'cc_by' as const },
    };
    const other = await t.signIn(await buildAccount());
    expect((await other.call(materials.setMaterialAccess, { ...at, version: material.version })).status).toBe(
      404,
    );
    expect((await speaker.call(materials.setMaterialAccess, at)).status).toBe(428);
    expect(
      (await speaker.call(materials.setMaterialAccess, { ...at, version: material.version })).status,
    ).toBe(200);
    expect(
      (await speaker.call(materials.setMaterialAccess, { ...at, version: material.version })).status,
    ).toBe(412);
    expect(
      (
        await speaker.call(materials.setMaterialAccess, {
          ...at,
          version: material.version + 1,
          body: { ...at.body, licence: 'mine' },
        })
      ).status,
    ).toBe(422);
  });
});

describe('recording', () => {
  it('is agreed to by the speaker only, can be withdrawn, and the history stays', async () => {
    const set = (client: Client, consent: boolean) =>
      client.call(materials.setRecordingConsent, { ...ofTalk(), body: { consent } });
    expect((await set(organiser, true)).status).toBe(403);
    expect((await set(speaker, true)).body.recordingConsent).toBe(true);
    expect((await set(speaker, true)).body.recordingConsent).toBe(true);
    expect((await set(speaker, false)).body.recordingConsent).toBe(false);
    expect((await set(speaker, true)).body.recordingConsent).toBe(true);
    const { ConsentRow } = await import('../../../server/features/talks/talks.model');
    const rows = await ConsentRow.findAll({ order: ['id'] });
    expect(rows.map((row) => row.withdrawnAt !== null)).toEqual([true, false]);
  });
});
