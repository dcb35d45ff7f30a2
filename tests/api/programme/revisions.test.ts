import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '@shared/features/programme/programme.contract';
import { sequelize } from '@server/db/connection';
import { transaction } from '@server/db/transaction';
import { JobRow } from '@server/jobs/job';
import { systemActor } from '@server/features/accounts/accounts.service';
import { changeDraft } from '@server/features/programme/programme-draft.service';
import {
  placeTalks,
  publishedProgramme,
  publishRevision,
  revisionChanges,
} from '@server/features/programme/programme.service';
import { withdrawTalk } from '@server/features/talks/talks.service';
import { startTestApp, type Client, type TestApp } from '../../support/server';
import { buildAccount } from '../../support/build';
import { buildEvent } from '../../support/build-events';
import { buildProgramme, buildTalk } from '../../support/build-programme';

let t: TestApp;
let given: Awaited<ReturnType<typeof buildProgramme>>;
let client: Client;

beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  given = await buildProgramme();
  client = await t.signIn(given.organiser);
});

const params = () => ({ event: given.event.slug });
const place = (talkId: string, startMinute: number, roomId = given.hall.id, day = '2027-07-05') =>
  placeTalks(systemActor, given.event.slug, [{ talkId, roomId, day, startMinute }]);
const version = async (): Promise<number> =>
  (await client.call(contract.readDraft, { params: params() })).body.version;
const publish = async (body: object = {}, at?: number) =>
  client.call(contract.publishProgramme, { params: params(), version: at ?? (await version()), body });

describe('publishing', () => {
  it('numbers revisions without gaps and announces each', async () => {
    await place(given.first.id, 540);
    const one = await publish({ note: 'First' });
    expect(one).toMatchObject({
      status: 200,
      body: { number: 1, talks: 1, note: 'First', byName: given.organiser.printedName },
    });
    await place(given.first.id, 600);
    expect((await publish()).body.number).toBe(2);
    const facts = await JobRow.findAll({ where: { name: 'fact:revisionPublished' }, order: ['id'] });
    expect(facts.map((job) => job.payload)).toEqual([
      { eventId: given.event.id, number: 1 },
      { eventId: given.event.id, number: 2 },
    ]);
    const list = await client.call(contract.listRevisions, { params: params() });
    expect(list.body.items.map((revision) => revision.number)).toEqual([2, 1]);
  });

  it('refuses when nothing has changed', async () => {
    await place(given.first.id, 540);
    await publish();
    const again = await publish();
    expect(again).toMatchObject({ status: 409, body: { code: 'programme.nothing_new' } });
    expect(await JobRow.count({ where: { name: 'fact:revisionPublished' } })).toBe(1);
  });

  it('refuses an empty first revision, a stale version, and clashes that were not accepted', async () => {
    expect((await publish()).body).toMatchObject({ code: 'programme.nothing_placed' });
    await place(given.first.id, 540);
    expect((await publish({}, 0)).status).toBe(412);
    await place(given.second.id, 570);
    expect(await publish()).toMatchObject({ status: 409, body: { code: 'programme.clashes' } });
    expect((await publish({ withClashes: true })).status).toBe(200);
  });

  it('is for organisers of this event', async () => {
    await place(given.first.id, 540);
    const at = await version();
    const input = { params: params(), version: at, body: {} };
    expect((await t.stranger.call(contract.publishProgramme, input)).status).toBe(401);
    const reviewer = await t.signIn(
      await buildAccount({}, [{ role: 'reviewer', scope: 'event', scopeId: given.event.id }]),
    );
    expect((await reviewer.call(contract.publishProgramme, input)).status).toBe(403);
    const other = await t.signIn((await buildProgramme()).organiser);
    expect((await other.call(contract.publishProgramme, input)).status).toBe(404);
    expect((await other.call(contract.listRevisions, { params: params() })).status).toBe(404);
  });

  it('is never changed afterwards, nor numbered with a gap', async () => {
    await place(given.first.id, 540);
    await publish();
    const run = (sql: string) => transaction(() => sequelize.query(sql));
    const refused = (sentence: string) => ({
      parent: { message: expect.stringContaining(sentence) as string },
    });
    for (const sql of [
      'UPDATE revision_placements SET start_minute = 0',
      'DELETE FROM revision_placements',
      `UPDATE programme_revisions SET note = 'x'`,
      'DELETE FROM programme_revisions',
    ]) {
      await expect(run(sql)).rejects.toMatchObject(refused('never changed'));
    }
    const gap = `INSERT INTO programme_revisions SELECT 'x', event_id, 3, published_at, published_by, '', created_at, updated_at FROM programme_revisions`;
    await expect(run(gap)).rejects.toMatchObject(refused('without gaps'));
  });
});

describe('comparing', () => {
  it('tells what moved and whom it affects', async () => {
    const chair = await buildAccount({ familyName: 'Carvalhal' });
    const third = await buildTalk(given.event.id, { title: 'Knots', chair });
    await placeTalks(systemActor, given.event.slug, [
      { talkId: given.first.id, roomId: given.hall.id, day: '2027-07-05', startMinute: 540 },
      { talkId: given.second.id, roomId: given.ivar.id, day: '2027-07-05', startMinute: 540 },
    ]);
    await publish();
    await changeDraft(systemActor, given.event.slug, [
      {
        talkId: given.first.id,
        to: { roomId: given.hall.id, day: '2027-07-06', startMinute: 600, minutes: 60 },
      },
      { talkId: given.second.id, to: null },
      { talkId: third.id, to: { roomId: given.ivar.id, day: '2027-07-05', startMinute: 840, minutes: 60 } },
    ]);
    const draft = await client.call(contract.compareDraft, { params: params() });
    expect(draft.body).toMatchObject({ from: 1, to: null, people: 4 });
    const what = (changes: contract.ProgrammeChange[]) =>
      changes.map((change) => [change.title, change.what]);
    const wanted = [
      ['Squares', 'taken_off'],
      ['Knots', 'placed'],
      ['Cubes', 'time'],
    ];
    expect(what(draft.body.changes)).toEqual(wanted);
    expect(draft.body.changes[1]?.affected.map((person) => person.part).sort()).toEqual(['chair', 'speaker']);
    expect(draft.body.changes[2]?.before).toMatchObject({
      day: '2027-07-05',
      startMinute: 540,
      roomName: 'Great Hall',
    });
    await publish();
    const between = await client.call(contract.compareRevisions, { params: { ...params(), number: 2 } });
    expect(what(between.body.changes)).toEqual(wanted);
    expect(await revisionChanges(given.event.id, 1)).toHaveLength(2);
    const againstOne = await client.call(contract.compareDraft, { params: params(), query: { from: 1 } });
    expect(what(againstOne.body.changes)).toEqual(wanted);
    expect((await client.call(contract.compareDraft, { params: params(), query: { from: 7 } })).status).toBe(
      404,
    );
    const fromNothing = await client.call(contract.compareRevisions, {
      params: { ...params(), number: 2 },
      query: { from: 0 },
    });
    expect(what(fromNothing.body.changes)).toEqual([
      ['Knots', 'placed'],
      ['Cubes', 'placed'],
    ]);
    expect(
      (await client.call(contract.compareRevisions, { params: { ...params(), number: 9 } })).status,
    ).toBe(404);
  });

  it('keeps an old revision as it was published', async () => {
    await place(given.first.id, 540);
    await publish();
    await place(given.first.id, 600, given.ivar.id);
    await publish();
    const one = await client.call(contract.readRevision, { params: { ...params(), number: 1 } });
    expect(one.body.placements).toMatchObject([{ startMinute: 540, roomName: 'Great Hall', title: 'Cubes' }]);
  });
});

describe('the published programme', () => {
  it('is public, in UTC and the event’s own time, and drops what was withdrawn', async () => {
    const before = await t.stranger.call(contract.readProgramme, { params: params() });
    expect(before.body).toMatchObject({ revision: null, talks: [] });
    await place(given.first.id, 540);
    await place(given.second.id, 600);
    await publish();
    const after = await t.stranger.call(contract.readProgramme, { params: params() });
    expect(contract.publicProgramme.safeParse(after.body).error).toBeUndefined();
    expect(after.body.talks.map((talk) => [talk.title, talk.startsAt, talk.endsAt])).toEqual([
      ['Cubes', '2027-07-05T07:00:00.000Z', '2027-07-05T08:00:00.000Z'],
      ['Squares', '2027-07-05T08:00:00.000Z', '2027-07-05T09:00:00.000Z'],
    ]);
    expect(JSON.stringify(after.body)).not.toContain('@example.org');
    await withdrawTalk(systemActor, given.event.id, given.first.id, undefined, '');
    const later = await t.stranger.call(contract.readProgramme, { params: params() });
    expect(later.body.talks.map((talk) => talk.title)).toEqual(['Squares']);
    expect((await publishedProgramme(given.event.id))?.placements.map((one) => one.title)).toEqual([
      'Squares',
    ]);
  });

  it('does not exist while the event is a draft', async () => {
    const draft = await buildEvent({}, 'draft');
    expect((await t.stranger.call(contract.readProgramme, { params: { event: draft.slug } })).status).toBe(
      404,
    );
  });

  it('tells a speaker where and when', async () => {
    await place(given.first.id, 540);
    await publishRevision(systemActor, given.event.slug, {});
    const mine = await (await t.signIn(given.speaker)).call(contract.readMyProgramme, { params: params() });
    expect(mine.body).toMatchObject({
      revision: 1,
      items: [{ title: 'Cubes', parts: ['speaker'], roomName: 'Great Hall' }],
    });
    const nobody = await (
      await t.signIn(await buildAccount())
    ).call(contract.readMyProgramme, { params: params() });
    expect(nobody.body.items).toEqual([]);
  });
});
