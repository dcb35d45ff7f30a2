import katex from 'katex';
import type { PublicProgramme, PublicTalk } from '@shared/features/programme/programme.contract';
import type {
  PublicEvent,
  PublicEventSummary,
  PublicPeople,
  PublicTalkPage,
} from '@shared/features/site/site.contract';
import { deadlineNames, eventKindNames } from '@shared/features/events/events.rules';
import { parseLatex, type Segment } from '@shared/lib/latex';
import { plainMath } from '@shared/lib/plain-math';
import {
  formatDate,
  formatDateSpan,
  formatSpan,
  formatTime,
  instantToLocal,
  zoneName,
} from '@shared/lib/time';

/** The reading pages for browsers without JavaScript, and for programs: plain HTML, public data only. Pure. */

export const escapeHtml = (text: string): string =>
  text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);
const e = escapeHtml;

/** MathML needs neither style sheet nor script. What can't be set stands as plain text. */
function formula(tex: string, display: boolean): string {
  try {
    return katex.renderToString(tex, {
      displayMode: display,
      output: 'mathml',
      throwOnError: true,
      trust: false,
      strict: 'ignore',
      maxExpand: 200,
      maxSize: 20,
    });
  } catch {
    return `<i>${e(plainMath(tex))}</i>`;
  }
}

const tags: Record<string, string> = { emph: 'em', bold: 'strong', code: 'code' };

function segment(part: Segment): string {
  if (part.type === 'math') return formula(part.tex, part.display);
  if (part.type === 'unknown') return `<code>${e(part.source)}</code>`;
  const tag = tags[part.style ?? ''];
  return tag ? `<${tag}>${e(part.text)}</${tag}>` : e(part.text);
}

/** A title with mathematics, in a line. */
export const latexLine = (source: string): string =>
  parseLatex(source).paragraphs.flat().map(segment).join('');
/** An abstract, in paragraphs. */
export const latexText = (source: string): string =>
  parseLatex(source)
    .paragraphs.map((parts) => `<p>${parts.map(segment).join('')}</p>`)
    .join('');

const text = (source: string): string =>
  source
    .split(/\n\s*\n/)
    .filter((part) => part.trim() !== '')
    .map((part) => `<p>${e(part)}</p>`)
    .join('');
const section = (title: string, html: string): string =>
  html === '' ? '' : `<section><h2>${e(title)}</h2>${html}</section>`;
const list = (items: string[]): string =>
  items.length === 0 ? '' : `<ul>${items.map((item) => `<li>${item}</li>`).join('')}</ul>`;
const link = (path: string, html: string): string => `<a href="${e(path)}">${html}</a>`;
const person = (one: { printedName: string; affiliation: string }): string =>
  e([one.printedName, one.affiliation].filter(Boolean).join(', '));
const nav = (slug: string): string =>
  `<nav>${[link(`/events/${slug}`, 'Event'), link(`/events/${slug}/programme`, 'Programme'), link(`/events/${slug}/people`, 'People'), link(`/calendars/events/${slug}.ics`, 'Calendar feed')].join(' · ')}</nav>`;
const whenWhere = (event: PublicEventSummary): string =>
  `${eventKindNames[event.kind]}, ${formatDateSpan(event.startsOn, event.endsOn)}, ${event.venue}, ${event.town}`;

export const eventsHtml = (items: PublicEventSummary[]): string =>
  `<h1>Events</h1>${items.map((event) => `<article><h2>${link(`/events/${event.slug}`, e(event.title))}</h2><p>${e(whenWhere(event))}</p>${text(event.lead)}</article>`).join('')}`;

export function eventHtml(event: PublicEvent, programme: PublicProgramme): string {
  const { open, admission, closedBecause, feeRule } = event.registration;
  const register = open
    ? link(`/events/${event.slug}/register`, admission === 'application' ? 'Apply' : 'Register')
    : e(closedBecause ?? '');
  return [
    nav(event.slug),
    `<h1>${e(event.title)}</h1><p>${e(whenWhere(event))}</p>`,
    text(event.lead),
    `<p>${register}</p><p>${feeRule.map(e).join('<br>')}</p>`,
    section(
      'Lecture courses',
      list(
        event.courses.map(
          (course) => `${e(course.letter)}. ${e(course.title)}: ${course.lecturers.map(person).join('; ')}`,
        ),
      ),
    ),
    section(
      'Programme',
      programme.revision ? daysHtml(event.slug, programme) : '<p>The programme is not published yet.</p>',
    ),
    section(
      'Dates',
      list(
        event.dates.map((row) => `${e(formatDate(row.date, { year: true }))}: ${e(deadlineNames[row.kind])}`),
      ),
    ),
    section('Practical matters', text(event.practical)),
    section('Getting here', text(event.travel)),
    section('Safeguarding', text(event.safeguarding)),
    section('Questions', `<p>${link(`mailto:${event.contactEmail}`, e(event.contactEmail))}</p>`),
  ].join('');
}

function daysHtml(slug: string, programme: PublicProgramme): string {
  const days = [...new Set(programme.talks.map((talk) => talk.day))];
  return days
    .map(
      (day) =>
        `<h3>${e(formatDate(day))}</h3>${dayTable(
          slug,
          programme.talks.filter((talk) => talk.day === day),
          programme.timeZone,
        )}`,
    )
    .join('');
}

function dayTable(slug: string, talks: PublicTalk[], zone: string): string {
  const rows = talks.map((talk) => {
    const names = talk.people
      .filter((one) => one.part !== 'chair')
      .map((one) => e(one.printedName))
      .join(', ');
    const title = link(`/events/${slug}/talks/${talk.talkId}`, latexLine(talk.title) || e(talk.word));
    return `<tr><td>${e(formatTime(instantToLocal(talk.startsAt, zone).time))}</td><td>${e(talk.word)}</td><td>${title}</td><td>${names}</td><td>${e(talk.roomName)}</td></tr>`;
  });
  return `<table><thead><tr><th>Time</th><th>Kind</th><th>Title</th><th>By</th><th>Room</th></tr></thead><tbody>${rows.join('')}</tbody></table>`;
}

export function programmeHtml(event: PublicEvent, programme: PublicProgramme): string {
  const head = `${nav(event.slug)}<h1>Programme: ${e(event.title)}</h1>`;
  if (!programme.revision) return `${head}<p>The programme is not published yet.</p>`;
  const zone = zoneName(programme.talks[0]?.startsAt ?? programme.revision.publishedAt, event.timeZone);
  return `${head}<p>Revision ${programme.revision.number}. Times of ${e(event.town)} (${e(zone)}).</p>${daysHtml(event.slug, programme)}`;
}

export function talkHtml(talk: PublicTalkPage): string {
  const { event, placement } = talk;
  const people = [
    ...talk.people.map((one) => person(one) + (one.part === 'speaker' ? '' : ` (${one.part})`)),
    ...talk.coAuthors.map((one) => person({ printedName: one.name, affiliation: one.affiliation })),
  ];
  return [
    nav(event.slug),
    `<p>${link(`/events/${event.slug}`, e(event.title))}</p>`,
    `<h1>${latexLine(talk.title) || e(talk.word)}</h1>`,
    `<p>${e(talk.word)}, ${e(formatSpan(placement.startsAt, placement.endsAt, event.timeZone))}, ${e(placement.roomName)}</p>`,
    list(people),
    talk.abstract ? latexText(talk.abstract) : '<p>The abstract is not in yet.</p>',
    talk.msc.length > 0 ? `<p>MSC 2020: ${e(talk.msc.join(', '))}</p>` : '',
    section('References', list(talk.references.map(e))),
  ].join('');
}

export const peopleHtml = ({ event, items }: PublicPeople): string =>
  `${nav(event.slug)}<h1>Speakers and lecturers: ${e(event.title)}</h1>${list(items.map((one) => `${person(one)}: ${one.talks.map((talk) => link(`/events/${event.slug}/talks/${talk.id}`, latexLine(talk.title) || e(talk.word))).join('; ')}`))}`;
