import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/talks/talks.contract';
import * as courses from '../../../shared/features/talks/talks-courses.contract';
import * as invitation from '../../../shared/features/talks/talks-invitation.contract';
import * as stay from '../../../shared/features/talks/talks-stay.contract';
import type { EventDetail } from '../../../shared/features/events/events.contract';
import { buildAccount } from '../../support/build';
import { buildEvent } from '../../support/build-events';
import { clientOf, startTestApp, type Client, type TestApp } from '../../support/server';
import { problemOf } from './build-talk';

let t: TestApp;
let event: EventDetail;
let organiser: Client;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  event = await buildEvent();
  organiser = await t.signIn(
    await buildAccount({ email: 'organiser@example.org' }, [
      { role: 'organiser', scope: 'event', scopeId: event.id },
    ]),
  );
});
const inEvent = () => ({ params: { event: event.slug } });
const lena = { email: 'lena@example.org', givenName: 'Lena', familyName: 'Ørsted', minutes: 50 };

async function invite(over: object = {}): Promise<{ talk: string; token: string }> {
  const { body, status } = await organiser.call(invitation.inviteSpeaker, {
    ...inEvent(),
    body: { ...lena, ...over },
  });
  expect(status, JSON.stringify(body)).toBe(200);
  await t.runJobs();
  return { talk: body.id, token: /speaker-invitation\/([\w-]+)/.exec(t.mail.at(-1)?.text ?? '')?.[1] ?? '' };
}

describe('B5 invitations', () => {
  it.each([
    ['email', { email: 'no address' }],
    ['givenName', { givenName: ' ' }],
    ['familyName', { familyName: 'A\r\nBcc: x@example.org' }],
    ['minutes', { minutes: 7 }],
    ['kind', { kind: 'social' }],
    ['kind', { kind: 'course_lecture' }],
  ])('a wrong %s is refused', async (field, over) => {
    const refused = await organiser.call(invitation.inviteSpeaker, {
      ...inEvent(),
      body: { ...lena, ...over },
    });
    expect(refused.status).toBe(422);
    expect(problemOf(refused).fields).toHaveProperty(field);
    await t.runJobs();
    expect(t.mail).toEqual([]);
  });

  it('is the organiser’s; strangers, others and reviewers are turned away', async () => {
    const reviewer = await t.signIn(
      await buildAccount({}, [{ role: 'reviewer', scope: 'event', scopeId: event.id }]),
    );
    const other = await t.signIn(await buildAccount());
    const statuses = await Promise.all(
      [t.stranger, reviewer, other].map(
        async (client) => (await client.call(invitation.inviteSpeaker, { ...inEvent(), body: lena })).status,
      ),
    );
    expect(statuses).toEqual([401, 403, 404]);
  });

  it('declining needs no password, tells the organisers, and spends the link', async () => {
    const { talk, token } = await invite({ message: 'First.\n\nSecond.' });
    const guest = clientOf(t.app);
    const declined = await guest.call(invitation.answerSpeakerInvitation, {
      params: { token },
      body: { answer: 'declined', note: 'I am on leave.' },
    });
    expect(declined.body).toMatchObject({ answer: 'declined', session: { account: null } });
    expect((await guest.call(invitation.readSpeakerInvitation, { params: { token } })).status).not.toBe(200);
    expect(
      (
        await guest.call(invitation.answerSpeakerInvitation, {
          params: { token },
          body: { answer: 'accepted', password: 'kites above the fjord' },
        })
      ).status,
    ).not.toBe(200);
    expect(
      (await organiser.call(contract.readTalk, { params: { event: event.slug, talk } })).body,
    ).toMatchObject({ state: 'declined', invitation: 'declined', decisionNote: 'I am on leave.' });
    await t.runJobs();
    const letter = t.mail.find((mail) => mail.to === 'organiser@example.org');
    expect(letter?.subject).toBe('Lena Ørsted has declined: Conference on Lattices');
    expect(letter?.text).toContain('I am on leave.');
  });

  it('accepting with an account that has a password opens no session: the link is not a key to it', async () => {
    const account = await buildAccount({ email: 'known@example.org', givenName: 'Ada', familyName: 'Quist' });
    const { talk, token } = await invite({ email: account.email });
    const guest = clientOf(t.app);
    expect((await guest.call(invitation.readSpeakerInvitation, { params: { token } })).body).toMatchObject({
      hasPassword: true,
      name: 'Ada Quist',
    });
    const accepted = await guest.call(invitation.answerSpeakerInvitation, {
      params: { token },
      body: { answer: 'accepted', password: 'another one entirely' },
    });
    expect(accepted.body).toMatchObject({ answer: 'accepted', session: { account: null } });
    expect((await guest.call(contract.readTalk, { params: { event: event.slug, talk } })).status).toBe(401);
    const ada = await t.signIn(account);
    expect((await ada.call(contract.readTalk, { params: { event: event.slug, talk } })).body).toMatchObject({
      state: 'accepted',
      can: { write: true },
    });
  });

  it('a made-up link is not found', async () => {
    const answer = await t.stranger.call(invitation.readSpeakerInvitation, {
      params: { token: 'x'.repeat(43) },
    });
    expect([404, 410]).toContain(answer.status);
  });
});

describe('travel window', () => {
  it('refuses what can’t be and keeps what another window saved', async () => {
    const { token } = await invite();
    const lenaClient = clientOf(t.app);
    await lenaClient.call(invitation.answerSpeakerInvitation, {
      params: { token },
      body: { answer: 'accepted', password: 'kites above the fjord' },
    });
    const { body } = await lenaClient.call(stay.readMyPresence, inEvent());
    const times = { arrivesAt: '2027-07-05T08:00', leavesAt: '2027-07-06T18:00', blocked: [], wishes: '' };
    const save = (over: object, version = body.version) =>
      lenaClient.call(stay.saveMyPresence, { ...inEvent(), version, body: { ...times, ...over } });
    expect(problemOf(await save({ leavesAt: '2027-07-04T18:00' })).fields).toEqual({
      leavesAt: 'You leave before you arrive.',
    });
    expect(problemOf(await save({ arrivesAt: '2027-02-30T08:00' })).fields).toHaveProperty('arrivesAt');
    expect((await save({})).body).toMatchObject(times);
    expect((await save({ wishes: 'Mornings' })).status).toBe(412);
  });
});

describe('C4 courses', () => {
  const lecturer = {
    email: 'prof@example.org',
    givenName: 'Ada',
    familyName: 'Quist',
    part: 'speaker' as const,
  };
  const tutor = { email: 'tutor@example.org', givenName: 'Ben', familyName: 'Osei', part: 'tutor' as const };
  const body = {
    letter: 'A',
    title: 'Tilings',
    shortTitle: 'Tilings',
    minNights: 1,
    maxPerDay: 1,
    lectures: 2,
    minutes: 50,
    exerciseMinutes: 90,
    lecturers: [lecturer],
    tutors: [tutor],
  };

  it('come with lectures and exercise sessions in order, each with its people', async () => {
    const course = await organiser.call(courses.createCourse, { ...inEvent(), body });
    const rows = (await organiser.call(contract.listTalks, inEvent())).body.items;
    expect(
      rows.map((row) => [row.label, row.speakers.map((person) => person.printedName)]).reverse(),
    ).toEqual([
      ['Course A 1', ['Ada Quist']],
      ['Exercises A 1', ['Ben Osei']],
      ['Course A 2', ['Ada Quist']],
      ['Exercises A 2', ['Ben Osei']],
    ]);
    const again = await organiser.call(courses.createCourse, { ...inEvent(), body });
    expect(problemOf(again).fields).toEqual({ letter: 'Course A exists.' });
    const at = {
      params: { event: event.slug, course: course.body.id },
      body: { letter: 'B', title: 'Tilings', shortTitle: 'Tilings', minNights: 2, maxPerDay: 1 },
    };
    expect(
      (await organiser.call(courses.updateCourse, { ...at, version: course.body.version })).body,
    ).toMatchObject({ letter: 'B', minNights: 2 });
    expect((await organiser.call(courses.updateCourse, { ...at, version: course.body.version })).status).toBe(
      412,
    );
  });

  it.each([
    ['letter', { letter: 'AB' }],
    ['shortTitle', { shortTitle: 'more than eighteen letters' }],
    ['lecturers', { lecturers: [] }],
    ['lectures', { lectures: 0 }],
  ])('a wrong %s is refused', async (field, over) => {
    const refused = await organiser.call(courses.createCourse, { ...inEvent(), body: { ...body, ...over } });
    expect(refused.status).toBe(422);
    expect(problemOf(refused).fields).toHaveProperty(field);
    expect((await organiser.call(courses.listCourses, inEvent())).body.items).toEqual([]);
  });

  it('others change no course; prerequisites of elsewhere are refused', async () => {
    const reviewer = await t.signIn(
      await buildAccount({}, [{ role: 'reviewer', scope: 'event', scopeId: event.id }]),
    );
    expect((await reviewer.call(courses.createCourse, { ...inEvent(), body })).status).toBe(403);
    const course = await organiser.call(courses.createCourse, { ...inEvent(), body });
    const elsewhere = await buildEvent();
    const pairs = [
      { before: course.body.lectures[0]?.talkId ?? '', after: course.body.lectures[1]?.talkId ?? '' },
    ];
    expect(
      (await reviewer.call(courses.replacePrerequisites, { ...inEvent(), body: { pairs } })).status,
    ).toBe(403);
    expect(
      (await organiser.call(courses.replacePrerequisites, { ...inEvent(), body: { pairs } })).body,
    ).toEqual({ pairs });
    expect((await organiser.call(courses.listCourses, inEvent())).body.prerequisites).toEqual(pairs);
    const there = await t.signIn(
      await buildAccount({}, [{ role: 'organiser', scope: 'event', scopeId: elsewhere.id }]),
    );
    expect(
      (await there.call(courses.replacePrerequisites, { params: { event: elsewhere.slug }, body: { pairs } }))
        .status,
    ).toBe(422);
  });
});
