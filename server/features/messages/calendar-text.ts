import { createEvents, type EventAttributes } from 'ics';

/** One item of a calendar object. Instants are UTC, ISO. */
export interface CalendarItem {
  /** A random UUID (RFC 7986 section 5.3). */
  uid: string;
  sequence: number;
  startsAt: string;
  endsAt: string;
  /** Plain text, one line. */
  summary: string;
  description: string;
  location: string;
  url: string;
  cancelled: boolean;
  /** Time stamp of this very message or state. */
  stamp: Date;
  /** Only in invitations. */
  attendee?: { name: string; email: string };
}

export interface Organizer {
  name: string;
  email: string;
}

const PRODUCT = '-//Analemma//Analemma//EN';

/** Controls other than line breaks and tabs are not TEXT (RFC 5545 section 3.1). */
const cleanText = (text: string): string =>
  text
    .replace(/\r\n?/g, '\n')
    .replace(/[\u0000-\u0008\u000B\u000C\u000E-\u001F\u007F]/g, '')
    .replace(/\p{Cs}/gu, '\uFFFD');
const oneLine = (text: string): string =>
  cleanText(text)
    .replace(/[\n\t]+/g, ' ')
    .trim();

/**
 * Parameter values can't hold a double quote; RFC 6868 writes it ^' and a caret ^^. A backslash has no meaning there
 * (RFC 5545 section 3.2), but some readers take \\n for a line break all the same: names get a slash instead.
 */
const parameter = (text: string): string =>
  oneLine(text).replace(/\\/g, '/').replace(/\^/g, '^^').replace(/"/g, "^'");

const utc = (iso: string): [number, number, number, number, number] => {
  const date = new Date(iso);
  return [
    date.getUTCFullYear(),
    date.getUTCMonth() + 1,
    date.getUTCDate(),
    date.getUTCHours(),
    date.getUTCMinutes(),
  ];
};

/** `timestamp` is read by the package (DTSTAMP) but missing in its types. */
function attributes(
  item: CalendarItem,
  method: string,
  organizer: Organizer,
): EventAttributes & { timestamp: number } {
  return {
    productId: PRODUCT,
    method,
    uid: item.uid,
    sequence: item.sequence,
    timestamp: item.stamp.getTime(),
    start: utc(item.startsAt),
    startInputType: 'utc',
    startOutputType: 'utc',
    end: utc(item.endsAt),
    endInputType: 'utc',
    endOutputType: 'utc',
    title: oneLine(item.summary) || 'Talk', // the package leaves an empty one out, but SUMMARY is required
    description: cleanText(item.description),
    location: oneLine(item.location),
    url: item.url,
    status: item.cancelled ? 'CANCELLED' : 'CONFIRMED',
    organizer: { name: parameter(organizer.name), email: organizer.email },
    ...(item.attendee && {
      attendees: [
        {
          name: parameter(item.attendee.name),
          email: item.attendee.email,
          rsvp: method === 'REQUEST',
          role: 'REQ-PARTICIPANT',
          partstat: 'NEEDS-ACTION',
        },
      ],
    }),
  };
}

/** An invitation or a cancellation for one person (RFC 5546 REQUEST, CANCEL): one component, one UID. */
export function invitationText(
  method: 'REQUEST' | 'CANCEL',
  item: CalendarItem,
  organizer: Organizer,
): string {
  return finish(write([attributes({ ...item, cancelled: method === 'CANCEL' }, method, organizer)]), []);
}

/** A feed to subscribe to (METHOD:PUBLISH) with its name and the shortest interval at which to ask again (RFC 7986). */
export function feedText(
  name: string,
  items: readonly CalendarItem[],
  organizer: Organizer,
  minutes = 60,
): string {
  const head = [
    `NAME:${escapeText(oneLine(name))}`,
    `X-WR-CALNAME:${escapeText(oneLine(name))}`,
    `REFRESH-INTERVAL;VALUE=DURATION:PT${minutes}M`,
  ];
  if (items.length === 0)
    return finish(
      [
        'BEGIN:VCALENDAR',
        'VERSION:2.0',
        'CALSCALE:GREGORIAN',
        `PRODID:${PRODUCT}`,
        'METHOD:PUBLISH',
        'END:VCALENDAR',
      ].join('\r\n'),
      head,
    );
  return finish(
    write(items.map((item) => attributes({ ...item, attendee: undefined }, 'PUBLISH', organizer))),
    head,
  );
}

function write(events: EventAttributes[]): string {
  const { error, value } = createEvents(events);
  if (error || !value) throw new Error(`calendar text: ${error?.message ?? 'nothing was written'}`);
  return value;
}

const escapeText = (text: string): string =>
  text.replace(/\\/g, '\\\\').replace(/\n/g, '\\n').replace(/;/g, '\\;').replace(/,/g, '\\,');

/** The package folds by characters: unfold, mend what it leaves, fold again by octets. */
function finish(raw: string, head: string[]): string {
  const lines = raw
    .replace(/\r\n[\t ]/g, '')
    .split(/\r\n/)
    .filter((line) => line !== '' && !line.startsWith('X-PUBLISHED-TTL') && !line.startsWith('X-WR-CALNAME'))
    .map((line) => line.replace(/:MAILTO:/, ':mailto:'));
  const method = lines.findIndex((line) => line.startsWith('METHOD:'));
  lines.splice(method + 1, 0, ...head);
  return `${lines.map(fold).join('\r\n')}\r\n`;
}

const encoder = new TextEncoder();

/** RFC 5545 section 3.1: at most 75 octets a line, a UTF-8 character is never cut; a continuation begins with a space. */
export function fold(line: string): string {
  const pieces: string[] = [];
  let piece = '';
  let octets = 0;
  for (const char of line) {
    const size = encoder.encode(char).length;
    if (octets + size > 75) {
      pieces.push(piece);
      piece = ' ';
      octets = 1;
    }
    piece += char;
    octets += size;
  }
  return [...pieces, piece].join('\r\n');
}
