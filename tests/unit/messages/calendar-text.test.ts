import fc from 'fast-check';
import ICAL from 'ical.js';
import { describe, expect, it } from 'vitest';
import {
  feedText,
  fold,
  invitationText,
  type CalendarItem,
} from '../../../server/features/messages/calendar-text';

const organizer = { name: 'Tarnholt "Institute"; of, Maths', email: 'office@tarnholt.example.org' };
const octets = (line: string): number => Buffer.byteLength(line, 'utf8');

/** Pieces that break calendar text: quotes, semicolons, commas, backslashes, line breaks, long UTF-8, look-alikes of syntax. */
const hostile = fc
  .array(
    fc.constantFrom(
      '"',
      ';',
      ',',
      '\\',
      '\n',
      '\r\n',
      ':',
      '^',
      "^'",
      '\\n',
      'é',
      'Đ',
      'Ngô Thị Hằng',
      '𝔽₂',
      '👩🏽‍🔬',
      '漢字漢字漢字',
      'BEGIN:VEVENT',
      'a',
      ' ',
      '\t',
      'x'.repeat(90),
      '\u0000',
      '\u2028',
    ),
    { minLength: 1, maxLength: 25 },
  )
  .map((parts) => parts.join(''));
const item = fc.record({
  uid: fc.uuid(),
  sequence: fc.integer({ min: 0, max: 40 }),
  start: fc.integer({ min: Date.UTC(2020, 0, 1) / 60_000, max: Date.UTC(2035, 0, 1) / 60_000 }),
  minutes: fc.integer({ min: 5, max: 600 }),
  summary: hostile,
  description: hostile,
  location: hostile,
  name: hostile,
});
const build = (raw: {
  uid: string;
  sequence: number;
  start: number;
  minutes: number;
  summary: string;
  description: string;
  location: string;
  name: string;
}): CalendarItem => ({
  uid: raw.uid,
  sequence: raw.sequence,
  startsAt: new Date(raw.start * 60_000).toISOString(),
  endsAt: new Date((raw.start + raw.minutes) * 60_000).toISOString(),
  summary: raw.summary,
  description: raw.description,
  location: raw.location,
  url: 'http://localhost:3000/events/x/programme',
  cancelled: false,
  stamp: new Date(Date.UTC(2026, 3, 28, 5, 12)),
  attendee: { name: raw.name, email: 'person@example.org' },
});
const control = /[\u0000-\u0008\u000B\u000C\u000E-\u001F\u007F]/g;
const asLine = (text: string): string =>
  text
    .replace(/\r\n?/g, '\n')
    .replace(control, '')
    .replace(/[\n\t]+/g, ' ')
    .trim();
const asText = (text: string): string => text.replace(/\r\n?/g, '\n').replace(control, '');
/** ical.js does not know NAME of RFC 7986 and leaves its TEXT escaped: undone here by RFC 5545 section 3.3.11. */
const unescapeText = (text: string): string =>
  text.replace(/\\([\\;,nN])/g, (_m, c: string) => (c.toLowerCase() === 'n' ? '\n' : c));

function read(text: string): ICAL.Component {
  const calendar = new ICAL.Component(ICAL.parse(text) as never);
  return calendar;
}

describe('invitations as text', () => {
  it('200 talks with hostile texts: lines of at most 75 octets, read back as meant by ical.js, with all that RFC 5546 requires', () => {
    let seen = 0;
    fc.assert(
      fc.property(item, fc.constantFrom('REQUEST' as const, 'CANCEL' as const), (raw, method) => {
        seen += 1;
        const text = invitationText(method, build(raw), organizer);
        expect(text.endsWith('\r\n')).toBe(true);
        for (const line of text.split('\r\n')) {
          expect(octets(line)).toBeLessThanOrEqual(75);
          expect(line).not.toMatch(/[\r\n]/);
        }
        expect(Buffer.from(text, 'utf8').toString('utf8')).toBe(text);
        const calendar = read(text);
        expect(calendar.getFirstPropertyValue('method')).toBe(method);
        expect(calendar.getFirstPropertyValue('version')).toBe('2.0');
        expect(calendar.getFirstPropertyValue('prodid')).toBeTruthy();
        const events = calendar.getAllSubcomponents('vevent');
        expect(events).toHaveLength(1);
        const event = events[0] as ICAL.Component;
        // RFC 5546 section 3.2.2 (REQUEST) and 3.2.5 (CANCEL): exactly one of each.
        for (const name of [
          'uid',
          'dtstamp',
          'dtstart',
          'organizer',
          'sequence',
          'summary',
          'dtend',
          'status',
        ])
          expect(event.getAllProperties(name), name).toHaveLength(1);
        expect(event.getAllProperties('attendee')).toHaveLength(1);
        expect(event.getAllProperties('request-status')).toHaveLength(0);
        expect(event.getFirstPropertyValue('status')).toBe(method === 'CANCEL' ? 'CANCELLED' : 'CONFIRMED');
        expect(event.getFirstPropertyValue('uid')).toBe(raw.uid);
        expect(event.getFirstPropertyValue('sequence')).toBe(raw.sequence);
        expect(event.getFirstPropertyValue('summary')).toBe(asLine(raw.summary) || 'Talk');
        expect(event.getFirstPropertyValue('location') ?? '').toBe(asLine(raw.location));
        expect(event.getFirstPropertyValue('description') ?? '').toBe(asText(raw.description));
        expect((event.getFirstPropertyValue('dtstart') as ICAL.Time).toJSDate().getTime()).toBe(
          raw.start * 60_000,
        );
        expect((event.getFirstPropertyValue('dtend') as ICAL.Time).toJSDate().getTime()).toBe(
          (raw.start + raw.minutes) * 60_000,
        );
        const attendee = event.getFirstProperty('attendee');
        expect(String(attendee?.getFirstValue()).toLowerCase()).toBe('mailto:person@example.org');
        const name = asLine(raw.name).replace(/\\/g, '/');
        // RFC 6868 is undone by ical.js.
        if (name) expect(attendee?.getFirstParameter('cn')).toBe(name);
        if (method === 'REQUEST') expect(attendee?.getFirstParameter('rsvp')).toBe('TRUE');
      }),
      { numRuns: 200 },
    );
    expect(seen).toBeGreaterThanOrEqual(200);
  });

  // Golden lengths worked out by hand from RFC 5545 section 3.1 (75 octets, no character cut).
  it('folds by octets', () => {
    expect(
      fold(`SUMMARY:${'é'.repeat(40)}`)
        .split('\r\n')
        .map(octets),
    ).toEqual([74, 15]);
    expect(
      fold(`DESCRIPTION:${'x'.repeat(63)}`)
        .split('\r\n')
        .map(octets),
    ).toEqual([75]);
    expect(
      fold(`DESCRIPTION:${'x'.repeat(64)}`)
        .split('\r\n')
        .map(octets),
    ).toEqual([75, 2]);
  });

  it('writes an empty feed and a feed with a hostile name that ical.js reads', () => {
    const name = 'Knots; "tilings", \\ and ééé '.repeat(5);
    const empty = read(feedText(name, [], organizer));
    expect(unescapeText(String(empty.getFirstPropertyValue('name')))).toBe(name.trim());
    expect(empty.getFirstPropertyValue('method')).toBe('PUBLISH');
    expect(String(empty.getFirstPropertyValue('refresh-interval'))).toBe('PT60M');
  });
});
