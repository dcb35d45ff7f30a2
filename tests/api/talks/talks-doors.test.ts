import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/talks/talks.contract';
import * as invitation from '../../../shared/features/talks/talks-invitation.contract';
import * as stay from '../../../shared/features/talks/talks-stay.contract';
import type { EventDetail } from '../../../shared/features/events/events.contract';
import { buildAccount } from '../../support/build';
import { buildEvent } from '../../support/build-events';
import { startTestApp, type Client, type TestApp } from '../../support/server';
import { abstract, problemOf, submitted } from './build-talk';

let t: TestApp;
let event: EventDetail;
let organiser: Client;
let reviewer: Client;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  event = await buildEvent();
  const role = (name: 'organiser' | 'reviewer') =>
    buildAccount({}, [{ role: name, scope: 'event', scopeId: event.id }]);
  organiser = await t.signIn(await role('organiser'));
  reviewer = await t.signIn(await role('reviewer'));
});
const inEvent = () => ({ params: { event: event.slug } });
const structure = {
  kind: 'discussion' as const,
  minutes: 60,
  questionMinutes: 0,
  courseId: null,
  number: null,
  exerciseOf: null,
  expectedAudience: null,
};

describe('creating and changing a talk', () => {
  it('is the organiser’s alone', async () => {
    const body = { ...structure, title: 'Open problems', people: [] };
    const created = await organiser.call(contract.createTalk, { ...inEvent(), body });
    expect(created.body).toMatchObject({
      kind: 'discussion',
      state: 'accepted',
      can: { edit: true, decide: false },
    });
    expect((await reviewer.call(contract.createTalk, { ...inEvent(), body })).status).toBe(403);
    expect((await t.stranger.call(contract.createTalk, { ...inEvent(), body })).status).toBe(401);
    const at = {
      params: { event: event.slug, talk: created.body.id },
      body: { ...structure, minutes: 90, people: [] },
    };
    expect((await organiser.call(contract.updateTalk, at)).status).toBe(428);
    const changed = await organiser.call(contract.updateTalk, { ...at, version: created.body.version });
    expect(changed.body).toMatchObject({ minutes: 90 });
    expect((await organiser.call(contract.updateTalk, { ...at, version: created.body.version })).status).toBe(
      412,
    );
    expect((await reviewer.call(contract.updateTalk, { ...at, version: changed.body.version })).status).toBe(
      403,
    );
  });

  it.each([
    [
      'questions that take the whole time',
      { kind: 'invited', minutes: 30, questionMinutes: 30 },
      'questionMinutes',
    ],
    ['nobody in front', { kind: 'invited' }, 'people'],
    ['a lecture without its course', { kind: 'course_lecture' }, 'courseId'],
    ['a course of elsewhere', { courseId: '01890000-0000-7000-8000-000000000001' }, 'courseId'],
    ['7 minutes', { minutes: 7 }, 'minutes'],
    ['an unknown key', { colour: 'red' }, ''],
  ])('refuses %s', async (_name, over, field) => {
    const refused = await organiser.call(contract.createTalk, {
      ...inEvent(),
      body: { ...structure, title: 'X', people: [], ...over },
    });
    expect(refused.status).toBe(422);
    if (field) expect(problemOf(refused).fields).toHaveProperty(field);
  });

  it('keeps events apart: a talk is not found under another event, whose organiser sees nothing', async () => {
    const other = await buildEvent();
    const { talk } = await submitted(t, event.slug);
    const there = await t.signIn(
      await buildAccount({}, [{ role: 'organiser', scope: 'event', scopeId: other.id }]),
    );
    expect((await there.call(contract.readTalk, { params: { event: event.slug, talk } })).status).toBe(404);
    expect((await there.call(contract.readTalk, { params: { event: other.slug, talk } })).status).toBe(404);
    expect((await there.call(contract.listTalks, inEvent())).status).toBe(404);
  });
});

describe('writing', () => {
  it('B: a stale version loses nothing: 412, and the text of the other one stays', async () => {
    const { speaker, talk, version } = await submitted(t, event.slug);
    const at = { params: { event: event.slug, talk } };
    expect(
      (
        await organiser.call(contract.saveAbstract, {
          ...at,
          version,
          body: { ...abstract, title: 'By the organiser' },
        })
      ).status,
    ).toBe(200);
    const late = await speaker.call(contract.saveAbstract, {
      ...at,
      version,
      body: { ...abstract, title: 'By the speaker' },
    });
    expect([late.status, problemOf(late).code]).toEqual([412, 'stale']);
    expect((await speaker.call(contract.readTalk, at)).body.title).toBe('By the organiser');
  });

  it.each([
    ['title', { title: '' }],
    ['title', { title: 'two\nlines' }],
    ['abstract', { abstract: 'x'.repeat(8001) }],
    ['msc.0', { msc: ['02A10'] }],
    ['msc', { msc: ['05C15', '05C16', '05C17', '05C18', '05C19'] }],
    ['references.0', { references: ['javascript:alert(1)'] }],
    ['needs.0', { needs: ['sauna'] }],
    ['coAuthors.0.name', { coAuthors: [{ name: '', affiliation: '' }] }],
  ])('refuses a wrong %s and says where', async (field, over) => {
    const { speaker, talk, version } = await submitted(t, event.slug);
    const refused = await speaker.call(contract.saveAbstract, {
      params: { event: event.slug, talk },
      version,
      body: { ...abstract, ...over },
    });
    expect(refused.status).toBe(422);
    expect(problemOf(refused).fields).toHaveProperty([field]);
  });

  it('what can’t be printed any more counts as not handed in', async () => {
    const { speaker, talk, version } = await submitted(t, event.slug);
    const at = { params: { event: event.slug, talk } };
    const broken = await speaker.call(contract.saveAbstract, {
      ...at,
      version,
      body: { ...abstract, abstract: 'Let $x' },
    });
    expect(broken.body).toMatchObject({ abstract: 'Let $x', abstractAt: null, can: { handIn: true } });
    const refused = await speaker.call(contract.handInAbstract, {
      ...at,
      version: broken.body.version,
      body: {},
    });
    expect(problemOf(refused).fields?.abstract).toContain('Mathematics begins with $ and does not end.');
  });

  it('reviewers read what is submitted, and write nothing', async () => {
    const { talk, version } = await submitted(t, event.slug);
    const at = { params: { event: event.slug, talk } };
    expect((await reviewer.call(contract.readTalk, at)).body.can).toEqual({
      edit: false,
      write: false,
      decide: false,
      withdraw: false,
      upload: false,
      handIn: false,
    });
    expect((await reviewer.call(contract.saveAbstract, { ...at, version, body: abstract })).status).toBe(403);
    expect(
      (await reviewer.call(contract.decideTalk, { ...at, version, body: { decision: 'accepted' } })).status,
    ).toBe(403);
  });
});

describe('C1 the call', () => {
  it('is closed after the deadline, for drafts not there at all', async () => {
    const past = await buildEvent({ startsOn: '2020-12-05', endsOn: '2020-12-07' });
    const author = await t.signIn(await buildAccount());
    expect((await t.stranger.call(contract.readCall, { params: { event: past.slug } })).body.open).toBe(
      false,
    );
    const late = await author.call(contract.submitTalk, { params: { event: past.slug }, body: abstract });
    expect([late.status, problemOf(late).code]).toEqual([409, 'talk.call_closed']);
    const draft = await buildEvent({}, 'draft');
    expect((await t.stranger.call(contract.readCall, { params: { event: draft.slug } })).status).toBe(404);
  });

  it('withdrawn is the end: no decision, no writing, no files', async () => {
    const { speaker, talk, version } = await submitted(t, event.slug);
    const at = { params: { event: event.slug, talk } };
    const other = await t.signIn(await buildAccount());
    expect((await other.call(contract.withdrawTalk, { ...at, version, body: {} })).status).toBe(404);
    const gone = await speaker.call(contract.withdrawTalk, { ...at, version, body: { note: 'Ill.' } });
    expect(gone.body).toMatchObject({
      state: 'withdrawn',
      decisionNote: 'Ill.',
      can: { write: false, upload: false, withdraw: false },
    });
    const now = gone.body.version;
    expect((await speaker.call(contract.withdrawTalk, { ...at, version: now, body: {} })).status).toBe(409);
    expect(
      (await organiser.call(contract.decideTalk, { ...at, version: now, body: { decision: 'accepted' } }))
        .status,
    ).toBe(409);
    expect((await speaker.call(contract.saveAbstract, { ...at, version: now, body: abstract })).status).toBe(
      403,
    );
  });
});

describe('lists', () => {
  it('filter by state, missing part, title and name without accents', async () => {
    const author = await t.signIn(await buildAccount({ givenName: 'Khôi', familyName: 'Ngô Đình' }));
    const one = await author.call(contract.submitTalk, {
      ...inEvent(),
      body: { ...abstract, title: 'On 100% of $h_1$' },
    });
    await organiser.call(invitation.inviteSpeaker, {
      ...inEvent(),
      body: { email: 'lena@example.org', givenName: 'Lena', familyName: 'Ørsted', minutes: 50 },
    });
    const titles = async (query: object) =>
      (await organiser.call(contract.listTalks, { ...inEvent(), query })).body.items.map((row) => row.title);
    expect(await titles({})).toEqual(['Title to follow', 'On 100% of $h_1$']);
    expect(await titles({ state: 'submitted' })).toEqual(['On 100% of $h_1$']);
    expect(await titles({ missing: 'abstract' })).toEqual(['Title to follow']);
    expect(await titles({ missing: 'answer' })).toEqual(['Title to follow']);
    expect(await titles({ missing: 'slides' })).toEqual(['Title to follow', 'On 100% of $h_1$']);
    expect(await titles({ q: '100% of' })).toEqual(['On 100% of $h_1$']);
    expect(await titles({ q: 'ngo dinh' })).toEqual(['On 100% of $h_1$']);
    expect(await titles({ q: '%' })).toEqual(['On 100% of $h_1$']);
    expect((await reviewer.call(contract.listTalks, inEvent())).body.items.map((row) => row.id)).toEqual([
      one.body.id,
    ]);
    expect(
      (await reviewer.call(contract.listTalks, { ...inEvent(), query: { state: 'draft' } })).body.items,
    ).toEqual([]);
    const first = await organiser.call(contract.listTalks, { ...inEvent(), query: { limit: 1 } });
    const second = await organiser.call(contract.listTalks, {
      ...inEvent(),
      query: { limit: 1, cursor: first.body.next as string },
    });
    expect([first.body.items[0]?.title, second.body.items[0]?.title, second.body.next]).toEqual([
      'Title to follow',
      'On 100% of $h_1$',
      null,
    ]);
    expect((await author.call(contract.listMyTalks)).body.items).toMatchObject([
      { eventSlug: event.slug, part: 'speaker', state: 'submitted' },
    ]);
  });

  it('the stage is told to those who have a part, to nobody else', async () => {
    const { speaker } = await submitted(t, event.slug);
    expect((await speaker.call(stay.readStage, inEvent())).body).toMatchObject({
      slug: event.slug,
      rooms: [{ name: 'Great Hall', capacity: 120 }, { name: 'Ivar' }],
    });
    const other = await t.signIn(await buildAccount());
    expect((await other.call(stay.readStage, inEvent())).status).toBe(404);
    expect((await other.call(stay.readMyPresence, inEvent())).status).toBe(404);
  });
});

describe('letters', () => {
  it('reminds only those who owe, once a day', async () => {
    const person = { email: 'owes@example.org', givenName: 'Ow', familyName: 'Es', part: 'speaker' as const };
    await organiser.call(contract.createTalk, {
      ...inEvent(),
      body: { ...structure, kind: 'invited', minutes: 50, title: 'Kites and $\\Delta$', people: [person] },
    });
    await submitted(t, event.slug);
    expect((await reviewer.call(invitation.remindSpeakers, { ...inEvent(), body: {} })).status).toBe(403);
    await organiser.call(invitation.remindSpeakers, { ...inEvent(), body: {} });
    await organiser.call(invitation.remindSpeakers, { ...inEvent(), body: {} });
    await t.runJobs();
    expect(t.mail.map((mail) => [mail.to, mail.subject])).toEqual([
      ['owes@example.org', 'Your abstract: Conference on Lattices'],
    ]);
    expect(t.mail[0]?.text).toContain('“Kites and Δ”');
  });
});
