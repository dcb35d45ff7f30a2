import { Problem } from '@shared/http/problem';
import { plainLatex } from '@shared/lib/latex';
import { excerpt } from '@shared/lib/text';
import { env } from '@server/env';
import { readPublic } from '@server/features/programme/programme-read.service';
import { eventData, scriptSafeJson } from './site-data.presenter';
import {
  escapeHtml,
  eventHtml,
  eventsHtml,
  peopleHtml,
  programmeHtml,
  talkHtml,
} from './site-html.presenter';
import { listPublicEvents, listPublicPeople, readPublicEvent, readPublicTalk } from './site.service';

export interface ReadingPage {
  status: 200 | 404;
  title: string;
  description: string;
  /** Goes into the page before the script takes it over. */
  html: string;
  /** More elements of the head. */
  head: string;
}

const ROUTES: [RegExp, (slug: string, talk: string, now: Date) => Promise<Omit<ReadingPage, 'status'>>][] = [
  [/^\/$/, eventsPage],
  [/^\/events\/([a-z0-9-]+)\/?$/, eventPage],
  [/^\/events\/([a-z0-9-]+)\/programme\/?$/, programmePage],
  [/^\/events\/([a-z0-9-]+)\/people\/?$/, peoplePage],
  [/^\/events\/([a-z0-9-]+)\/talks\/([0-9a-f-]{36})\/?$/, talkPage],
];

/** The reading page of a public address; null for every other address of the application. */
export async function readingPage(path: string, now: Date): Promise<ReadingPage | null> {
  for (const [pattern, read] of ROUTES) {
    const match = pattern.exec(path);
    if (!match) continue;
    try {
      return { status: 200, ...(await read(match[1] ?? '', match[2] ?? '', now)) };
    } catch (error) {
      if (error instanceof Problem && error.status === 404)
        return {
          status: 404,
          title: 'Not found',
          description: '',
          html: '<h1>This page does not exist</h1>',
          head: '',
        };
      throw error;
    }
  }
  return null;
}

async function eventsPage() {
  const items = await listPublicEvents();
  return {
    title: `Events: ${env.INSTITUTE_NAME}`,
    description: `Conferences, workshops and schools of the ${env.INSTITUTE_NAME}.`,
    html: eventsHtml(items),
    head: '',
  };
}

async function eventPage(slug: string, _talk: string, now: Date) {
  const [event, programme, people] = await Promise.all([
    readPublicEvent(slug, now),
    readPublic(null, slug),
    listPublicPeople(slug),
  ]);
  const speakers = people.items.filter((one) => one.talks.some((talk) => talk.part === 'speaker'));
  const data = scriptSafeJson(
    eventData(event, speakers, { address: env.BASE_URL, instituteName: env.INSTITUTE_NAME }),
  );
  const feed = `<link rel="alternate" type="text/calendar" title="Programme" href="/calendars/events/${slug}.ics">`;
  return {
    title: event.title,
    description: excerpt(event.lead, 160),
    html: eventHtml(event, programme),
    head: `<script type="application/ld+json">${data}</script>${feed}`,
  };
}

async function programmePage(slug: string, _talk: string, now: Date) {
  const [event, programme] = await Promise.all([readPublicEvent(slug, now), readPublic(null, slug)]);
  return {
    title: `Programme: ${event.title}`,
    description: `Talks by day and room: ${event.title}, ${event.town}.`,
    html: programmeHtml(event, programme),
    head: '',
  };
}

async function peoplePage(slug: string) {
  const people = await listPublicPeople(slug);
  return {
    title: `People: ${people.event.title}`,
    description: `Speakers and lecturers: ${people.event.title}.`,
    html: peopleHtml(people),
    head: '',
  };
}

async function talkPage(slug: string, id: string) {
  const talk = await readPublicTalk(slug, id);
  const title = plainLatex(talk.title) || talk.word;
  return {
    title: `${title}: ${talk.event.title}`,
    description: excerpt(plainLatex(talk.abstract) || `${talk.word}, ${talk.event.title}`, 160),
    html: talkHtml(talk),
    head: '',
  };
}

/** The client's index.html with a reading page in it. */
export function fillPage(index: string, page: ReadingPage): string {
  const head = `<title>${escapeHtml(page.title)}</title><meta name="description" content="${escapeHtml(page.description)}">${page.head}`;
  // Replacements are functions: the text may hold `$&`, which a string would expand.
  return index
    .replace(/<title>[^<]*<\/title>/, () => head)
    .replace('<!--page-->', () => `<div class="px-12 py-8 text-form">${page.html}</div>`);
}
