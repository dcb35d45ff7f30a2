import type { Applicant, FundRules } from '@shared/features/grants/grants.rules';
import { meanScore, sumOf } from '@shared/features/grants/grants.rules';
import type { AwardLine, CostKind, GrantFlag } from '@shared/features/grants/grants.contract';
import { localToInstant } from '@shared/lib/time';
import { notFound } from '@shared/http/problem';
import type { Actor } from '@server/http/authorize';
import { accountById } from '@server/features/accounts/accounts.service';
import { deadlinesOf, eventById } from '@server/features/events/events.service';
import {
  AwardLineRow,
  AwardRow,
  FundRow,
  GrantApplicationRow,
  GrantItemRow,
  GrantReviewRow,
} from './grants.model';
import type { Viewer } from './grants.policy';

export interface AwardCase {
  row: AwardRow;
  lines: AwardLine[];
}
/** One application with everything that a decision looks at. */
export interface GrantCase {
  row: GrantApplicationRow;
  items: GrantItemRow[];
  reviews: GrantReviewRow[];
  awards: AwardCase[];
  who: Applicant;
}
export interface FundCase {
  row: FundRow;
  rules: FundRules;
  awardedMinor: number;
  leftMinor: number;
  awards: number;
}

/** What makes somebody belong to a group, besides the stage. */
export function flagsOf(row: GrantApplicationRow): GrantFlag[] {
  return [
    ...(row.firstMeeting ? (['first_meeting'] as const) : []),
    ...(row.noOtherMoney ? (['no_other_money'] as const) : []),
    ...(row.talkId ? (['gives_talk'] as const) : []),
  ];
}

function by<T, K>(rows: readonly T[], keyOf: (row: T) => K): Map<K, T[]> {
  const groups = new Map<K, T[]>();
  for (const row of rows) {
    const group = groups.get(keyOf(row));
    if (group) group.push(row);
    else groups.set(keyOf(row), [row]);
  }
  return groups;
}

async function casesOf(rows: GrantApplicationRow[]): Promise<GrantCase[]> {
  const applicationId = rows.map((row) => row.id);
  const [items, reviews, awards, lines] = await Promise.all([
    GrantItemRow.findAll({ where: { applicationId } }),
    GrantReviewRow.findAll({ where: { applicationId }, order: ['id'] }),
    AwardRow.findAll({ where: { applicationId }, order: ['id'] }),
    AwardLineRow.findAll({ where: { applicationId }, order: ['id'] }),
  ]);
  const [itemsBy, reviewsBy, awardsBy, linesBy] = [
    by(items, (r) => r.applicationId),
    by(reviews, (r) => r.applicationId),
    by(awards, (r) => r.applicationId),
    by(lines, (r) => r.awardId),
  ];
  return rows.map((row) => {
    const own = itemsBy.get(row.id) ?? [];
    const scores = (reviewsBy.get(row.id) ?? []).flatMap((review) =>
      review.conflict || review.score === null ? [] : [review.score],
    );
    return {
      row,
      items: own,
      reviews: reviewsBy.get(row.id) ?? [],
      awards: (awardsBy.get(row.id) ?? []).map((award) => ({
        row: award,
        lines: (linesBy.get(award.id) ?? []).map(({ kind, amountMinor }) => ({ kind, amountMinor })),
      })),
      who: {
        stage: row.stage ?? 'other',
        country: row.country,
        flags: flagsOf(row),
        score: meanScore(scores),
        requested: own
          .filter((item) => item.amountMinor > 0)
          .map(({ kind, amountMinor }) => ({ kind, amountMinor })),
      },
    };
  });
}

/** All applications of an event that were handed in and not withdrawn. */
export const submittedCases = async (eventId: string): Promise<GrantCase[]> =>
  casesOf(await GrantApplicationRow.findAll({ where: { eventId, state: 'submitted' }, order: ['number'] }));

/** One of them. @throws 404. */
export async function submittedCase(eventId: string, id: string): Promise<GrantCase> {
  const row = await GrantApplicationRow.findOne({ where: { id, eventId, state: 'submitted' } });
  const [found] = row ? await casesOf([row]) : [];
  if (!found) throw notFound('This grant application');
  return found;
}

/** Whatever its state; for letters and the person's own page. */
export async function caseOf(row: GrantApplicationRow): Promise<GrantCase> {
  return (await casesOf([row]))[0] as GrantCase;
}

/** Awards that take money from a fund. */
export const openAwards = (grant: GrantCase): AwardCase[] =>
  grant.awards.filter((award) => award.row.state !== 'returned');

/** Which fund pays which kind for this person now. */
export const paidKinds = (grant: GrantCase, exceptFund?: string): Map<CostKind, string> =>
  new Map(
    openAwards(grant)
      .filter((award) => award.row.fundId !== exceptFund)
      .flatMap((award) => award.lines.map((line) => [line.kind, award.row.fundId] as const)),
  );

export function rulesOf(row: FundRow, index: number): FundRules {
  const { name, budgetMinor, currency, covers, eligibility, capPerPersonMinor, floors } = row;
  return {
    letter: String.fromCharCode(65 + (index % 26)),
    name,
    budgetMinor,
    currency,
    covers,
    eligibility,
    capPerPersonMinor,
    floors,
  };
}

/** Funds of an event in the order of entry, with what each has given. */
export async function fundsOf(eventId: string): Promise<FundCase[]> {
  const rows = await FundRow.findAll({ where: { eventId }, order: ['id'] });
  const awards = await AwardRow.findAll({ where: { fundId: rows.map((row) => row.id) } });
  const lines = by(
    await AwardLineRow.findAll({ where: { awardId: awards.map((award) => award.id), returned: false } }),
    (line) => line.awardId,
  );
  return rows.map((row, index) => {
    const own = awards.filter((award) => award.fundId === row.id && award.state !== 'returned');
    const awardedMinor = own.reduce((sum, award) => sum + sumOf(lines.get(award.id) ?? []), 0);
    return {
      row,
      rules: rulesOf(row, index),
      awardedMinor,
      leftMinor: row.budgetMinor - awardedMinor,
      awards: own.length,
    };
  });
}

export async function viewerOf(actor: Actor): Promise<Viewer> {
  return { actor, affiliation: (await accountById(actor.accountId))?.affiliation ?? '' };
}

/** Instants of the grant deadlines of an event, null where none is set. */
export async function grantDates(
  eventId: string,
): Promise<{ dueAt: string | null; decidedAt: string | null }> {
  const [event, deadlines] = await Promise.all([eventById(eventId), deadlinesOf(eventId)]);
  const at = (kind: string): string | null => {
    const row = deadlines.find((deadline) => deadline.kind === kind);
    return row ? localToInstant(row.date, row.time, event.timeZone) : null;
  };
  return { dueAt: at('grants_due'), decidedAt: at('grants_decided') };
}
