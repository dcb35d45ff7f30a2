import { describe, expect, it } from 'vitest';
import { readReply } from '../../../server/features/messages/calendar-reply';

const reply = (over: { method?: string; event?: string[] } = {}): string =>
  [
    'BEGIN:VCALENDAR',
    'PRODID:-//x//y//EN',
    'VERSION:2.0',
    `METHOD:${over.method ?? 'REPLY'}`,
    'BEGIN:VEVENT',
    ...(over.event ?? [
      'UID:u-1',
      'DTSTAMP:20270101T101500Z',
      'ORGANIZER:mailto:office@example.org',
      'ATTENDEE;PARTSTAT=ACCEPTED:mailto:Hang@example.org',
      'SEQUENCE:3',
    ]),
    'END:VEVENT',
    'END:VCALENDAR',
    '',
  ].join('\r\n');

describe('readReply', () => {
  it('reads the answer of RFC 5546 section 3.2.3', () => {
    expect(readReply(reply())).toEqual({
      uid: 'u-1',
      attendee: 'hang@example.org',
      partstat: 'ACCEPTED',
      sequence: 3,
      stamp: new Date('2027-01-01T10:15:00Z'),
    });
  });

  it('reads folded lines, quoted parameters that hold colons and semicolons, and lower-case names', () => {
    const event = [
      'uid:u-1',
      'attendee;cn="Dr; PARTSTAT=DECLINED: x";CUTYPE=INDIVIDUAL;PARTS',
      ' TAT=tentative:MAILTO:a@exam',
      '\tple.org',
    ];
    expect(readReply(reply({ event }))).toEqual({
      uid: 'u-1',
      attendee: 'a@example.org',
      partstat: 'TENTATIVE',
      sequence: 0,
      stamp: null,
    });
  });

  it.each([
    ['another method', reply({ method: 'REQUEST' })],
    [
      'two attendees',
      reply({
        event: [
          'UID:u',
          'ATTENDEE;PARTSTAT=ACCEPTED:mailto:a@example.org',
          'ATTENDEE;PARTSTAT=ACCEPTED:mailto:b@example.org',
        ],
      }),
    ],
    ['no attendee', reply({ event: ['UID:u'] })],
    [
      'an attendee that is no mail address',
      reply({ event: ['UID:u', 'ATTENDEE;PARTSTAT=ACCEPTED:http://example.org'] }),
    ],
    ['no UID', reply({ event: ['ATTENDEE;PARTSTAT=ACCEPTED:mailto:a@example.org'] })],
    ['no event', 'BEGIN:VCALENDAR\r\nMETHOD:REPLY\r\nEND:VCALENDAR\r\n'],
    ['nothing', ''],
  ])('is null for %s', (_what, text) => expect(readReply(text)).toBeNull());

  it('does not take a sequence that is no number for 0', () => {
    expect(
      readReply(reply({ event: ['UID:u', 'ATTENDEE;PARTSTAT=ACCEPTED:mailto:a@example.org', 'SEQUENCE:x'] }))
        ?.sequence,
    ).toBe(-1);
  });
});
