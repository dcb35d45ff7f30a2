import { describe, expect, it } from 'vitest';
import { ownTime } from '@/lib/format';
import { calendarFacts } from '@/features/messages/calendar-facts';

const object = (...event: string[]): string =>
  ['BEGIN:VCALENDAR', 'METHOD:REQUEST', 'BEGIN:VEVENT', ...event, 'END:VEVENT', 'END:VCALENDAR', ''].join(
    '\r\n',
  );
const factsOf = (...event: string[]) => Object.fromEntries(calendarFacts(object(...event)));

describe('calendarFacts', () => {
  it('reads folded and escaped values, and addresses behind quoted parameters that hold colons', () => {
    const facts = factsOf(
      'SUMMARY:Knots\\, tilings\\; and a lon',
      ' g title',
      'ATTENDEE;CN="Dr: Hằng; x";RSVP=TRUE:mailto:hang@example.org',
      'ORGANIZER;CN=Office:MAILTO:office@example.org',
      'LOCATION:Great Hall\\, Tarnholt',
    );
    expect(facts).toEqual({
      'What it does': 'Invitation',
      Title: 'Knots, tilings; and a long title',
      Where: 'Great Hall, Tarnholt',
      For: 'hang@example.org',
      From: 'office@example.org',
    });
  });

  it('says that an invitation has changed, and leaves out what is not there', () => {
    expect(factsOf('SEQUENCE:2', 'STATUS:CONFIRMED')).toEqual({
      'What it does': 'Invitation, changed',
      Sequence: '2',
      State: 'confirmed',
    });
    expect(factsOf()).toEqual({ 'What it does': 'Invitation' });
  });

  it('shows instants in the reader’s zone and other times as they stand', () => {
    const facts = factsOf('DTSTART:20270705T070000Z', 'DTEND;VALUE=DATE:20270706');
    expect(facts.Begins).toBe(ownTime('2027-07-05T07:00:00.000Z'));
    expect(facts.Ends).toBe('20270706');
  });
});
