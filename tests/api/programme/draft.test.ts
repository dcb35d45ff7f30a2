import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '@shared/features/programme/programme.contract';
import { AuditRow } from '@server/features/accounts/accounts.model';
import { systemActor } from '@server/features/accounts/accounts.service';
import { replaceRooms } from '@server/features/events/events-frame.service';
import { placeTalk } from '@server/features/programme/programme.service';
import { withdrawTalk } from '@server/features/talks/talks.service';
import { startTestApp, type Client, type TestApp } from '../../support/server';
import { buildAccount } from '../../support/build';
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

const spot = (roomId: string, startMinute = 540, day = '2027-07-05', minutes = 60) => ({
  roomId,
  day,
  startMinute,
  minutes,
});
const params = () => ({ event: given.event.slug });
const change = (changes: unknown[], version = 0, who: Client = client) =>
  who.call(contract.changeDraft, { params: params(), version, body: { changes } });

describe('placing talks', () => {
  it('places a talk, brings the next version and writes the audit trail', async () => {
    const answer = await change([{ talkId: given.first.id, to: spot(given.hall.id) }]);
    expect(answer.status).toBe(200);
    expect(answer.body.version).toBe(1);
    expect(answer.headers.etag).toBe('"v1"');
    expect(answer.body.placements).toEqual([
      { talkId: given.first.id, ...spot(given.hall.id), fixed: false },
    ]);
    const draft = await client.call(contract.readDraft, { params: params() });
    expect(draft.body.placements).toEqual(answer.body.placements);
    expect(draft.body.version).toBe(1);
    expect(contract.draftSchema.safeParse(draft.body).error).toBeUndefined();
    expect(
      await AuditRow.count({ where: { action: 'programme.draft_changed', eventId: given.event.id } }),
    ).toBe(1);
  });

  it('allows a clash and tells it', async () => {
    const answer = await change([
      { talkId: given.first.id, to: spot(given.hall.id) },
      { talkId: given.second.id, to: spot(given.hall.id, 570) },
    ]);
    expect(answer.status).toBe(200);
    expect(answer.body.clashes.map((clash) => clash.rule)).toEqual(['roomOnce']);
    expect(answer.body.clashes[0]?.sentence).toContain('Great Hall is taken twice. The talk by Hằng');
  });

  it('knows stays, capacities and blocks', async () => {
    const crowd = await buildTalk(given.event.id, { expectedAudience: 80 });
    const answer = await change([{ talkId: crowd.id, to: spot(given.ivar.id, 690) }]);
    expect(answer.body.clashes.map((clash) => clash.rule).sort()).toEqual([
      `capacity:${crowd.id}`,
      'insideBlock',
    ]);
  });

  it('takes a talk off again, and changes its length', async () => {
    await change([{ talkId: given.first.id, to: spot(given.hall.id, 540, '2027-07-06', 90) }]);
    const longer = await client.call(contract.readDraft, { params: params() });
    expect(longer.body.placements[0]?.minutes).toBe(90);
    const off = await change([{ talkId: given.first.id, to: null }], 1);
    expect(off.body.placements).toEqual([]);
  });

  it('refuses a stale version and changes nothing', async () => {
    await change([{ talkId: given.first.id, to: spot(given.hall.id) }]);
    const stale = await change([{ talkId: given.first.id, to: null }], 0);
    expect(stale.status).toBe(412);
    expect((await client.call(contract.readDraft, { params: params() })).body.placements).toHaveLength(1);
  });

  it('needs a version', async () => {
    const answer = await client.call(contract.changeDraft, {
      params: params(),
      body: { changes: [{ talkId: given.first.id, to: null }] },
    });
    expect(answer.status).toBe(428);
  });

  it('applies all changes or none', async () => {
    const answer = await change([
      { talkId: given.first.id, to: spot(given.hall.id) },
      { talkId: given.second.id, to: spot(given.second.id) },
    ]);
    expect(answer.status).toBe(422);
    const draft = await client.call(contract.readDraft, { params: params() });
    expect(draft.body.placements).toEqual([]);
    expect(draft.body.version).toBe(0);
  });

  it.each([
    [
      'a room of another event',
      async () => ({ talkId: given.first.id, to: spot((await buildProgramme()).hall.id) }),
      'changes.0.to.roomId',
    ],
    [
      'a talk of another event',
      async () => ({ talkId: (await buildProgramme()).first.id, to: spot(given.hall.id) }),
      'changes.0.talkId',
    ],
    [
      'a day outside the event',
      async () => ({ talkId: given.first.id, to: spot(given.hall.id, 540, '2027-07-08') }),
      'changes.0.to.day',
    ],
    [
      'a talk beyond midnight',
      async () => ({ talkId: given.first.id, to: spot(given.hall.id, 1400) }),
      'changes.0.to.minutes',
    ],
    [
      'a start off the grid',
      async () => ({ talkId: given.first.id, to: spot(given.hall.id, 541) }),
      'changes.0.to.startMinute',
    ],
  ])('refuses %s', async (_what, make, field) => {
    const answer = await change([await make()]);
    expect(answer.status).toBe(422);
    expect(Object.keys((answer.body as unknown as { fields: Record<string, string> }).fields)).toContain(
      field,
    );
  });

  it('refuses a talk twice in one request', async () => {
    const answer = await change([
      { talkId: given.first.id, to: spot(given.hall.id) },
      { talkId: given.first.id, to: null },
    ]);
    expect(answer.status).toBe(422);
  });
});

describe('fixed talks', () => {
  it('stay where they are until they are released', async () => {
    const to = spot(given.hall.id);
    await change([{ talkId: given.first.id, to, fixed: true }]);
    const moved = await change([{ talkId: given.first.id, to: spot(given.ivar.id) }], 1);
    expect(moved.status).toBe(409);
    expect((moved.body as unknown as { code: string }).code).toBe('programme.fixed');
    expect((await change([{ talkId: given.first.id, to: null }], 1)).status).toBe(409);
    expect((await change([{ talkId: given.first.id, to, fixed: false }], 1)).status).toBe(200);
    expect((await change([{ talkId: given.first.id, to: spot(given.ivar.id) }], 2)).status).toBe(200);
  });
});

describe('who may', () => {
  it('lets nobody in without the role', async () => {
    expect((await t.stranger.call(contract.readDraft, { params: params() })).status).toBe(401);
    const desk = await t.signIn(
      await buildAccount({}, [{ role: 'desk', scope: 'event', scopeId: given.event.id }]),
    );
    expect((await desk.call(contract.readDraft, { params: params() })).status).toBe(403);
    expect((await change([{ talkId: given.first.id, to: null }], 0, desk)).status).toBe(403);
  });

  it('hides the event from the organiser of another one', async () => {
    const other = await t.signIn((await buildProgramme()).organiser);
    expect((await other.call(contract.readDraft, { params: params() })).status).toBe(404);
    expect((await change([{ talkId: given.first.id, to: null }], 0, other)).status).toBe(404);
  });
});

describe('what drops out', () => {
  it('a withdrawn talk leaves the draft', async () => {
    await placeTalk(systemActor, given.event.slug, {
      talkId: given.first.id,
      roomId: given.hall.id,
      day: '2027-07-05',
      startMinute: 540,
    });
    await withdrawTalk(systemActor, given.event.id, given.first.id, undefined, '');
    const draft = await client.call(contract.readDraft, { params: params() });
    expect(draft.body.placements).toEqual([]);
    expect(draft.body.cards.map((card) => card.talkId)).toEqual([given.second.id]);
  });

  it('a room with a talk in it can’t be removed', async () => {
    await change([{ talkId: given.first.id, to: spot(given.ivar.id) }]);
    const { hall, event } = given;
    const rooms = [
      {
        id: hall.id,
        name: hall.name,
        shortName: hall.shortName,
        capacity: hall.capacity,
        features: hall.features,
      },
    ];
    await expect(replaceRooms(systemActor, event.slug, event.version, rooms)).rejects.toMatchObject({
      status: 422,
    });
  });
});
