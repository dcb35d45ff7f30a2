import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/talks/talks.contract';
import * as courses from '../../../shared/features/talks/talks-courses.contract';
import * as invitation from '../../../shared/features/talks/talks-invitation.contract';
import * as materials from '../../../shared/features/talks/talks-materials.contract';
import * as stay from '../../../shared/features/talks/talks-stay.contract';
import type { EventDetail } from '../../../shared/features/events/events.contract';
import { buildAccount } from '../../support/build';
import { buildEvent } from '../../support/build-events';
import { clientOf, startTestApp, type Client, type TestApp } from '../../support/server';

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
    await buildAccount({}, [{ role: 'organiser', scope: 'event', scopeId: event.id }]),
  );
});

const invitee = {
  email: 'lena@example.org',
  givenName: 'Lena',
  familyName: 'Ørsted',
  affiliation: 'Fjordby University',
  kind: 'invited' as const,
  minutes: 50,
  questionMinutes: 5,
  message: '',
};
const abstract = {
  title: 'Lattices that pack badly',
  abstract: 'We show $\\Delta \\le 2^{-n}$.',
  coAuthors: [],
  msc: ['52C17'],
  references: ['10.1000/xyz123'],
  needs: [],
};
const pdf = Buffer.from('%PDF-1.4\n1 0 obj\n<<>>\nendobj\ntrailer\n<<>>\n%%EOF\n');
const problem = (answer: { body: unknown }) =>
  answer.body as { detail: string; fields?: Record<string, string> };

async function invited(): Promise<{ speaker: Client; talk: string; token: string }> {
  const at = { params: { event: event.slug } };
  const talk = await organiser.call(invitation.inviteSpeaker, { ...at, body: invitee });
  expect(talk.status, JSON.stringify(talk.body)).toBe(200);
  await t.runJobs();
  const token = /speaker-invitation\/([\w-]+)/.exec(t.mail[0]?.text ?? '')?.[1] ?? '';
  return { speaker: clientOf(t.app), talk: talk.body.id, token };
}

describe('B5 C2 an invited speaker', () => {
  it('follows the link, accepts, tells the stay, writes and hands in the abstract', async () => {
    const { speaker, talk, token } = await invited();
    expect(t.mail[0]).toMatchObject({
      to: 'lena@example.org',
      subject: 'Invitation to speak: Conference on Lattices',
    });
    const offer = await speaker.call(invitation.readSpeakerInvitation, { params: { token } });
    expect(offer.body).toMatchObject({ name: 'Lena Ørsted', hasPassword: false, answer: 'invited' });
    const noPassword = await speaker.call(invitation.answerSpeakerInvitation, {
      params: { token },
      body: { answer: 'accepted' },
    });
    expect(problem(noPassword).fields).toHaveProperty('password');
    const accepted = await speaker.call(invitation.answerSpeakerInvitation, {
      params: { token },
      body: { answer: 'accepted', password: 'kites above the fjord' },
    });
    expect(accepted.body.session.account?.email).toBe('lena@example.org');
    const at = { params: { event: event.slug, talk } };
    const presence = await speaker.call(stay.saveMyPresence, {
      params: { event: event.slug },
      version: 0,
      body: { arrivesAt: '2027-07-05T08:00', leavesAt: '2027-07-06T18:00', blocked: [], wishes: '' },
    });
    expect(presence.status, JSON.stringify(presence.body)).toBe(200);
    const before = (await speaker.call(contract.readTalk, at)).body;
    const saved = await speaker.call(contract.saveAbstract, {
      ...at,
      version: before.version,
      body: { ...abstract, abstract: 'By \\textsc{hand}.' },
    });
    const refused = await speaker.call(contract.handInAbstract, {
      ...at,
      version: saved.body.version,
      body: {},
    });
    expect(problem(refused).fields?.abstract).toBe(
      'Line 1: \\textsc is not known here. Use \\emph, or write the word plainly.',
    );
    const mended = await speaker.call(contract.saveAbstract, {
      ...at,
      version: saved.body.version,
      body: abstract,
    });
    const handed = await speaker.call(contract.handInAbstract, {
      ...at,
      version: mended.body.version,
      body: {},
    });
    expect(handed.body.abstractAt).not.toBeNull();
    expect((await speaker.call(contract.saveAbstract, { ...at, version: 0, body: abstract })).status).toBe(
      412,
    );
    await t.runJobs();
    expect(t.mail.map((mail) => mail.subject)).toContain('Lena Ørsted has accepted: Conference on Lattices');
  });

  it('keeps others out: 404 for a stranger to the talk, 401 for nobody', async () => {
    const { talk } = await invited();
    const other = await t.signIn(await buildAccount());
    const at = { params: { event: event.slug, talk } };
    expect((await other.call(contract.readTalk, at)).status).toBe(404);
    expect((await other.call(contract.saveAbstract, { ...at, version: 0, body: abstract })).status).toBe(404);
    expect((await t.stranger.call(contract.readTalk, at)).status).toBe(401);
    expect((await other.call(contract.listTalks, { params: { event: event.slug } })).status).toBe(404);
  });
});

describe('C1 call for abstracts', () => {
  it('takes a submission, and the decision goes out by letter once', async () => {
    const author = await buildAccount();
    const client = await t.signIn(author);
    const submitted = await client.call(contract.submitTalk, {
      params: { event: event.slug },
      body: abstract,
    });
    expect(submitted.body).toMatchObject({ state: 'submitted', kind: 'contributed' });
    const at = { params: { event: event.slug, talk: submitted.body.id } };
    expect(
      (
        await client.call(contract.decideTalk, {
          ...at,
          version: submitted.body.version,
          body: { decision: 'accepted' },
        })
      ).status,
    ).toBe(404);
    const decided = await organiser.call(contract.decideTalk, {
      ...at,
      version: submitted.body.version,
      body: { decision: 'accepted' },
    });
    expect(decided.body.state).toBe('accepted');
    expect(
      (
        await organiser.call(contract.decideTalk, {
          ...at,
          version: decided.body.version,
          body: { decision: 'accepted' },
        })
      ).status,
    ).toBe(409);
    await t.runJobs();
    await t.runJobs();
    expect(t.mail.filter((mail) => mail.to === author.email).map((mail) => mail.subject)).toEqual([
      'Your talk is accepted: Conference on Lattices',
    ]);
  });
});

describe('C3 slides', () => {
  it('keeps versions, knows the real type, and hides them from others', async () => {
    const author = await t.signIn(await buildAccount());
    const talk = (await author.call(contract.submitTalk, { params: { event: event.slug }, body: abstract }))
      .body.id;
    const at = { params: { event: event.slug, talk }, body: { kind: 'slides' as const } };
    const first = await author.call(materials.uploadMaterial, {
      ...at,
      file: { field: 'file', name: 'a.pdf', content: pdf },
    });
    expect(first.status, JSON.stringify(first.body)).toBe(200);
    const second = await author.call(materials.uploadMaterial, {
      ...at,
      file: { field: 'file', name: 'ünïcode "b".pdf', content: pdf },
    });
    expect(second.body.materials[0]?.versions.map((v) => [v.number, v.type])).toEqual([
      [2, 'application/pdf'],
      [1, 'application/pdf'],
    ]);
    const fake = await author.call(materials.uploadMaterial, {
      ...at,
      file: { field: 'file', name: 'evil.pdf', content: Buffer.from('<script>alert(1)</script>') },
    });
    expect(fake.status).toBe(415);
    const file = second.body.materials[0]?.versions[0]?.id ?? '';
    const download = await author.get(`/api/events/${event.slug}/materials/${file}`);
    expect(download.status).toBe(200);
    expect(download.headers['x-content-type-options']).toBe('nosniff');
    expect(download.headers['content-disposition']).toContain(
      "filename*=UTF-8''%C3%BCn%C3%AFcode%20%22b%22.pdf",
    );
    const other = await t.signIn(await buildAccount());
    expect((await other.get(`/api/events/${event.slug}/materials/${file}`)).status).toBe(404);
  });
});

describe('C4 courses', () => {
  it('makes lectures in order and refuses a circle of prerequisites', async () => {
    const lecturer = {
      email: 'prof@example.org',
      givenName: 'Ada',
      familyName: 'Quist',
      part: 'speaker' as const,
    };
    const body = {
      letter: 'A',
      title: 'Substitution tilings',
      shortTitle: 'Tilings',
      minNights: 1,
      maxPerDay: 1,
      lectures: 3,
      minutes: 50,
      exerciseMinutes: 90,
      lecturers: [lecturer],
      tutors: [],
    };
    const course = await organiser.call(courses.createCourse, { params: { event: event.slug }, body });
    expect(course.body.lectures.map((l) => l.number)).toEqual([1, 2, 3]);
    const [a, b] = course.body.lectures.map((l) => l.talkId) as [string, string];
    const circle = await organiser.call(courses.replacePrerequisites, {
      params: { event: event.slug },
      body: {
        pairs: [
          { before: a, after: b },
          { before: b, after: a },
        ],
      },
    });
    expect(circle.status).toBe(409);
    expect(problem(circle).detail).toContain('closes a circle');
  });
});
