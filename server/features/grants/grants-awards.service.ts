import type { AwardLine } from '@shared/features/grants/grants.contract';
import type { GrantDetail } from '@shared/features/grants/grants-committee.contract';
import { refuseProposal } from '@shared/features/grants/grants.rules';
import { conflict, forbidden, notFound, stale } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { readGrant } from './grants-board.service';
import {
  fundsOf,
  openAwards,
  paidKinds,
  submittedCase,
  viewerOf,
  type AwardCase,
  type FundCase,
  type GrantCase,
} from './grants-cases.service';
import { AwardLineRow, AwardRow, AwardTalkRow } from './grants.model';
import { canPropose, conflictOf, isHidden } from './grants.policy';
import { awardProposed, awardQueryAnswered } from './grants.jobs';

/** The application, unless a conflict of interest keeps the actor away from it. */
async function caseForProposal(actor: Actor, eventId: string, applicationId: string): Promise<GrantCase> {
  if (!canPropose(actor, eventId)) throw forbidden();
  const grant = await submittedCase(eventId, applicationId);
  const mine = grant.reviews.find((review) => review.reviewerId === actor.accountId);
  const viewer = await viewerOf(actor);
  if (isHidden(viewer, conflictOf(viewer, grant.row, mine?.conflict ?? false)))
    throw notFound('This grant application');
  return grant;
}

/**
 * Proposes what a fund pays of one person's costs; no lines take the proposal back. Budget, caps, eligibility and
 * "one cost, one fund" are checked inside the transaction, so that the last euros are given once.
 * @throws 409 with a sentence that says what to do; 412 when somebody else has changed the award.
 */
export async function proposeAward(
  actor: Actor,
  eventId: string,
  applicationId: string,
  fundId: string,
  input: { lines: AwardLine[]; version: number | null },
  now: Date,
): Promise<GrantDetail> {
  await transaction(async () => {
    const grant = await caseForProposal(actor, eventId, applicationId);
    const funds = await fundsOf(eventId);
    const fund = funds.find((candidate) => candidate.row.id === fundId);
    if (!fund) throw notFound('This fund');
    const present = openAwards(grant).find((award) => award.row.fundId === fundId);
    refuseStep(present, input.version, fund);
    if (input.lines.length === 0) {
      if (present) await removeAwards(actor, eventId, present.row);
      return;
    }
    refuseMoney(grant, funds, fund, present, input.lines);
    await writeAward(actor, eventId, grant, fund, present, input.lines);
  });
  return readGrant(actor, eventId, applicationId, now);
}

function refuseStep(present: AwardCase | undefined, version: number | null, fund: FundCase): void {
  if ((present?.row.version ?? null) !== version) throw stale(present?.row.version ?? 0);
  const state = present?.row.state;
  if (state === 'approved')
    throw conflict(
      'grants.approved',
      `${fund.row.name} has approved this award. Ask its funder to undo that, then change it.`,
    );
  if (state === 'offered' || state === 'accepted')
    throw conflict('grants.step', `The award has been ${state}. The person can give it back.`);
}

function refuseMoney(
  grant: GrantCase,
  funds: FundCase[],
  fund: FundCase,
  present: AwardCase | undefined,
  lines: AwardLine[],
): void {
  const own = present?.lines.reduce((sum, line) => sum + line.amountMinor, 0) ?? 0;
  const names = new Map(funds.map((other) => [other.row.id, other.row.name]));
  const paidElsewhere = new Map(
    [...paidKinds(grant, fund.row.id)].map(([kind, id]) => [kind, names.get(id) ?? 'Another fund']),
  );
  const reason = refuseProposal({
    fund: fund.rules,
    who: grant.who,
    lines,
    spentMinor: fund.awardedMinor - own,
    paidElsewhere,
  });
  if (reason) throw conflict('grants.refused', reason, { leftMinor: fund.leftMinor + own });
}

async function writeAward(
  actor: Actor,
  eventId: string,
  grant: GrantCase,
  fund: FundCase,
  present: AwardCase | undefined,
  lines: AwardLine[],
): Promise<void> {
  const applicationId = grant.row.id;
  const award =
    present?.row ??
    (await AwardRow.create({
      id: newId(),
      fundId: fund.row.id,
      applicationId,
      state: 'proposed',
      proposedBy: actor.accountId,
    }));
  if (present) {
    await AwardLineRow.destroy({ where: { awardId: award.id } });
    award.changed('updatedAt', true);
    await award.update({ state: 'proposed', proposedBy: actor.accountId, updatedAt: new Date() });
  }
  for (const line of lines)
    await AwardLineRow.create({ id: newId(), awardId: award.id, applicationId, ...line });
  await recordAudit({
    actor,
    action: 'grants.award_proposed',
    subject: 'award',
    subjectId: award.id,
    eventId,
    before: present && { lines: present.lines },
    after: { fund: fund.row.name, reference: grant.row.reference, lines },
  });
  await announce(awardProposed, { awardId: award.id, fundId: fund.row.id });
}

/** Takes a proposal away as if it had never been; the audit trail keeps it. */
export async function removeAwards(actor: Actor, eventId: string, award: AwardRow): Promise<void> {
  const lines = await AwardLineRow.findAll({ where: { awardId: award.id } });
  await AwardTalkRow.destroy({ where: { awardId: award.id } });
  await AwardLineRow.destroy({ where: { awardId: award.id } });
  await award.destroy();
  await recordAudit({
    actor,
    action: 'grants.award_removed',
    subject: 'award',
    subjectId: award.id,
    eventId,
    before: { state: award.state, lines: lines.map(({ kind, amountMinor }) => ({ kind, amountMinor })) },
  });
}

/** Answers a funder's question; the award is proposed again. @throws 409 when there is no open question. */
export async function answerQuery(
  actor: Actor,
  eventId: string,
  awardId: string,
  version: number,
  text: string,
  now: Date,
): Promise<GrantDetail> {
  const award = await AwardRow.findByPk(awardId);
  if (!award) throw notFound('This award');
  await transaction(async () => {
    await caseForProposal(actor, eventId, award.applicationId);
    await award.reload();
    sameVersion(award.version, version);
    if (award.state !== 'queried')
      throw conflict('grants.no_question', 'There is no open question about this award.');
    await award.update({ state: 'proposed' });
    const talk = await AwardTalkRow.create({
      id: newId(),
      awardId,
      authorId: actor.accountId,
      side: 'committee',
      text,
    });
    await recordAudit({
      actor,
      action: 'grants.query_answered',
      subject: 'award',
      subjectId: awardId,
      eventId,
      after: { text },
    });
    await announce(awardQueryAnswered, { awardId, talkId: talk.id });
  });
  return readGrant(actor, eventId, award.applicationId, now);
}
