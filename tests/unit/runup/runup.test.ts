import { expect, it } from 'vitest';
import { dutiesOf, incomeByDay, names, type DutyFacts } from '../../../shared/features/runup/runup.rules';

const quiet: DutyFacts = {
  slug: 'e',
  state: 'open',
  today: '2027-05-01',
  startsOn: '2027-07-05',
  endsOn: '2027-07-09',
  deadlines: [{ kind: 'programme_final', date: '2027-05-05' }],
  missingSteps: [],
  unanswered: [],
  missingAbstracts: [],
  submitted: 0,
  toBePlaced: 0,
  clashes: 0,
  unpaid: { people: 0, amountMinor: 0, currency: 'EUR' },
  undecidedApplications: 0,
  oddities: 0,
  failedMessages: 0,
  speakersWithoutStay: [],
  grants: { undecided: 0, queried: 0, toTell: 0 },
};

it('nothing to do is nothing to say', () => expect(dutiesOf(quiet)).toEqual([]));

it('stands by date, what is due within a week marked, each with a verb and a place', () => {
  const duties = dutiesOf({
    ...quiet,
    unpaid: { people: 1, amountMinor: 12_050, currency: 'EUR' },
    clashes: 2,
    toBePlaced: 3,
    oddities: 1,
  });
  expect(duties.map((duty) => [duty.by, duty.title, duty.soon])).toEqual([
    ['2027-05-01', '1 payment to be settled', true],
    ['2027-05-05', '2 clashes, 3 talks not placed', true],
    [null, '1 person has a place and not paid', false],
  ]);
  expect(duties[2]?.detail).toBe('120.50 EUR together');
  expect(duties.every((duty) => duty.action !== '' && duty.href.startsWith('/organise/e'))).toBe(true);
});

it('names four and counts the rest', () =>
  expect(names(['A', 'B', 'C', 'D', 'E', 'F'])).toBe('A, B, C, D and 2 more'));

it('adds payments up by day', () =>
  expect(
    incomeByDay([
      { on: '2027-01-02', amountMinor: 5 },
      { on: '2027-01-01', amountMinor: 1 },
      { on: '2027-01-02', amountMinor: 2 },
    ]),
  ).toEqual([
    { on: '2027-01-01', totalMinor: 1 },
    { on: '2027-01-02', totalMinor: 8 },
  ]));
