import type { FunderAward, FunderView } from '@shared/features/grants/grants-funder.contract';
import { canStepAward, conditionsOf } from '@shared/features/grants/grants.rules';
import { conflict, invalid, notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { fundsOf, grantDates, submittedCases, type AwardCase, type GrantCase } from './grants-cases.service';
import { awardApproved, awardQueried } from './grants.jobs';
import { AwardRow, AwardTalkRow, FundRow } from './grants.model';
import { presentFunderAward } from './grants.presenter';

async function fundCase(fundId: string) {
  const row = await FundRow.findByPk(fundId);
  const fund = row && (await fundsOf(row.eventId)).find((candidate) => candidate.row.id === fundId);
  if (!fund) throw notFound('This fund');
  const awards = (await submittedCases(fund.row.eventId)).flatMap((grant) =>
    grant.awards
      .filter((award) => award.row.fundId === fundId)
      .map((award): [AwardCase, GrantCase] => [award, grant]),
  );
  return { fund, awards };
}

const talksOf = async (ids: string[]): Promise<AwardTalkRow[]> =>
  AwardTalkRow.findAll({ where: { awardId: ids }, order: ['id'] });

/** The funder's page: the awards proposed to this fund by reference, stage and region, and the fund's conditions checked. */
export async function readFund(fundId: string): Promise<FunderView> {
  const { fund, awards } = await fundCase(fundId);
  const { row } = fund;
  const [event, dates, talks] = await Promise.all([
    eventById(row.eventId),
    grantDates(row.eventId),
    talksOf(awards.map(([award]) => award.row.id)),
  ]);
  const held = awards.filter(([award]) => award.row.state !== 'returned');
  return {
    id: row.id,
    name: row.name,
    funder: row.funder,
    instituteName: env.INSTITUTE_NAME,
    eventTitle: event.title,
    startsOn: event.startsOn,
    endsOn: event.endsOn,
    timeZone: event.timeZone,
    town: event.town,
    contactEmail: event.contactEmail,
    currency: row.currency,
    budgetMinor: row.budgetMinor,
    awardedMinor: fund.awardedMinor,
    decideBy: dates.decidedAt,
    showScores: row.showScores,
    conditions: conditionsOf(
      fund.rules,
      held.map(([award, grant]) => ({ ...grant.who, lines: award.lines })),
    ),
    awards: awards.map(([award, grant]) =>
      presentFunderAward(
        award,
        grant,
        talks.filter((talk) => talk.awardId === award.row.id),
        row.showScores,
      ),
    ),
  };
}

async function awardOfFund(fundId: string, awardId: string): Promise<AwardRow> {
  const award = await AwardRow.findOne({ where: { id: awardId, fundId } });
  if (!award) throw notFound('This award');
  return award;
}

async function eventIdOfFund(fundId: string): Promise<string> {
  return ((await FundRow.findByPk(fundId)) as FundRow).eventId;
}

/** Approves, queries with a question, or takes either back. @throws 404 for another fund's award, 409, 412, 422 without a question. */
export async function decideAward(
  actor: Actor,
  fundId: string,
  awardId: string,
  version: number,
  input: { decision: 'approved' | 'queried' | 'proposed'; question: string },
  now: Date,
): Promise<FunderAward> {
  await transaction(async () => {
    const award = await awardOfFund(fundId, awardId);
    sameVersion(award.version, version);
    await decide(actor, award, input, now);
  });
  const shown = (await readFund(fundId)).awards.find((award) => award.id === awardId);
  if (!shown) throw notFound('This award');
  return shown;
}

async function decide(
  actor: Actor,
  award: AwardRow,
  { decision, question }: { decision: 'approved' | 'queried' | 'proposed'; question: string },
  now: Date,
): Promise<void> {
  const before = award.state;
  if (!canStepAward(before, decision))
    throw conflict(
      'grants.step',
      before === decision
        ? `The award is ${before} already.`
        : `The award is ${before}; it can’t become ${decision} now. Write to the institute.`,
    );
  if (decision === 'queried' && question.length < 2) throw invalid({ question: 'Write your question.' });
  const eventId = await eventIdOfFund(award.fundId);
  await award.update({
    state: decision,
    decidedBy: decision === 'proposed' ? null : actor.accountId,
    decidedAt: decision === 'proposed' ? null : now,
  });
  await recordAudit({
    actor,
    action: `grants.award_${decision === 'proposed' ? 'decision_undone' : decision}`,
    subject: 'award',
    subjectId: award.id,
    eventId,
    before: { state: before },
    after: { state: decision, ...(question && { question }) },
  });
  if (decision === 'approved') await announce(awardApproved, { awardId: award.id, fundId: award.fundId });
  if (decision === 'queried') {
    const talk = await AwardTalkRow.create({
      id: newId(),
      awardId: award.id,
      authorId: actor.accountId,
      side: 'funder',
      text: question,
    });
    await announce(awardQueried, { awardId: award.id, talkId: talk.id });
  }
}

/** Approves all of them as they were read, or none. @throws 404, 409, 412. */
export async function approveAwards(
  actor: Actor,
  fundId: string,
  awards: readonly { id: string; version: number }[],
  now: Date,
): Promise<FunderView> {
  await transaction(async () => {
    for (const { id, version } of awards) {
      const award = await awardOfFund(fundId, id);
      sameVersion(award.version, version);
      await decide(actor, award, { decision: 'approved', question: '' }, now);
    }
  });
  return readFund(fundId);
}
