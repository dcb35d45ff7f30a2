import type { BoardRow, GrantBoard, GrantDetail } from '@shared/features/grants/grants-committee.contract';
import { notFound } from '@shared/http/problem';
import { holds, type Actor } from '@server/http/authorize';
import { accountsById } from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { talksOfPerson } from '@server/features/talks/talks.service';
import {
  flagsOf,
  fundsOf,
  grantDates,
  openAwards,
  submittedCase,
  submittedCases,
  viewerOf,
  type FundCase,
  type GrantCase,
} from './grants-cases.service';
import { presentFunds } from './grants-funds.service';
import { AwardTalkRow, GrantApplicationRow, GrantEvidenceRow } from './grants.model';
import {
  canPropose,
  canScore,
  canSeeScores,
  conflictOf,
  isHidden,
  onCommittee,
  type Viewer,
} from './grants.policy';
import { presentBoardRow, presentEvidence, presentTalk } from './grants.presenter';

/** How one application looks to one member of the committee. */
export function lookAt(viewer: Viewer, grant: GrantCase, scoringIsLate: boolean) {
  const mine = grant.reviews.find((review) => review.reviewerId === viewer.actor.accountId);
  const conflict = conflictOf(viewer, grant.row, mine?.conflict ?? false);
  const hasScored = mine !== undefined && !mine.conflict;
  return {
    mine,
    conflict,
    hidden: isHidden(viewer, conflict),
    seesScores: canSeeScores(viewer, grant.row, { hasScored, scoringIsLate }),
    myScore: hasScored ? mine.score : null,
  };
}

/** By mean score, then by reference; those without a visible score last and without a rank. */
function ranked(rows: BoardRow[]): BoardRow[] {
  const sorted = [...rows].sort(
    (a, b) => (b.score ?? 0) - (a.score ?? 0) || a.reference.localeCompare(b.reference),
  );
  return sorted.map((row, index) => ({ ...row, rank: row.score === null ? null : index + 1 }));
}

/** Everything of the committee's page. */
export async function readBoard(actor: Actor, eventId: string, now: Date): Promise<GrantBoard> {
  const [event, cases, funds, dates, viewer] = await Promise.all([
    eventById(eventId),
    submittedCases(eventId),
    fundsOf(eventId),
    grantDates(eventId),
    viewerOf(actor),
  ]);
  const people = await accountsById(cases.map((grant) => grant.row.accountId));
  const late = isLate(dates.dueAt, now);
  const rows = cases.map((grant) =>
    presentBoardRow(grant, funds, {
      ...lookAt(viewer, grant, late),
      name: people.get(grant.row.accountId)?.printedName ?? '',
    }),
  );
  const counts = countsOf(cases);
  const proposes = canPropose(actor, eventId);
  const notYet = sendingRefused(dates.dueAt, counts, now);
  return {
    currency: event.currency,
    timeZone: event.timeZone,
    ...dates,
    rows: ranked(rows),
    funds: await presentFunds(actor, funds),
    counts: { ...counts, drafts: await GrantApplicationRow.count({ where: { eventId, state: 'draft' } }) },
    notYet,
    can: {
      score: onCommittee(actor, eventId),
      propose: proposes,
      send: proposes && notYet === null,
      addFund: proposes,
    },
  };
}

export const isLate = (dueAt: string | null, now: Date): boolean =>
  dueAt !== null && now.toISOString() > dueAt;

/** Numbers of an event's grants, by what has to be done. */
export function countsOf(cases: readonly GrantCase[]) {
  const has = (grant: GrantCase, ...states: string[]): boolean =>
    openAwards(grant).some((award) => states.includes(award.row.state));
  return {
    submitted: cases.length,
    awarded: cases.filter((grant) => openAwards(grant).length > 0).length,
    notFunded: cases.filter((grant) => openAwards(grant).length === 0).length,
    queried: cases.filter((grant) => has(grant, 'queried')).length,
    toOffer: cases.filter((grant) => has(grant, 'approved') && !has(grant, 'proposed', 'queried')).length,
    toDecline: cases.filter((grant) => openAwards(grant).length === 0 && grant.row.decision === null).length,
    waiting: cases.filter((grant) => has(grant, 'proposed', 'queried')).length,
  };
}

/** Why the letters can't go now, as a sentence; null when they can. */
export function sendingRefused(
  dueAt: string | null,
  counts: { toOffer: number; toDecline: number; waiting: number },
  now: Date,
): string | null {
  if (dueAt && !isLate(dueAt, now))
    return 'Applications can still come in. Letters go after the date for grant applications.';
  if (counts.toOffer + counts.toDecline === 0)
    return counts.waiting > 0
      ? 'Nothing to send yet: the funders have not approved the proposed awards.'
      : 'Nothing to send: every application has its letter.';
  return null;
}

/** Numbers for the overview and the run-up. */
export async function grantCounts(eventId: string): Promise<ReturnType<typeof countsOf>> {
  return countsOf(await submittedCases(eventId));
}

/** One application for the committee. @throws 404 when it is not there or a conflict of interest hides it. */
export async function readGrant(
  actor: Actor,
  eventId: string,
  applicationId: string,
  now: Date,
): Promise<GrantDetail> {
  const [grant, funds, dates, viewer] = await Promise.all([
    submittedCase(eventId, applicationId),
    fundsOf(eventId),
    grantDates(eventId),
    viewerOf(actor),
  ]);
  const look = lookAt(viewer, grant, isLate(dates.dueAt, now));
  if (look.hidden) throw notFound('This grant application');
  return presentDetail(actor, grant, funds, look, viewer);
}

async function presentDetail(
  actor: Actor,
  grant: GrantCase,
  funds: FundCase[],
  look: ReturnType<typeof lookAt>,
  viewer: Viewer,
): Promise<GrantDetail> {
  const { row } = grant;
  const people = await accountsById([row.accountId, ...grant.reviews.map((review) => review.reviewerId)]);
  const [evidence, talks, lines] = await Promise.all([
    GrantEvidenceRow.findAll({ where: { applicationId: row.id }, order: ['id'] }),
    row.talkId ? talksOfPerson(row.accountId) : [],
    AwardTalkRow.findAll({ where: { awardId: grant.awards.map((award) => award.row.id) }, order: ['id'] }),
  ]);
  const talk = talks.find((candidate) => candidate.id === row.talkId);
  const sees = look.seesScores && (look.mine !== undefined || holds(actor, 'organiser', row.eventId));
  return {
    row: presentBoardRow(grant, funds, { ...look, name: people.get(row.accountId)?.printedName ?? '' }),
    motivation: row.motivation,
    minUsefulMinor: row.minUsefulMinor,
    flags: flagsOf(row),
    talkTitle: talk ? talk.title || talk.label : null,
    submittedAt: row.submittedAt?.toISOString() ?? null,
    items: grant.items.map(({ kind, amountMinor, quantity, note }) => ({
      kind,
      amountMinor,
      quantity,
      note,
    })),
    evidence: evidence.map(presentEvidence),
    myReview: look.mine
      ? { score: look.mine.score, comment: look.mine.comment, conflict: look.mine.conflict }
      : null,
    reviews: sees
      ? grant.reviews
          .filter((review) => review.reviewerId !== actor.accountId && review.score !== null)
          .map((review) => ({
            reviewer: people.get(review.reviewerId)?.printedName ?? '',
            score: review.score as number,
            comment: review.comment,
          }))
      : null,
    talks: grant.awards
      .map((award) => ({
        awardId: award.row.id,
        lines: lines.filter((line) => line.awardId === award.row.id).map(presentTalk),
      }))
      .filter((entry) => entry.lines.length > 0),
    can: { score: canScore(viewer, row, look.conflict), propose: canPropose(actor, row.eventId) },
  };
}
