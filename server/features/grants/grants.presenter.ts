import type { Evidence, Fund } from '@shared/features/grants/grants.contract';
import type { BoardRow } from '@shared/features/grants/grants-committee.contract';
import type { FunderAward } from '@shared/features/grants/grants-funder.contract';
import {
  canStepAward,
  notEligibleBecause,
  notFundedBecause,
  payable,
  sumOf,
} from '@shared/features/grants/grants.rules';
import { regionOf } from '@shared/features/grants/regions';
import type { Actor } from '@server/http/authorize';
import type { AwardCase, FundCase, GrantCase } from './grants-cases.service';
import type { AwardTalkRow, GrantEvidenceRow } from './grants.model';
import { canEditFunds, canInviteFunder, type Conflict } from './grants.policy';

export const presentEvidence = (row: GrantEvidenceRow): Evidence => ({
  id: row.id,
  kind: row.kind,
  fileName: row.fileName,
  bytes: row.bytes,
  type: row.type,
  uploadedAt: row.createdAt.toISOString(),
});

export const presentTalk = (row: AwardTalkRow) => ({
  from: row.side,
  text: row.text,
  at: row.createdAt.toISOString(),
});

export function presentFund(fund: FundCase, actor: Actor, funders: string[]): Fund {
  const {
    id,
    name,
    funder,
    budgetMinor,
    currency,
    covers,
    eligibility,
    capPerPersonMinor,
    floors,
    showScores,
    version,
    eventId,
  } = fund.row;
  return {
    id,
    name,
    funder,
    budgetMinor,
    currency,
    covers,
    eligibility,
    capPerPersonMinor,
    floors,
    showScores,
    version,
    letter: fund.rules.letter,
    awards: fund.awards,
    awardedMinor: fund.awardedMinor,
    leftMinor: fund.leftMinor,
    funders,
    can: { edit: canEditFunds(actor, eventId), inviteFunder: canInviteFunder(actor) },
  };
}

/** An application as the committee sees it. In conflict, nothing but the reference. */
export function presentBoardRow(
  grant: GrantCase,
  funds: readonly FundCase[],
  view: { name: string; conflict: Conflict; hidden: boolean; seesScores: boolean; myScore: number | null },
): BoardRow {
  const { row, who } = grant;
  const base = {
    id: row.id,
    reference: row.reference,
    conflict: view.conflict,
    rank: null,
    myScore: view.myScore,
  };
  if (view.hidden)
    return {
      ...base,
      person: null,
      score: null,
      scores: 0,
      requested: [],
      requestedMinor: 0,
      awards: [],
      notEligible: [],
      reason: null,
      decision: null,
    };
  const awards = grant.awards
    .filter((award) => award.row.state !== 'returned')
    .map((award) => presentAward(award, grant, funds));
  return {
    ...base,
    person: {
      printedName: view.name,
      affiliation: row.affiliation,
      country: row.country,
      stage: row.stage ?? 'other',
    },
    score: view.seesScores ? who.score : null,
    scores: grant.reviews.filter((review) => !review.conflict).length,
    requested: [...who.requested],
    requestedMinor: sumOf(who.requested),
    awards,
    // A minimum score tells about the mean: said only to those who may know it.
    notEligible: funds
      .filter((fund) => notEligibleBecause(view.seesScores ? fund.rules : withoutScore(fund), who))
      .map((fund) => fund.rules.letter),
    reason:
      awards.length > 0 || !view.seesScores
        ? null
        : notFundedBecause(
            who,
            funds.map((fund) => ({ ...fund.rules, leftMinor: fund.leftMinor })),
          ),
    decision: row.decision,
  };
}

const withoutScore = (fund: FundCase) => ({ eligibility: { ...fund.rules.eligibility, minScore: null } });

function presentAward(award: AwardCase, grant: GrantCase, funds: readonly FundCase[]) {
  const fund = funds.find((candidate) => candidate.row.id === award.row.fundId);
  const totalMinor = sumOf(award.lines);
  const full = fund ? payable({ ...fund.rules, capPerPersonMinor: null }, grant.who) : totalMinor;
  const capped = fund?.rules.capPerPersonMinor === totalMinor && totalMinor < full;
  return {
    id: award.row.id,
    fundId: award.row.fundId,
    state: award.row.state,
    lines: award.lines,
    totalMinor,
    version: award.row.version,
    capped,
  };
}

/**
 * What a funder sees of an award. This is the whole list: no name, address, institution, country, motivation,
 * document, diet, health or bank data; the score only where the committee shows it.
 */
export function presentFunderAward(
  award: AwardCase,
  grant: GrantCase,
  talk: readonly AwardTalkRow[],
  showScores: boolean,
): FunderAward {
  const { state, version, id } = award.row;
  const { who, row } = grant;
  const decidable = ['proposed', 'queried', 'approved'].includes(state);
  return {
    id,
    reference: row.reference,
    stage: row.stage ?? 'other',
    region: regionOf(row.country),
    score: showScores ? who.score : null,
    requested: [...who.requested],
    requestedMinor: sumOf(who.requested),
    lines: award.lines,
    awardMinor: sumOf(award.lines),
    state,
    talk: talk.map(presentTalk),
    can: {
      approve: canStepAward(state, 'approved'),
      query: decidable && canStepAward(state, 'queried'),
      undo: decidable && canStepAward(state, 'proposed'),
    },
    version,
  };
}
