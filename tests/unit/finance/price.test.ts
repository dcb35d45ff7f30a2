import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { FeeTable } from '../../../shared/features/finance/finance.contract';
import {
  cardPaymentEntry,
  categoriesFor,
  feeTableErrors,
  orderEntry,
  price,
  reversed,
  sessionOutcome,
  taxesOf,
} from '../../../shared/features/finance/finance.rules';

const table = (over: Partial<FeeTable> = {}): FeeTable => ({
  currency: 'EUR',
  timeZone: 'Europe/Copenhagen',
  taxNote: 'No tax: education.',
  categories: [
    {
      id: 'postdoc',
      name: 'postdoc',
      stages: ['postdoc'],
      earlyMinor: 24_000,
      earlyUntil: '2026-04-30',
      regularMinor: 33_000,
      taxBasisPoints: 0,
    },
    {
      id: 'all',
      name: 'others',
      stages: [],
      earlyMinor: null,
      earlyUntil: null,
      regularMinor: 42_000,
      taxBasisPoints: 0,
    },
  ],
  extras: [
    {
      id: 'room',
      name: 'Shared room',
      priceMinor: 3800,
      capacity: null,
      until: null,
      taxBasisPoints: 0,
      hint: '',
      left: null,
    },
    {
      id: 'lunch',
      name: 'Lunches',
      priceMinor: 950,
      capacity: null,
      until: null,
      taxBasisPoints: 0,
      hint: '',
      left: null,
    },
    {
      id: 'walk',
      name: 'Walk',
      priceMinor: 2400,
      capacity: null,
      until: null,
      taxBasisPoints: 0,
      hint: '',
      left: null,
    },
  ],
  ...over,
});
const early = new Date('2026-04-28T12:00:00Z');

describe('price, worked out by hand', () => {
  it('EUR, exponent 2: 240.00 + 11 x 38.00 + 10 x 9.50 + 24.00 = 777.00', () => {
    const result = price(
      {
        categoryId: 'postdoc',
        extras: [
          { extraId: 'room', quantity: 11 },
          { extraId: 'lunch', quantity: 10 },
          { extraId: 'walk', quantity: 1 },
        ],
      },
      table(),
      early,
    );
    expect(result.lines.map((line) => [line.label, line.note, line.netMinor])).toEqual([
      ['Fee, postdoc, early', '330.00 after Thu 30 April 2026, 23:59', 24_000],
      ['Shared room', '11 × 38.00', 41_800],
      ['Lunches', '10 × 9.50', 9_500],
      ['Walk', '', 2_400],
    ]);
    expect(result).toMatchObject({ netMinor: 77_700, taxMinor: 0, totalMinor: 77_700 });
    expect(result.reasons).toEqual([
      'Early fee until Thu 30 April 2026, 23:59 (Europe/Copenhagen).',
      'No tax: education.',
    ]);
  });
  it('JPY, exponent 0, 10 %: 15,000 + 2 x 1,205 = 17,410; tax 1,741; total 19,151', () => {
    const yen = table({
      currency: 'JPY',
      categories: [
        {
          id: 'all',
          name: 'all',
          stages: [],
          earlyMinor: null,
          earlyUntil: null,
          regularMinor: 15_000,
          taxBasisPoints: 1000,
        },
      ],
      extras: [
        {
          id: 'x',
          name: 'Bento',
          priceMinor: 1205,
          capacity: null,
          until: null,
          taxBasisPoints: 1000,
          hint: '',
          left: null,
        },
      ],
    });
    expect(price({ categoryId: 'all', extras: [{ extraId: 'x', quantity: 2 }] }, yen, early)).toMatchObject({
      netMinor: 17_410,
      taxMinor: 1741,
      totalMinor: 19_151,
    });
  });
  it('KWD, exponent 3, 5 %: 12.125 + 3 x 0.335 = 13.130; tax 0.6565 -> 0.657; total 13.787', () => {
    const dinar = table({
      currency: 'KWD',
      categories: [
        {
          id: 'all',
          name: 'all',
          stages: [],
          earlyMinor: null,
          earlyUntil: null,
          regularMinor: 12_125,
          taxBasisPoints: 500,
        },
      ],
      extras: [
        {
          id: 'x',
          name: 'Tea',
          priceMinor: 335,
          capacity: null,
          until: null,
          taxBasisPoints: 500,
          hint: '',
          left: null,
        },
      ],
    });
    expect(price({ categoryId: 'all', extras: [{ extraId: 'x', quantity: 3 }] }, dinar, early)).toMatchObject(
      { netMinor: 13_130, taxMinor: 657, totalMinor: 13_787 },
    );
  });
});

// EN 16931 (ConnectingEurope/eInvoicing-EN16931, Schematron BR-CO-17): tax per category on the sum, rounded half up.
describe('tax per rate on the sum of the lines', () => {
  it.each([
    ['0.50 at 5 %', [[50, 500]], [[500, 50, 3]]],
    ['250.00 at 19 %', [[25_000, 1900]], [[1900, 25_000, 4750]]],
    [
      'three lines of 0.33 at 19 % are taxed together: 0.1881 -> 0.19, not 3 x 0.06',
      [
        [33, 1900],
        [33, 1900],
        [33, 1900],
      ],
      [[1900, 99, 19]],
    ],
    [
      'two rates',
      [
        [1000, 1900],
        [1000, 700],
      ],
      [
        [1900, 1000, 190],
        [700, 1000, 70],
      ],
    ],
  ])('%s', (_name, lines, expected) => {
    const taxes = taxesOf(
      (lines as number[][]).map(([netMinor, taxBasisPoints]) => ({
        netMinor: netMinor as number,
        taxBasisPoints: taxBasisPoints as number,
      })),
    );
    expect(taxes.map((tax) => [tax.taxBasisPoints, tax.netMinor, tax.taxMinor])).toEqual(expected);
  });
});

describe('the early fee ends at 23:59:59 of its day in the event’s zone', () => {
  const at = (instant: string, zone: string, until: string): number =>
    price(
      { categoryId: 'c', extras: [] },
      table({
        timeZone: zone,
        categories: [
          {
            id: 'c',
            name: 'c',
            stages: [],
            earlyMinor: 1,
            earlyUntil: until,
            regularMinor: 2,
            taxBasisPoints: 0,
          },
        ],
      }),
      new Date(instant),
    ).totalMinor;
  it.each([
    ['Copenhagen, summer time: last second', '2026-04-30T21:59:59Z', 'Europe/Copenhagen', '2026-04-30', 1],
    ['Copenhagen: the second after', '2026-04-30T22:00:00Z', 'Europe/Copenhagen', '2026-04-30', 2],
    [
      'the night when clocks go forward (29 March 2026): still UTC+2 at midnight',
      '2026-03-29T21:59:59Z',
      'Europe/Copenhagen',
      '2026-03-29',
      1,
    ],
    [
      'the night when clocks go back (25 October 2026): UTC+1 at midnight',
      '2026-10-25T22:59:59Z',
      'Europe/Copenhagen',
      '2026-10-25',
      1,
    ],
    [
      'Santiago, the day of 25 hours (4 April 2026, tzdata): its second 23:59',
      '2026-04-05T03:59:59Z',
      'America/Santiago',
      '2026-04-04',
      1,
    ],
    ['Santiago: the second after', '2026-04-05T04:00:00Z', 'America/Santiago', '2026-04-04', 2],
    ['Cairo, the day before a day without midnight', '2026-04-23T21:59:59Z', 'Africa/Cairo', '2026-04-23', 1],
    ['Cairo: the second after', '2026-04-23T22:00:00Z', 'Africa/Cairo', '2026-04-23', 2],
    ['Kathmandu, UTC+5:45', '2026-04-30T18:14:59Z', 'Asia/Kathmandu', '2026-04-30', 1],
    ['Kathmandu: the second after', '2026-04-30T18:15:00Z', 'Asia/Kathmandu', '2026-04-30', 2],
    ["St John's, UTC-2:30", '2026-05-01T02:29:59Z', 'America/St_Johns', '2026-04-30', 1],
  ] as const)('%s', (_name, instant, zone, until, total) => expect(at(instant, zone, until)).toBe(total));
});

describe('fee tables', () => {
  it('offers the categories of the stage and those for everybody', () => {
    expect(categoriesFor(table(), 'postdoc').map((category) => category.id)).toEqual(['postdoc', 'all']);
    expect(categoriesFor(table(), null).map((category) => category.id)).toEqual(['all']);
  });
  it('says what is wrong beside the field', () => {
    const { categories } = table();
    const broken = [
      { ...(categories[0] as FeeTable['categories'][number]), earlyMinor: 99_999 },
      { ...(categories[1] as FeeTable['categories'][number]), name: 'postdoc', earlyMinor: 5 },
    ];
    expect(
      Object.keys(feeTableErrors({ categories: broken, extras: [{ name: 'A' }, { name: 'A' }] })).sort(),
    ).toEqual(['categories.0.earlyMinor', 'categories.1.earlyUntil', 'categories.1.name', 'extras.1.name']);
  });
});

describe('ledger entries', () => {
  const balance = (lines: { debitMinor: number; creditMinor: number }[]): number =>
    lines.reduce((sum, line) => sum + line.debitMinor - line.creditMinor, 0);
  it('balance, whatever the price, also reversed', () => {
    fc.assert(
      fc.property(fc.nat(10 ** 8), fc.nat(10 ** 7), (netMinor, taxMinor) => {
        const entry = orderEntry('e', { netMinor, taxMinor, totalMinor: netMinor + taxMinor });
        expect(balance(entry)).toBe(0);
        expect(balance(reversed(entry))).toBe(0);
        expect(balance([...entry, ...reversed(entry)])).toBe(0);
        expect(entry.every((line) => (line.debitMinor === 0) !== (line.creditMinor === 0))).toBe(true);
      }),
    );
    expect(balance(cardPaymentEntry(500))).toBe(0);
  });
});

// docs.stripe.com: status open | complete | expired; payment_status paid | unpaid | no_payment_required.
it.each([
  ['complete', 'paid', 'paid'],
  ['complete', 'unpaid', 'waiting'],
  ['complete', 'no_payment_required', 'paid'],
  ['expired', 'unpaid', 'expired'],
  ['open', 'unpaid', 'open'],
])('session %s and %s means %s', (status, paymentStatus, outcome) =>
  expect(sessionOutcome({ status, paymentStatus })).toBe(outcome),
);
