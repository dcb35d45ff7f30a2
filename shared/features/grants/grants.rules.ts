import { formatMoney } from '../../lib/money';
import { foldCase, listInWords } from '../../lib/text';
import type { AwardLine, AwardState, CostKind, Eligibility, FloorShare, GrantFlag } from './grants.contract';

export const costKindNames: Record<CostKind, string> = {
  travel: 'Travel',
  accommodation: 'Accommodation',
  subsistence: 'Subsistence',
  fee: 'Fee',
};
export const flagNames: Record<GrantFlag, string> = {
  first_meeting: 'First meeting of this kind',
  no_other_money: 'No other money for the journey',
  gives_talk: 'Gives a talk',
};
export const stageNames: Record<string, string> = {
  student: 'Student',
  doctoral: 'Doctoral',
  postdoc: 'Postdoc',
  faculty: 'Faculty',
  industry: 'Industry',
  other: 'Other',
};
export const awardStateNames: Record<AwardState, string> = {
  proposed: 'Proposed',
  queried: 'Queried',
  approved: 'Approved',
  offered: 'Offered',
  accepted: 'Accepted',
  returned: 'Returned',
};
export const groupName = (group: string): string =>
  stageNames[group] ?? flagNames[group as GrantFlag] ?? group;

export interface FundRules {
  letter: string;
  name: string;
  budgetMinor: number;
  currency: string;
  covers: readonly CostKind[];
  eligibility: Eligibility;
  capPerPersonMinor: number | null;
  floors: readonly FloorShare[];
}
export interface Applicant {
  stage: string;
  country: string | null;
  flags: readonly GrantFlag[];
  /** Mean of the committee, one decimal; null without a score. */
  score: number | null;
  requested: readonly AwardLine[];
}

export const sumOf = (lines: readonly AwardLine[]): number =>
  lines.reduce((sum, line) => sum + line.amountMinor, 0);
export const amountOf = (lines: readonly AwardLine[], kind: CostKind): number =>
  lines.find((line) => line.kind === kind)?.amountMinor ?? 0;

/** Whole units where there is no fraction: `1,500 EUR`, `1,500.50 EUR`. */
export const formatGrant = (amountMinor: number, currency: string, withCode = true): string =>
  formatMoney(amountMinor, currency, withCode).replace(/\.0+(?= |$)/, '');

/** Mean of the scores, rounded half up to one decimal (exact: tenths are integers); null without scores. */
export function meanScore(scores: readonly number[]): number | null {
  if (scores.length === 0) return null;
  const sum = scores.reduce((total, score) => total + score, 0);
  return Math.floor((20 * sum + scores.length) / (2 * scores.length)) / 10;
}

/** The next states of an award. `proposed` again: the funder takes a decision back, or the committee has answered or changed it. */
const STEPS: Record<AwardState, readonly AwardState[]> = {
  proposed: ['approved', 'queried'],
  queried: ['proposed', 'approved'],
  approved: ['proposed', 'queried', 'offered'],
  offered: ['accepted', 'returned'],
  accepted: ['returned'],
  returned: [],
};
export const canStepAward = (from: AwardState, to: AwardState): boolean => STEPS[from].includes(to);

/** Why a fund may not pay this person; undefined when it may. */
export function notEligibleBecause(fund: Pick<FundRules, 'eligibility'>, who: Applicant): string | undefined {
  const { stages, countries, notCountries, flagsAny, minScore } = fund.eligibility;
  if (stages.length > 0 && !stages.includes(who.stage as never))
    return `the fund is for ${listInWords(stages.map((stage) => groupName(stage).toLowerCase()))}`;
  if (countries.length > 0 && !countries.includes(who.country ?? ''))
    return 'affiliation outside the fund’s countries';
  if (who.country && notCountries.includes(who.country))
    return 'affiliation in a country that the fund leaves out';
  if (flagsAny.length > 0 && !flagsAny.some((flag) => who.flags.includes(flag)))
    return `the fund asks for: ${listInWords(flagsAny.map((flag) => groupName(flag).toLowerCase()))}`;
  if (minScore !== null && (who.score === null || who.score < minScore))
    return `the fund asks for a score of ${minScore} or more`;
  return undefined;
}

export interface Proposal {
  fund: FundRules;
  who: Applicant;
  lines: readonly AwardLine[];
  /** What this fund gives to others already, returned awards apart. */
  spentMinor: number;
  /** Cost kinds of this person that another fund pays, with its name. */
  paidElsewhere: ReadonlyMap<CostKind, string>;
}

/** The one rule of every proposal: undefined when it is allowed, else a sentence that says what to do. */
export function refuseProposal({
  fund,
  who,
  lines,
  spentMinor,
  paidElsewhere,
}: Proposal): string | undefined {
  const money = (amount: number): string => formatGrant(amount, fund.currency);
  const reason = notEligibleBecause(fund, who);
  if (reason) return `Not eligible for ${fund.name}: ${reason}. Choose another fund.`;
  for (const { kind, amountMinor } of lines) {
    const name = costKindNames[kind];
    if (lines.filter((line) => line.kind === kind).length > 1)
      return `${name} stands there twice. Put it into one line.`;
    if (!Number.isSafeInteger(amountMinor) || amountMinor <= 0)
      return `${name} needs a sum above nothing. Leave the line out instead.`;
    if (!fund.covers.includes(kind))
      return `${fund.name} does not pay ${name.toLowerCase()}. It pays ${listInWords(fund.covers.map((covered) => costKindNames[covered].toLowerCase()))}.`;
    const other = paidElsewhere.get(kind);
    if (other)
      return `${other} pays ${name.toLowerCase()} for this person. One cost is paid by one fund: take it back there first.`;
    const asked = amountOf(who.requested, kind);
    if (amountMinor > asked)
      return asked > 0
        ? `${name}: ${money(asked)} were asked for. Award at most that.`
        : `${name} was not asked for. Leave it out.`;
  }
  const total = sumOf(lines);
  if (fund.capPerPersonMinor !== null && total > fund.capPerPersonMinor)
    return `${fund.name} pays at most ${money(fund.capPerPersonMinor)} to one person. Take ${money(total - fund.capPerPersonMinor)} off.`;
  const left = fund.budgetMinor - spentMinor;
  if (total > left)
    return left > 0
      ? `${fund.name} has ${money(left)} left. Award at most that, or choose another fund.`
      : `${fund.name} has nothing left. Choose another fund, or take an award back.`;
  return undefined;
}

/** What a fund could pay this person if it had enough: sum of covered kinds that are asked for, within the cap. */
export function payable(fund: FundRules, who: Applicant, taken: ReadonlySet<CostKind> = new Set()): number {
  const sum = sumOf(who.requested.filter((line) => fund.covers.includes(line.kind) && !taken.has(line.kind)));
  return fund.capPerPersonMinor === null ? sum : Math.min(sum, fund.capPerPersonMinor);
}

/**
 * Why somebody without an award has none, as far as the numbers say it: not eligible, nothing covered, or not enough
 * left for what was asked. Null when some fund could pay in full: then it is the committee's choice, and no reason is made up.
 */
export function notFundedBecause(
  who: Applicant,
  funds: readonly (FundRules & { leftMinor: number })[],
): string | null {
  if (funds.length === 0) return null;
  const short: string[] = [];
  for (const fund of funds) {
    if (notEligibleBecause(fund, who)) continue;
    const wanted = payable(fund, who);
    if (wanted === 0) continue;
    if (fund.leftMinor >= wanted) return null;
    short.push(`${fund.letter} ${formatGrant(fund.leftMinor, fund.currency, false)}`);
  }
  if (short.length > 0) return `No fund has enough left: ${short.join(', ')}.`;
  const every = funds.map(
    (fund) => `${fund.letter}: ${notEligibleBecause(fund, who) ?? 'pays none of the costs asked for'}`,
  );
  return `No fund fits. ${every.join(' · ')}.`;
}

export interface Awarded {
  stage: string;
  flags: readonly GrantFlag[];
  country: string | null;
  score: number | null;
  requested: readonly AwardLine[];
  lines: readonly AwardLine[];
}

/** The fund's conditions, each checked against its awards, with the fact that shows it. */
export function conditionsOf(
  fund: FundRules,
  awards: readonly Awarded[],
): { text: string; met: boolean; fact: string | null }[] {
  const money = (amount: number): string => formatGrant(amount, fund.currency);
  const total = awards.reduce((sum, award) => sum + sumOf(award.lines), 0);
  const list = [
    {
      text: `Not more than ${money(fund.budgetMinor)} together`,
      met: total <= fund.budgetMinor,
      fact: null as string | null,
    },
  ];
  const cap = fund.capPerPersonMinor;
  if (cap !== null)
    list.push({
      text: `No award above ${money(cap)}`,
      met: awards.every((award) => sumOf(award.lines) <= cap),
      fact: null,
    });
  list.push({
    text: 'No award above the request',
    met: awards.every((award) =>
      award.lines.every((line) => line.amountMinor <= amountOf(award.requested, line.kind)),
    ),
    fact: null,
  });
  list.push({
    text: `Only ${listInWords(fund.covers.map((kind) => costKindNames[kind].toLowerCase()))}`,
    met: awards.every((award) => award.lines.every((line) => fund.covers.includes(line.kind))),
    fact: null,
  });
  const words = eligibilityWords(fund.eligibility);
  if (words) {
    const fitting = awards.filter((award) => !notEligibleBecause(fund, award)).length;
    list.push({
      text: words,
      met: fitting === awards.length,
      fact: awards.length > 0 ? `${fitting} of ${awards.length}` : null,
    });
  }
  for (const floor of fund.floors) list.push(floorCondition(fund, floor, awards, total));
  return list;
}

function floorCondition(fund: FundRules, floor: FloorShare, awards: readonly Awarded[], total: number) {
  const group = awards
    .filter((award) => award.stage === floor.group || award.flags.includes(floor.group as GrantFlag))
    .reduce((sum, award) => sum + sumOf(award.lines), 0);
  const base = floor.of === 'budget' ? fund.budgetMinor : total;
  const text = `At least ${floor.percent} % of ${floor.of === 'budget' ? 'the budget' : 'what is awarded'} to: ${groupName(floor.group).toLowerCase()}`;
  return {
    text,
    met: group * 100 >= floor.percent * base,
    fact: `${formatGrant(group, fund.currency, false)} of ${formatGrant(base, fund.currency, false)}`,
  };
}

/** `Stage student or doctoral; affiliation in NO, SE`; '' when everybody is eligible. */
export function eligibilityWords({
  stages,
  countries,
  notCountries,
  flagsAny,
  minScore,
}: Eligibility): string {
  const parts = [
    stages.length > 0 && `stage ${stages.map((stage) => groupName(stage).toLowerCase()).join(' or ')}`,
    countries.length > 0 && `affiliation in ${countries.join(', ')}`,
    notCountries.length > 0 && `affiliation not in ${notCountries.join(', ')}`,
    flagsAny.length > 0 && flagsAny.map((flag) => groupName(flag).toLowerCase()).join(' or '),
    minScore !== null && `score ${minScore} or more`,
  ].filter((part): part is string => typeof part === 'string');
  const text = parts.join('; ');
  return text && text[0]?.toUpperCase() + text.slice(1);
}

/** Same institution: the same words in any order of case and accents. Empty affiliations never match. */
export function sameInstitution(a: string, b: string): boolean {
  const fold = (text: string): string =>
    foldCase(text)
      .replace(/[^\p{L}\p{N}]+/gu, ' ')
      .trim();
  return fold(a) !== '' && fold(a) === fold(b);
}
