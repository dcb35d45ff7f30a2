import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/site/site.contract';
import { readingPage } from '../../../server/features/site/site-html.service';
import { systemActor } from '../../../server/features/accounts/accounts.service';
import { placeTalks, publishRevision } from '../../../server/features/programme/programme.service';
import { handInAbstract, saveAbstract } from '../../../server/features/talks/talks-abstract.service';
import { withdrawTalk } from '../../../server/features/talks/talks.service';
import { buildEvent } from '../../support/build-events';
import { buildProgramme } from '../../support/build-programme';
import { startTestApp, type TestApp } from '../../support/server';

let t: TestApp;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(() => t.reset());

const text = {
  title: 'Cubes of $\\mathbb{Z}$',
  abstract: 'Let $x^3=y$. A secret of draft quality.',
  coAuthors: [{ name: 'Ö. Ek', affiliation: 'Lule' }],
  msc: ['11P05'],
  references: [],
  needs: [],
};

/** The first talk is published, the second not. */
async function published() {
  const made = await buildProgramme();
  const { event, hall, first } = made;
  await placeTalks(systemActor, event.slug, [
    { talkId: first.id, roomId: hall.id, day: event.startsOn, startMinute: 540, minutes: 60 },
  ]);
  await publishRevision(systemActor, event.slug, { note: '', withClashes: true });
  return made;
}

describe('the public site', () => {
  it('a draft does not exist: not in the list, no page, no talk, no people, no reading page', async () => {
    const draft = await buildEvent({ title: 'Secret meeting' }, 'draft');
    const list = await t.stranger.call(contract.listPublicEvents);
    expect(list.body.items).toEqual([]);
    const params = { event: draft.slug };
    expect((await t.stranger.call(contract.readPublicEvent, { params })).status).toBe(404);
    expect((await t.stranger.call(contract.listPublicPeople, { params })).status).toBe(404);
    for (const tail of ['', '/programme', '/people']) {
      const page = await readingPage(`/events/${draft.slug}${tail}`, new Date());
      expect(page?.status).toBe(404);
      expect(JSON.stringify(page)).not.toContain('Secret meeting');
    }
  });

  it('tells nothing that is not public', async () => {
    const { event, speaker } = await published();
    const page = await t.stranger.call(contract.readPublicEvent, { params: { event: event.slug } });
    expect(page.status).toBe(200);
    const people = await t.stranger.call(contract.listPublicPeople, { params: { event: event.slug } });
    expect(people.body.items.map((one) => one.printedName)).toEqual([speaker.printedName]);
    for (const answer of [page, people])
      expect(JSON.stringify(answer.body)).not.toMatch(
        /person\d+@example\.org|accountId|"settings"|"version"/,
      );
  });

  it('shows a talk only as published, and its abstract only once it is handed in', async () => {
    const { event, first, second } = await published();
    const read = (talk: string) =>
      t.stranger.call(contract.readPublicTalk, { params: { event: event.slug, talk } });
    expect((await read(second.id)).status).toBe(404);
    const saved = await saveAbstract(systemActor, event.id, first.id, first.version, text);
    const before = await read(first.id);
    expect(before.body).toMatchObject({ title: 'Cubes', abstract: '', coAuthors: [], msc: [] });
    expect(
      JSON.stringify(await readingPage(`/events/${event.slug}/talks/${first.id}`, new Date())),
    ).not.toContain('secret');
    await handInAbstract(systemActor, event.id, first.id, saved.version);
    expect((await read(first.id)).body).toMatchObject({ abstract: text.abstract, msc: ['11P05'] });
    const reading = await readingPage(`/events/${event.slug}/talks/${first.id}`, new Date());
    expect(reading?.html).toContain('<math');
    await withdrawTalk(systemActor, event.id, first.id, undefined, 'Cannot come.');
    expect((await read(first.id)).status).toBe(404);
  });

  it('the reading page of an event has its programme and schema.org data that no title can break out of', async () => {
    const { event } = await published();
    const page = await readingPage(`/events/${event.slug}`, new Date());
    expect(page).toMatchObject({ status: 200, title: event.title });
    expect(page?.html).toContain('Cubes');
    const data = JSON.parse(
      /<script type="application\/ld\+json">(.*?)<\/script>/.exec(page?.head ?? '')?.[1] ?? 'null',
    ) as Record<string, unknown>;
    expect(data).toMatchObject({
      '@type': 'Event',
      name: event.title,
      startDate: event.startsOn,
      endDate: event.endsOn,
    });
    const hostile = await buildEvent({ title: '</script><script>alert(1)</script>' });
    const bad = await readingPage(`/events/${hostile.slug}`, new Date());
    expect(`${bad?.head}${bad?.html}`).not.toContain('<script>alert');
  });

  it('leaves the other addresses of the application alone', async () => {
    expect(await readingPage('/sign-in', new Date())).toBeNull();
    expect(await readingPage('/organise/lattices-1', new Date())).toBeNull();
    expect((await readingPage('/events/no-such-event', new Date()))?.status).toBe(404);
  });
});
