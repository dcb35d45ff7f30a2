import fc from 'fast-check';
import countries from 'i18n-iso-countries';
import { describe, expect, it } from 'vitest';
import {
  grantClosedBecause,
  submissionErrors,
} from '../../../shared/features/grants/grants-application.rules';
import {
  awardStates,
  costKinds,
  type AwardLine,
  type CostKind,
} from '../../../shared/features/grants/grants.contract';
import {
  amountOf,
  canStepAward,
  conditionsOf,
  eligibilityWords,
  formatGrant,
  meanScore,
  notEligibleBecause,
  notFundedBecause,
  refuseProposal,
  sameInstitution,
  sumOf,
  type Applicant,
  type FundRules,
} from '../../../shared/features/grants/grants.rules';
import { regionOf } from '../../../shared/features/grants/regions';
import { grantInput } from '../../support/build-grants';

const fund = (over: Partial<FundRules> = {}): FundRules => ({
  letter: 'A',
  name: 'Ness Bequest',
  budgetMinor: 200_000,
  currency: 'EUR',
  covers: ['travel', 'accommodation'],
  capPerPersonMinor: 150_000,
  floors: [],
  eligibility: { stages: [], countries: [], notCountries: [], flagsAny: [], minScore: null },
  ...over,
});
const eligible = (over: Partial<FundRules['eligibility']>): FundRules =>
  fund({ eligibility: { ...fund().eligibility, ...over } });
const who = (over: Partial<Applicant> = {}): Applicant => ({
  stage: 'doctoral',
  country: 'VN',
  flags: [],
  score: 7.9,
  requested: [
    { kind: 'travel', amountMinor: 98_000 },
    { kind: 'accommodation', amountMinor: 41_800 },
    { kind: 'fee', amountMinor: 20_000 },
  ],
  ...over,
});
const travel = (amountMinor: number): AwardLine[] => [{ kind: 'travel', amountMinor }];

describe('a proposal is refused with a sentence that says what to do', () => {
  const none = new Map<CostKind, string>();
  it.each<[string, Partial<Parameters<typeof refuseProposal>[0]>, string | undefined]>([
    ['within everything', {}, undefined],
    ['exactly the request', { lines: travel(98_000) }, undefined],
    [
      'a cent above the request',
      { lines: travel(98_001) },
      'Travel: 980 EUR were asked for. Award at most that.',
    ],
    [
      'not asked for',
      { fund: fund({ covers: ['subsistence'] }), lines: [{ kind: 'subsistence', amountMinor: 1 }] },
      'Subsistence was not asked for. Leave it out.',
    ],
    [
      'a kind that the fund does not pay',
      { lines: [{ kind: 'fee', amountMinor: 100 }] },
      'Ness Bequest does not pay fee. It pays travel and accommodation.',
    ],
    [
      'paid by another fund',
      { paidElsewhere: new Map([['travel', 'First Journeys'] as const]) },
      'First Journeys pays travel for this person. One cost is paid by one fund: take it back there first.',
    ],
    [
      'another kind by another fund',
      { paidElsewhere: new Map([['accommodation', 'First Journeys'] as const]) },
      undefined,
    ],
    [
      'above the cap',
      { fund: fund({ capPerPersonMinor: 90_000 }), lines: travel(98_000) },
      'Ness Bequest pays at most 900 EUR to one person. Take 80 EUR off.',
    ],
    [
      'above what is left',
      { spentMinor: 140_000, lines: travel(60_001) },
      'Ness Bequest has 600 EUR left. Award at most that, or choose another fund.',
    ],
    ['exactly what is left', { spentMinor: 140_000, lines: travel(60_000) }, undefined],
    [
      'nothing left',
      { spentMinor: 200_000 },
      'Ness Bequest has nothing left. Choose another fund, or take an award back.',
    ],
    [
      'twice the same kind',
      { lines: [...travel(1), ...travel(2)] },
      'Travel stands there twice. Put it into one line.',
    ],
    ['nothing', { lines: travel(0) }, 'Travel needs a sum above nothing. Leave the line out instead.'],
    ['half a cent', { lines: travel(0.5) }, 'Travel needs a sum above nothing. Leave the line out instead.'],
    [
      'not eligible',
      { fund: eligible({ stages: ['student'] }) },
      'Not eligible for Ness Bequest: the fund is for student. Choose another fund.',
    ],
  ])('%s', (_name, change, sentence) => {
    expect(
      refuseProposal({
        fund: fund(),
        who: who(),
        lines: travel(50_000),
        spentMinor: 0,
        paidElsewhere: none,
        ...change,
      }),
    ).toBe(sentence);
  });
});

describe('eligibility', () => {
  it.each<[string, Partial<FundRules['eligibility']>, Partial<Applicant>, boolean]>([
    ['everybody', {}, { country: null, score: null }, true],
    ['one of two stages', { stages: ['student', 'doctoral'] }, {}, true],
    ['another stage', { stages: ['student'] }, {}, false],
    ['a country of the list', { countries: ['NO', 'VN'] }, {}, true],
    ['no country where a list is', { countries: ['NO'] }, { country: null }, false],
    ['a country left out', { notCountries: ['VN'] }, {}, false],
    ['any of two flags', { flagsAny: ['gives_talk', 'first_meeting'] }, { flags: ['first_meeting'] }, true],
    ['none of the flags', { flagsAny: ['gives_talk'] }, { flags: ['first_meeting'] }, false],
    ['exactly the score', { minScore: 7.9 }, {}, true],
    ['a tenth below', { minScore: 8 }, {}, false],
    ['no score where one is asked', { minScore: 1 }, { score: null }, false],
  ])('%s', (_name, rules, person, fits) => {
    expect(notEligibleBecause(eligible(rules), who(person)) === undefined).toBe(fits);
  });
});

describe('why nobody pays', () => {
  const left = (letter: string, leftMinor: number, over: Partial<FundRules> = {}) => ({
    ...fund({ letter, ...over }),
    leftMinor,
  });
  it.each<[string, Parameters<typeof notFundedBecause>[1], string | null]>([
    ['no funds', [], null],
    ['enough left: the committee chose, no reason is made up', [left('A', 150_000)], null],
    ['not enough left', [left('A', 6_000), left('B', 0)], 'No fund has enough left: A 60, B 0.'],
    ['the cap counts, not the request', [left('A', 90_000, { capPerPersonMinor: 90_000 })], null],
    [
      'one not eligible, one short',
      [left('A', 6_000), left('B', 900_000, { eligibility: { ...fund().eligibility, stages: ['student'] } })],
      'No fund has enough left: A 60.',
    ],
    [
      'none fits',
      [
        left('A', 9, { covers: ['subsistence'] }),
        left('B', 900_000, { eligibility: { ...fund().eligibility, stages: ['student'] } }),
      ],
      'No fund fits. A: pays none of the costs asked for · B: the fund is for student.',
    ],
  ])('%s', (_name, funds, sentence) => {
    expect(notFundedBecause(who(), funds)).toBe(sentence);
  });
});

describe('random proposals', () => {
  const arbitraryLines = fc.uniqueArray(
    fc.record({ kind: fc.constantFrom(...costKinds), amountMinor: fc.integer({ min: -5, max: 120_000 }) }),
    { selector: (line) => line.kind, maxLength: 4 },
  );
  it('never take a fund above its budget, a person above the cap or the request, and never pay a cost twice', () => {
    fc.assert(
      fc.property(
        fc.array(fc.record({ person: fc.nat({ max: 5 }), fund: fc.nat({ max: 2 }), lines: arbitraryLines }), {
          maxLength: 60,
        }),
        fc.array(fc.integer({ min: 1, max: 300_000 }), { minLength: 3, maxLength: 3 }),
        fc.option(fc.integer({ min: 1, max: 150_000 })),
        (tries, budgets, cap) => {
          const funds = budgets.map((budgetMinor, n) =>
            fund({
              name: `F${n}`,
              budgetMinor,
              capPerPersonMinor: cap,
              covers: costKinds.filter((_, k) => (k + n) % 4 !== 0),
            }),
          );
          const awards = new Map<string, AwardLine[]>();
          for (const { person, fund: index, lines } of tries) {
            const key = `${person}:${index}`;
            const others = [...awards].filter(([other]) => other !== key);
            const spentMinor = others
              .filter(([other]) => other.endsWith(`:${index}`))
              .reduce((sum, [, given]) => sum + sumOf(given), 0);
            const paidElsewhere = new Map(
              others
                .filter(([other]) => other.startsWith(`${person}:`))
                .flatMap(([, given]) => given.map((line) => [line.kind, 'another'] as const)),
            );
            if (
              !refuseProposal({
                fund: funds[index] as FundRules,
                who: who(),
                lines,
                spentMinor,
                paidElsewhere,
              })
            )
              awards.set(key, lines);
          }
          funds.forEach((rules, index) => {
            const own = [...awards]
              .filter(([key]) => key.endsWith(`:${index}`))
              .map(([, given]) => ({ ...who(), lines: given }));
            expect(conditionsOf(rules, own).filter((condition) => !condition.met)).toEqual([]);
          });
          for (let person = 0; person <= 5; person++) {
            const kinds = [...awards]
              .filter(([key]) => key.startsWith(`${person}:`))
              .flatMap(([, given]) => given.map((line) => line.kind));
            expect(new Set(kinds).size).toBe(kinds.length);
          }
        },
      ),
      { numRuns: 300 },
    );
  });
});

describe('conditions', () => {
  const award = (stage: string, amountMinor: number) => ({ ...who({ stage }), lines: travel(amountMinor) });
  it.each<[string, FundRules, ReturnType<typeof award>[], string, boolean, string | null]>([
    [
      'half of what is awarded, exactly',
      fund({ floors: [{ group: 'doctoral', percent: 50, of: 'awarded' }] }),
      [award('doctoral', 500), award('postdoc', 500)],
      'At least 50 % of what is awarded to: doctoral',
      true,
      '5 of 10',
    ],
    [
      'a cent short',
      fund({ floors: [{ group: 'doctoral', percent: 50, of: 'awarded' }] }),
      [award('doctoral', 500), award('postdoc', 501)],
      'At least 50 % of what is awarded to: doctoral',
      false,
      '5 of 10.01',
    ],
    [
      'of the budget',
      fund({ floors: [{ group: 'doctoral', percent: 1, of: 'budget' }] }),
      [award('doctoral', 1_999)],
      'At least 1 % of the budget to: doctoral',
      false,
      '19.99 of 2,000',
    ],
    [
      'eligibility',
      eligible({ stages: ['doctoral'] }),
      [award('doctoral', 1), award('postdoc', 1)],
      'Stage doctoral',
      false,
      '1 of 2',
    ],
    ['cap', fund({ capPerPersonMinor: 100 }), [award('doctoral', 101)], 'No award above 1 EUR', false, null],
    ['request', fund(), [award('doctoral', 98_001)], 'No award above the request', false, null],
  ])('%s', (_name, rules, awards, text, met, fact) => {
    expect(conditionsOf(rules, awards)).toContainEqual({ text, met, fact });
  });
  it('says eligibility in words', () => {
    expect(
      eligibilityWords({
        stages: ['student', 'doctoral'],
        countries: ['NO', 'SE'],
        notCountries: [],
        flagsAny: ['first_meeting'],
        minScore: 6.5,
      }),
    ).toBe('Stage student or doctoral; affiliation in NO, SE; first meeting of this kind; score 6.5 or more');
    expect(eligibilityWords(fund().eligibility)).toBe('');
  });
});

describe('states, scores, institutions, regions, dates', () => {
  it('goes only along the states of an award', () => {
    const steps = awardStates.flatMap((from) =>
      awardStates.filter((to) => canStepAward(from, to)).map((to) => `${from} ${to}`),
    );
    expect(steps).toEqual([
      'proposed queried',
      'proposed approved',
      'queried proposed',
      'queried approved',
      'approved proposed',
      'approved queried',
      'approved offered',
      'offered accepted',
      'offered returned',
      'accepted returned',
    ]);
  });
  it.each([
    [[], null],
    [[9], 9],
    [[9, 8], 8.5],
    [[7, 8, 8], 7.7],
    [[1, 1, 2], 1.3],
    [[9, 9, 9, 10], 9.3],
  ])('mean of %j is %s', (scores, mean) => expect(meanScore(scores)).toBe(mean));
  it.each([
    ['Viện Toán', 'VIEN TOAN', true],
    ['Łódź School', 'lodz  school.', true],
    ['', '', false],
    ['Lule Institute', 'Lule', false],
  ])('%s and %s are the same institution: %s', (a, b, same) => expect(sameInstitution(a, b)).toBe(same));
  it('has a region for every country of ISO 3166-1, and no other', () => {
    const without = Object.keys(countries.getAlpha2Codes()).filter((code) => regionOf(code) === 'Not stated');
    expect(without).toEqual([]);
    expect([regionOf('VN'), regionOf('NO'), regionOf('CL'), regionOf(null), regionOf('ZZ')]).toEqual([
      'South-eastern Asia',
      'Northern Europe',
      'South America',
      'Not stated',
      'Not stated',
    ]);
  });
  it.each([
    [150_000, 'EUR', '1,500 EUR'],
    [150_050, 'EUR', '1,500.50 EUR'],
    [1500, 'JPY', '1,500 JPY'],
    [1_000, 'KWD', '1 KWD'],
    [100, 'JPY', '100 JPY'],
  ])('%s %s is %s', (amount, currency, text) => expect(formatGrant(amount, currency)).toBe(text));
  it.each([
    ['open', true, null, null],
    ['open', true, '2027-05-01T21:59:00.000Z', null],
    ['open', true, '2027-05-01T09:59:59.999Z', 'The date for grant applications is past.'],
    ['finished', true, null, 'The event is over, or not open yet.'],
    [
      'open',
      false,
      null,
      'A grant belongs to a registration. Register or apply for a place first, then come back here.',
    ],
  ])('event %s, registered %s, due %s: %s', (eventState, hasBasis, dueAt, reason) => {
    expect(grantClosedBecause({ eventState, hasBasis, dueAt }, new Date('2027-05-01T10:00:00Z'))).toBe(
      reason,
    );
  });
  it('names everything that keeps a draft back', () => {
    const facts = { coveredKinds: ['travel' as const], currency: 'EUR', country: null, careerStage: null };
    const errors = submissionErrors(
      grantInput({
        motivation: ' x ',
        minUsefulMinor: 999_999,
        items: [
          { kind: 'travel', amountMinor: 100, quantity: null, note: '' },
          { kind: 'accommodation', amountMinor: 100, quantity: null, note: '' },
        ],
      }),
      facts,
    );
    expect(Object.keys(errors).sort()).toEqual([
      'careerStage',
      'country',
      'items.1.amountMinor',
      'items.1.quantity',
      'minUsefulMinor',
      'motivation',
    ]);
    expect(
      submissionErrors(grantInput(), {
        coveredKinds: ['travel', 'accommodation'],
        currency: 'EUR',
        country: 'VN',
        careerStage: 'doctoral',
      }),
    ).toEqual({});
    expect(amountOf(grantInput().items, 'travel')).toBe(98_000);
  });
});
