import ICAL from 'ical.js';
import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/messages/messages.contract';
import { recordReply } from '../../../server/features/messages/messages-invitations.service';
import { placeTalk, publishRevision } from '../../../server/features/programme/programme.service';
import { changeDraft } from '../../../server/features/programme/programme-draft.service';
import { systemActor } from '../../../server/features/accounts/accounts.service';
import { withdrawTalk } from '../../../server/features/talks/talks.service';
import { buildAccount } from '../../support/build';
import { buildProgramme, buildTalk } from '../../support/build-programme';
import { startTestApp, type CapturedMail, type Client, type TestApp } from '../../support/server';

let t: TestApp;
let scene: Awaited<ReturnType<typeof buildProgramme>>;
let organiser: Client;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  scene = await buildProgramme();
  organiser = await t.signIn(scene.organiser);
});

const day = '2027-07-05';
const place = (talkId: string, startMinute: number, roomId = scene.hall.id) =>
  placeTalk(systemActor, scene.event.slug, { talkId, roomId, day, startMinute });
async function publish(): Promise<CapturedMail[]> {
  await publishRevision(systemActor, scene.event.slug, { withClashes: true });
  const before = t.mail.length;
  await t.runJobs();
  return t.mail.slice(before);
}
function eventIn(mail: CapturedMail | undefined) {
  const calendar = new ICAL.Component(ICAL.parse(mail?.calendar?.content ?? '') as never);
  const event = calendar.getFirstSubcomponent('vevent') as ICAL.Component;
  const get = (name: string) => String(event.getFirstPropertyValue(name));
  return {
    method: String(calendar.getFirstPropertyValue('method')),
    uid: get('uid'),
    sequence: Number(get('sequence')),
    start: (event.getFirstPropertyValue('dtstart') as ICAL.Time).toJSDate().toISOString(),
    location: get('location'),
    status: get('status'),
    attendees: event.getAllProperties('attendee').map((one) => String(one.getFirstValue()).toLowerCase()),
  };
}
const short = (mails: CapturedMail[]) =>
  mails.map((mail) => `${mail.calendar?.method} ${eventIn(mail).sequence} ${mail.to}`).sort();
const answerToken = (mail: CapturedMail | undefined) =>
  /calendar-answer\/([\w-]+)/.exec(mail?.text ?? '')?.[1] ?? '';

describe('E1 publishing', () => {
  it('sends each person one REQUEST for each talk, then exactly what each change calls for', async () => {
    const chair = await buildAccount();
    const third = await buildTalk(scene.event.id, { title: 'Chaired', chair });
    const speakerOf = (talk: { people: { accountId: string; part: string }[] }) =>
      talk.people.find(({ part }) => part === 'speaker')?.accountId;
    await place(scene.first.id, 540);
    await place(third.id, 630);
    const first = await publish();
    expect(short(first)).toHaveLength(3);
    expect(first.every((mail) => mail.calendar?.method === 'REQUEST' && eventIn(mail).sequence === 0)).toBe(
      true,
    );
    const mine = eventIn(first.find((mail) => mail.to === scene.speaker.email));
    // 9:00 in Copenhagen in July is 7:00 UTC.
    expect(mine).toMatchObject({
      start: '2027-07-05T07:00:00.000Z',
      location: 'Great Hall, Lakeside House, Tarnholt',
      status: 'CONFIRMED',
      attendees: [`mailto:${scene.speaker.email}`],
    });
    expect(new Set(first.map((mail) => eventIn(mail).uid)).size).toBe(3);
    expect(first.map((mail) => mail.to)).toContain(chair.email);
    expect(speakerOf(third)).toBeDefined();

    await t.runJobs();
    expect(t.mail).toHaveLength(first.length);

    await place(scene.first.id, 660);
    const moved = await publish();
    expect(short(moved)).toEqual([`REQUEST 1 ${scene.speaker.email}`]);
    expect(eventIn(moved[0])).toMatchObject({ uid: mine.uid, start: '2027-07-05T09:00:00.000Z' });

    await place(scene.first.id, 660, scene.ivar.id);
    expect(short(await publish())).toEqual([`REQUEST 2 ${scene.speaker.email}`]);

    await changeDraft(systemActor, scene.event.slug, [{ talkId: scene.first.id, to: null }]);
    const gone = await publish();
    expect(short(gone)).toEqual([`CANCEL 3 ${scene.speaker.email}`]);
    expect(eventIn(gone[0])).toMatchObject({ uid: mine.uid, status: 'CANCELLED', method: 'CANCEL' });
  });

  it('cancels when a talk is withdrawn, without a new revision', async () => {
    await place(scene.first.id, 540);
    await publish();
    t.mail.length = 0;
    await withdrawTalk(systemActor, scene.event.id, scene.first.id, undefined, 'ill');
    await t.runJobs();
    expect(short(t.mail.filter((mail) => mail.calendar))).toEqual([`CANCEL 1 ${scene.speaker.email}`]);
  });
});

describe('E2 answers', () => {
  it('takes an answer by the link of the letter, shows it to the organiser, and asks anew after a move', async () => {
    await place(scene.first.id, 540);
    const [mail] = await publish();
    const at = { params: { token: answerToken(mail) } };
    expect((await t.stranger.call(contract.readInvitationAnswer, at)).body).toMatchObject({
      talkTitle: 'Cubes',
      answer: null,
      cancelled: false,
    });
    expect(
      (await t.stranger.call(contract.answerInvitation, { ...at, body: { answer: 'MAYBE' } })).status,
    ).toBe(422);
    expect(
      (await t.stranger.call(contract.answerInvitation, { ...at, body: { answer: 'TENTATIVE' } })).body
        .answer,
    ).toBe('TENTATIVE');
    const seen = () =>
      organiser
        .call(contract.talkAnswers, { params: { event: scene.event.slug } })
        .then(({ body }) => body.items);
    expect(await seen()).toMatchObject([
      {
        talkId: scene.first.id,
        accountId: scene.speaker.id,
        talkTitle: 'Cubes',
        answer: 'TENTATIVE',
        sequence: 0,
      },
    ]);
    await place(scene.first.id, 660);
    await publish();
    expect(await seen()).toMatchObject([{ answer: null, sequence: 1 }]);
    await changeDraft(systemActor, scene.event.slug, [{ talkId: scene.first.id, to: null }]);
    await publish();
    expect(
      (await t.stranger.call(contract.answerInvitation, { ...at, body: { answer: 'ACCEPTED' } })).status,
    ).toBe(409);
    expect(
      (await t.stranger.call(contract.readInvitationAnswer, { params: { token: 'x'.repeat(43) } })).status,
    ).toBe(404);
  });

  it('takes a METHOD:REPLY of the person for the present time only', async () => {
    await place(scene.first.id, 540);
    await publish();
    await place(scene.first.id, 660);
    const [mail] = await publish();
    const { uid } = eventIn(mail);
    const now = new Date('2027-01-02T00:00:00Z');
    const reply = {
      uid,
      attendee: scene.speaker.email,
      partstat: 'ACCEPTED',
      sequence: 1,
      stamp: new Date('2027-01-01T00:00:00Z'),
    };
    const answer = async () =>
      (await organiser.call(contract.talkAnswers, { params: { event: scene.event.slug } })).body.items[0]
        ?.answer;
    expect(await recordReply({ ...reply, sequence: 0 }, now)).toBe(false);
    expect(await recordReply({ ...reply, sequence: 2 }, now)).toBe(false);
    expect(await recordReply({ ...reply, attendee: 'other@example.org' }, now)).toBe(false);
    expect(await recordReply({ ...reply, uid: 'unknown' }, now)).toBe(false);
    expect(await recordReply({ ...reply, partstat: 'DELEGATED' }, now)).toBe(false);
    expect(await answer()).toBeNull();
    expect(await recordReply(reply, now)).toBe(true);
    expect(await answer()).toBe('ACCEPTED');
    expect(
      await recordReply({ ...reply, partstat: 'DECLINED', stamp: new Date('2026-12-31T00:00:00Z') }, now),
      'older than what is known',
    ).toBe(false);
    expect(
      await recordReply({ ...reply, partstat: 'DECLINED', stamp: new Date('2027-01-01T01:00:00Z') }, now),
    ).toBe(true);
    expect(await answer()).toBe('DECLINED');
  });
});

describe('E3 feeds', () => {
  const get = (path: string, etag?: string) =>
    t.stranger
      .get(new URL(path, 'http://x').pathname)
      .set(etag ? { 'If-None-Match': etag } : {})
      .buffer(true)
      .parse((res, done) => {
        let text = '';
        res.setEncoding('utf8');
        res.on('data', (piece: string) => (text += piece));
        res.on('end', () => done(null, text));
      });
  const items = (text: unknown) =>
    new ICAL.Component(ICAL.parse(String(text)) as never)
      .getAllSubcomponents('vevent')
      .map((event) => `${event.getFirstPropertyValue('summary')} ${event.getFirstPropertyValue('status')}`);

  it('tells an event’s and a room’s programme, 304 while nothing changes, and what was cancelled', async () => {
    await place(scene.first.id, 540);
    await place(scene.second.id, 540, scene.ivar.id);
    await publish();
    const address = `/calendars/events/${scene.event.slug}.ics`;
    const first = await get(address);
    expect(first.headers['content-type']).toContain('text/calendar');
    expect(items(first.body)).toEqual(['Cubes CONFIRMED', 'Squares CONFIRMED']);
    expect((await get(address, first.headers.etag)).status).toBe(304);
    expect((await get(address, `"other", W/${first.headers.etag}`)).status).toBe(304);
    expect(
      items((await get(`/calendars/events/${scene.event.slug}/rooms/${scene.ivar.id}.ics`)).body),
    ).toEqual(['Squares CONFIRMED']);
    expect((await get(`/calendars/events/${scene.event.slug}/rooms/nowhere.ics`)).status).toBe(404);
    await changeDraft(systemActor, scene.event.slug, [{ talkId: scene.first.id, to: null }]);
    await publish();
    const second = await get(address, first.headers.etag);
    expect(second.status).toBe(200);
    expect(items(second.body)).toEqual(['Squares CONFIRMED', 'Cubes CANCELLED']);
    const uids = (text: unknown) => new Set(String(text).match(/^UID:.+$/gm));
    expect(uids(second.body)).toEqual(uids(first.body));
    expect((await get('/calendars/events/no-such-event.ics')).status).toBe(404);
  });

  it('gives each person a secret address that ends when it is renewed; no secret is kept', async () => {
    await place(scene.first.id, 540);
    await publish();
    const speaker = await t.signIn(scene.speaker);
    const ask = async (renew: boolean) =>
      (await speaker.call(contract.readMyFeed, { body: { renew } })).body.url;
    const url = await ask(false);
    expect(await ask(false)).toBe(url);
    const mine = await get(url);
    expect(items(mine.body)).toEqual(['Cubes CONFIRMED']);
    expect((await get(url, mine.headers.etag)).status).toBe(304);
    const { CalendarFeedRow } = await import('../../../server/features/messages/messages.model');
    const secret = /calendars\/([\w-]+)\.ics/.exec(url)?.[1] ?? '';
    expect(secret).toHaveLength(43);
    expect(JSON.stringify(await CalendarFeedRow.findAll({ raw: true }))).not.toContain(secret);
    const next = await ask(true);
    expect(next).not.toBe(url);
    expect((await get(url)).status).toBe(404);
    expect((await get(next)).status).toBe(200);
    expect((await t.stranger.call(contract.readMyFeed, { body: {} })).status).toBe(401);
  });
});
