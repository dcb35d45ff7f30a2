import { describe, expect, it } from 'vitest';
import {
  blockErrors,
  copyDay,
  deadlineErrors,
  nextStates,
  roomErrors,
  type EventFacts,
} from '../../../shared/features/events/events.rules';
import { formatDateSpan, formatSpan, localToInstant, zoneName } from '../../../shared/lib/time';
import { slugFrom } from '../../../shared/lib/ids';

const facts = (over: Partial<EventFacts> = {}): EventFacts => ({
  state: 'draft',
  startsOn: '2027-07-05',
  endsOn: '2027-07-09',
  lead: 'x',
  rooms: 1,
  sessionBlocks: 1,
  feeCategories: 1,
  admitsMinors: false,
  safeguarding: '',
  ...over,
});

describe('states of an event', () => {
  it.each([
    ['draft', {}, '2027-01-01', ['announced']],
    ['announced', {}, '2027-01-01', ['open', 'draft']],
    ['open', {}, '2027-07-05', ['running', 'announced']],
    ['running', {}, '2027-07-09', ['finished']],
    ['finished', {}, '2027-08-01', ['archived', 'running']],
  ] as const)('%s may become', (state, over, today, states) =>
    expect(nextStates(facts({ state, ...over }), today).map((step) => step.to)).toEqual(states),
  );
  it.each([
    ['no paragraph', { lead: ' ' }, '2027-01-01', 'announced', 'Write the paragraph'],
    ['minors without a policy', { admitsMinors: true }, '2027-01-01', 'announced', 'responsible adult'],
    ['no fees', { state: 'announced', feeCategories: 0 }, '2027-01-01', 'open', 'fee category'],
    ['too early', { state: 'open' }, '2027-07-04', 'running', 'begins on Mon 5 July'],
    ['not over', { state: 'running' }, '2027-07-08', 'finished', 'ends on Fri 9 July'],
  ] as const)('%s is said', (_name, over, today, to, words) => {
    const step = nextStates(facts(over as Partial<EventFacts>), today).find(
      (candidate) => candidate.to === to,
    );
    expect(step?.missing.join(' ')).toContain(words);
  });
});

describe('day frames', () => {
  const block = (day: string, startsAt: string, endsAt: string) => ({
    day,
    startsAt,
    endsAt,
    kind: 'session' as const,
    title: '',
    minimalMinutes: null,
  });
  const event = { startsOn: '2027-07-05', endsOn: '2027-07-06' };
  it('may touch but not overlap, and end after they start', () => {
    expect(
      blockErrors(
        [
          block('2027-07-05', '09:00', '10:00'),
          block('2027-07-05', '10:00', '11:00'),
          block('2027-07-06', '09:30', '10:30'),
        ],
        event,
      ),
    ).toEqual({});
    expect(Object.keys(blockErrors([block('2027-07-05', '10:00', '09:00')], event))).toEqual([
      'blocks.0.endsAt',
    ]);
  });
  it('are copied over days; what stood there is replaced', () => {
    const copied = copyDay(
      [block('2027-07-05', '09:00', '10:00'), block('2027-07-06', '14:00', '15:00')],
      '2027-07-05',
      ['2027-07-05', '2027-07-06'],
    );
    expect(copied.map((b) => `${b.day} ${b.startsAt}`)).toEqual(['2027-07-05 09:00', '2027-07-06 09:00']);
  });
});

it('rooms have different names, deadlines different kinds', () => {
  expect(
    roomErrors([
      { name: 'Ivar', shortName: 'I' },
      { name: 'ivar', shortName: 'V' },
    ]),
  ).toEqual({ 'rooms.1.name': 'Another room has this name.' });
  expect(
    Object.keys(
      deadlineErrors([
        { kind: 'slides_due', date: '2027-01-01', time: '23:59' },
        { kind: 'slides_due', date: '2027-01-02', time: '23:59' },
      ]),
    ),
  ).toEqual(['deadlines.1.kind']);
});

// IANA time zone database: offsets of these zones on these days.
describe('local times', () => {
  it.each([
    ['2026-03-29', '02:30', 'Europe/Copenhagen', '2026-03-29T01:30:00.000Z'],
    ['2026-10-25', '02:30', 'Europe/Copenhagen', '2026-10-25T00:30:00.000Z'],
    ['2026-07-06', '09:00', 'America/St_Johns', '2026-07-06T11:30:00.000Z'],
    ['2026-07-06', '09:00', 'Asia/Kathmandu', '2026-07-06T03:15:00.000Z'],
    ['2026-12-31', '23:59', 'Pacific/Auckland', '2026-12-31T10:59:00.000Z'],
  ])('%s %s in %s', (date, time, zone, instant) => expect(localToInstant(date, time, zone)).toBe(instant));
  it.each([
    ['2026-07-06', '2026-07-17', '6–17 July 2026'],
    ['2026-06-30', '2026-07-04', '30 June – 4 July 2026'],
    ['2026-12-28', '2027-01-02', '28 December 2026 – 2 January 2027'],
    ['2026-07-06', '2026-07-06', '6 July 2026'],
  ])('%s to %s', (first, last, words) => expect(formatDateSpan(first, last)).toBe(words));
  it('writes spans and zones', () => {
    expect(formatSpan('2026-07-09T09:25:00Z', '2026-07-09T10:15:00Z', 'Europe/Copenhagen')).toBe(
      'Thu 9 July, 11:25–12:15',
    );
    expect(zoneName('2026-07-09T09:25:00Z', 'Europe/Copenhagen')).toBe('CEST');
  });
});

it.each([
  ['Tilings, Knots & Đ 2027', 'tilings-knots-d-2027'],
  ['Łódź übt', 'lodz-ubt'],
  ['漢字', 'event'],
])('slug of %s', (title, slug) => expect(slugFrom(title)).toBe(slug));
