import { Op } from 'sequelize';
import type { MyGrant } from '@shared/features/grants/grants.contract';
import { sumOf } from '@shared/features/grants/grants.rules';
import { addDays, localToInstant } from '@shared/lib/time';
import { conflict, forbidden, invalid, notFound } from '@shared/http/problem';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { recordAudit, systemActor } from '@server/features/accounts/accounts.service';
import { requireEvent, todayAt } from '@server/features/events/events.service';
import { postJournalEntry } from '@server/features/finance/finance-ledger.service';
import { readMyGrant } from './grants-applications.service';
import { countsOf, sendingRefused } from './grants-board.service';
import {
  caseOf,
  grantDates,
  openAwards,
  submittedCases,
  type AwardCase,
  type GrantCase,
} from './grants-cases.service';
import { awardAnswered, awardsOffered, grantNotAwarded } from './grants.jobs';
import { AwardLineRow, AwardRow, FundRow, GrantApplicationRow } from './grants.model';
import { canPropose } from './grants.policy';

const ANSWER_DAYS_MAX = 120;

/**
 * Sends the decision letters, once to each person: offers where every award is approved, regrets where there is no
 * award. Applications that wait for a funder are held for the next time. @throws 409 with the reason, 422.
 */
export async function sendDecisions(
  actor: Actor,
  slug: string,
  answerByDate: string,
  now: Date,
): Promise<{ offered: number; notAwarded: number; held: number }> {
  const event = await requireEvent(slug);
  if (!canPropose(actor, event.id)) throw forbidden();
  const today = todayAt(event, now);
  if (answerByDate <= today) throw invalid({ answerBy: 'Choose a day after today.' });
  if (answerByDate > addDays(today, ANSWER_DAYS_MAX))
    throw invalid({ answerBy: `At most ${ANSWER_DAYS_MAX} days from today.` });
  const answerBy = new Date(localToInstant(answerByDate, '23:59', event.timeZone));
  const { dueAt } = await grantDates(event.id);
  return transaction(async () => {
    const cases = await submittedCases(event.id);
    const reason = sendingRefused(dueAt, countsOf(cases), now);
    if (reason) throw conflict('grants.not_yet', reason);
    const sent = { offered: 0, notAwarded: 0, held: 0 };
    for (const grant of cases) {
      const states = openAwards(grant).map((award) => award.row.state);
      if (states.some((state) => state === 'proposed' || state === 'queried')) sent.held += 1;
      else if (states.includes('approved')) {
        await offer(actor, grant, answerBy, now);
        sent.offered += 1;
      } else if (states.length === 0 && grant.row.decision === null) {
        await regret(actor, grant, now);
        sent.notAwarded += 1;
      }
    }
    return sent;
  });
}

async function offer(actor: Actor, grant: GrantCase, answerBy: Date, now: Date): Promise<void> {
  const { row } = grant;
  for (const award of openAwards(grant).filter((candidate) => candidate.row.state === 'approved')) {
    await award.row.update({ state: 'offered' });
    await postCommitment(award, 'offered', now);
    await recordAudit({
      actor,
      action: 'grants.award_offered',
      subject: 'award',
      subjectId: award.row.id,
      eventId: row.eventId,
      before: { state: 'approved' },
      after: { state: 'offered', lines: award.lines },
    });
  }
  await row.update({ decision: 'offered', decidedAt: now, answerBy });
  await announce(awardsOffered, { applicationId: row.id, answerBy: answerBy.toISOString() });
}

async function regret(actor: Actor, grant: GrantCase, now: Date): Promise<void> {
  await grant.row.update({ decision: 'not_awarded', decidedAt: now, answerBy: null });
  await recordAudit({
    actor,
    action: 'grants.not_awarded',
    subject: 'grant application',
    subjectId: grant.row.id,
    eventId: grant.row.eventId,
  });
  await announce(grantNotAwarded, { applicationId: grant.row.id });
}

/** The ledger: an offer binds the fund's money (expense against commitment); what comes back is reversed. */
async function postCommitment(award: AwardCase, step: 'offered' | 'returned', now: Date): Promise<void> {
  const fund = (await FundRow.findByPk(award.row.fundId)) as FundRow;
  const amount = sumOf(award.lines);
  const [expense, commitment] = [`grant expense:${fund.id}`, `grant commitments:${fund.id}`];
  const [debit, credit] = step === 'offered' ? [expense, commitment] : [commitment, expense];
  await postJournalEntry({
    voucher: `award:${award.row.id}:${step}`,
    memo: `Grant ${step}, ${fund.name}`,
    currency: fund.currency,
    at: now,
    lines: [
      { account: debit, debitMinor: amount, creditMinor: 0 },
      { account: credit, debitMinor: 0, creditMinor: amount },
    ],
  });
}

/** The person accepts what is offered, or gives it back; then the money is the fund's again. @throws 404, 409, 412. */
export async function answerAward(
  actor: Actor,
  slug: string,
  version: number,
  answer: 'accepted' | 'returned',
  now: Date,
): Promise<MyGrant> {
  const event = await requireEvent(slug);
  await transaction(async () => {
    const row = await GrantApplicationRow.findOne({
      where: { eventId: event.id, accountId: actor.accountId },
    });
    if (!row) throw notFound('Your grant application');
    sameVersion(row.version, version);
    const grant = await caseOf(row);
    const from = answer === 'accepted' ? ['offered'] : ['offered', 'accepted'];
    const awards = grant.awards.filter((award) => from.includes(award.row.state));
    if (awards.length === 0)
      throw conflict(
        'grants.step',
        answer === 'accepted' ? 'There is no open offer.' : 'There is no grant to give back.',
      );
    if (answer === 'accepted' && row.answerBy && now > row.answerBy)
      throw conflict('grants.late', 'The date for accepting is past. Write to the organisers.');
    await settle(actor, grant, awards, answer, now);
  });
  return readMyGrant(actor, slug, now);
}

async function settle(
  actor: Actor,
  grant: GrantCase,
  awards: AwardCase[],
  answer: 'accepted' | 'returned' | 'lapsed',
  now: Date,
): Promise<void> {
  const { row } = grant;
  const state = answer === 'accepted' ? 'accepted' : 'returned';
  for (const award of awards) {
    const before = award.row.state;
    if (state === 'returned') await giveBack(award, now);
    await award.row.update({ state, answeredAt: now });
    await recordAudit({
      actor,
      action: `grants.award_${answer}`,
      subject: 'award',
      subjectId: award.row.id,
      eventId: row.eventId,
      before: { state: before },
      after: { state },
    });
  }
  row.changed('updatedAt', true);
  await row.update({ updatedAt: now });
  await announce(awardAnswered, { applicationId: row.id, answer });
}

async function giveBack(award: AwardCase, now: Date): Promise<void> {
  const paid = await AwardLineRow.sum('paidMinor', { where: { awardId: award.row.id } });
  if (paid > 0)
    throw conflict('grants.paid', 'Part of the grant has been paid. Write to the finance office.');
  await AwardLineRow.update({ returned: true }, { where: { awardId: award.row.id } });
  await postCommitment(award, 'returned', now);
}

/** Offers that were not answered in time go back to their funds. Returns how many people lost one. */
export async function lapseAwards(now: Date): Promise<number> {
  const open = await AwardRow.findAll({ where: { state: 'offered' }, attributes: ['applicationId'] });
  const late = await GrantApplicationRow.findAll({
    where: { id: [...new Set(open.map((award) => award.applicationId))], answerBy: { [Op.lt]: now } },
  });
  for (const row of late) {
    await transaction(async () => {
      const grant = await caseOf(row);
      const awards = grant.awards.filter((award) => award.row.state === 'offered');
      if (awards.length > 0) await settle(systemActor, grant, awards, 'lapsed', now);
    });
  }
  return late.length;
}
