import type { Fund, FundInput } from '@shared/features/grants/grants.contract';
import { formatGrant } from '@shared/features/grants/grants.rules';
import { forbidden, invalid, notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { holdersOf, recordAudit } from '@server/features/accounts/accounts.service';
import { eventById, requireEvent } from '@server/features/events/events.service';
import { fundsOf, type FundCase } from './grants-cases.service';
import { FundRow } from './grants.model';
import { canEditFunds } from './grants.policy';
import { presentFund } from './grants.presenter';

export async function presentFunds(actor: Actor, funds: readonly FundCase[]): Promise<Fund[]> {
  return Promise.all(
    funds.map(async (fund) =>
      presentFund(
        fund,
        actor,
        (await holdersOf('fund', fund.row.id, 'funder')).map((person) => person.printedName),
      ),
    ),
  );
}

/** For the doors: the fund's id when it exists. */
export const fundIdOf = async (id: string): Promise<string | null> =>
  (await FundRow.findByPk(id, { attributes: ['id'] }))?.id ?? null;

/** Names of funds, for showing roles. */
export const fundsById = async (ids: Iterable<string>): Promise<Map<string, FundRow>> =>
  new Map((await FundRow.findAll({ where: { id: [...new Set(ids)] } })).map((row) => [row.id, row]));

async function oneFund(actor: Actor, eventId: string, id: string): Promise<Fund> {
  const fund = (await fundsOf(eventId)).find((candidate) => candidate.row.id === id);
  if (!fund) throw notFound('This fund');
  return (await presentFunds(actor, [fund]))[0] as Fund;
}

function refuseFund(input: FundInput, currency: string): void {
  const fields: Record<string, string> = {};
  if (input.currency !== currency)
    fields.currency = `The event is reckoned in ${currency}. Enter the budget in that currency.`;
  if (input.capPerPersonMinor !== null && input.capPerPersonMinor > input.budgetMinor)
    fields.capPerPersonMinor = 'The cap is above the budget.';
  const both = input.eligibility.countries.find((country) =>
    input.eligibility.notCountries.includes(country),
  );
  if (both) fields['eligibility.notCountries'] = `${both} is both let in and left out.`;
  if (Object.keys(fields).length > 0) throw invalid(fields);
}

/** Adds a fund to an event. @throws 403, 404, 422. */
export async function createFund(actor: Actor, slug: string, input: FundInput): Promise<Fund> {
  const event = await requireEvent(slug);
  if (!canEditFunds(actor, event.id)) throw forbidden();
  refuseFund(input, event.currency);
  const row = await transaction(async () => {
    const made = await FundRow.create({ id: newId(), eventId: event.id, ...input });
    await recordAudit({
      actor,
      action: 'grants.fund_created',
      subject: 'fund',
      subjectId: made.id,
      eventId: event.id,
      after: input,
    });
    return made;
  });
  return oneFund(actor, event.id, row.id);
}

/** Changes a fund. @throws 404 for another event's fund, 412, 422 when the budget would be below what is awarded. */
export async function updateFund(
  actor: Actor,
  eventId: string,
  fundId: string,
  version: number,
  input: FundInput,
): Promise<Fund> {
  if (!canEditFunds(actor, eventId)) throw forbidden();
  const event = await eventById(eventId);
  refuseFund(input, event.currency);
  await transaction(async () => {
    const fund = (await fundsOf(eventId)).find((candidate) => candidate.row.id === fundId);
    if (!fund) throw notFound('This fund');
    sameVersion(fund.row.version, version);
    if (input.budgetMinor < fund.awardedMinor)
      throw invalid({
        budgetMinor: `${formatGrant(fund.awardedMinor, fund.row.currency)} are awarded from this fund. Take awards back first, or enter at least that.`,
      });
    const { name, funder, budgetMinor, covers, eligibility, capPerPersonMinor, floors, showScores } =
      fund.row;
    await fund.row.update(input);
    await recordAudit({
      actor,
      action: 'grants.fund_changed',
      subject: 'fund',
      subjectId: fundId,
      eventId,
      before: { name, funder, budgetMinor, covers, eligibility, capPerPersonMinor, floors, showScores },
      after: input,
    });
  });
  return oneFund(actor, eventId, fundId);
}
