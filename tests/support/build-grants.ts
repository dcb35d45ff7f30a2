import type { FundInput, GrantInput } from '../../shared/features/grants/grants.contract';
import { applyForGrant } from '../../server/features/grants/grants-applications.service';
import { createFund } from '../../server/features/grants/grants-funds.service';
import { GrantApplicationRow } from '../../server/features/grants/grants.model';
import { systemActor, type PersonView } from '../../server/features/accounts/accounts.service';
import { register } from '../../server/features/registration/registration.service';
import { actorFor, buildAccount } from './build';
import { buildOpenEvent, registrationInput } from './build-registration';

export const fundInput = (over: Partial<FundInput> = {}): FundInput => ({
  name: 'Ness Bequest',
  funder: 'Ness Trust',
  budgetMinor: 200_000,
  currency: 'EUR',
  covers: ['travel', 'accommodation', 'subsistence'],
  eligibility: { stages: [], countries: [], notCountries: [], flagsAny: [], minScore: null },
  capPerPersonMinor: null,
  floors: [],
  showScores: true,
  ...over,
});

export const grantInput = (over: Partial<GrantInput> = {}): GrantInput => ({
  motivation: 'I work on lattices and would meet the three people whom I cite most often.',
  items: [
    { kind: 'travel', amountMinor: 98_000, quantity: null, note: 'Flight from the capital' },
    { kind: 'accommodation', amountMinor: 41_800, quantity: 4, note: '' },
  ],
  minUsefulMinor: 60_000,
  firstMeeting: true,
  noOtherMoney: false,
  talkId: null,
  ...over,
});

/** An open event with one fund (2,000 EUR), its funder, an organiser and a reviewer from other places than the applicants. */
export async function buildGrants(fund: Partial<FundInput> = {}) {
  const { event, category } = await buildOpenEvent();
  const made = await createFund(systemActor, event.slug, fundInput(fund));
  const organiser = await buildAccount({ affiliation: 'Tarnholt Institute' }, [
    { role: 'organiser', scope: 'event', scopeId: event.id },
  ]);
  const reviewer = await buildAccount({ affiliation: 'Kuura Polytechnic' }, [
    { role: 'reviewer', scope: 'event', scopeId: event.id },
  ]);
  const funder = await buildAccount({ affiliation: 'Ness Trust' }, [
    { role: 'funder', scope: 'fund', scopeId: made.id },
  ]);
  return { event, category, fund: made, organiser, reviewer, funder };
}

/** A registered person from Hanoi's region who has handed in a grant application. */
export async function buildApplicant(
  event: { id: string; slug: string },
  category: string,
  over: Partial<GrantInput> = {},
  person: Partial<Parameters<typeof buildAccount>[0]> = {},
) {
  const applicant: PersonView = await buildAccount({
    affiliation: 'Viện Toán Sông Hồng',
    country: 'VN',
    careerStage: 'doctoral',
    ...person,
  });
  const now = new Date();
  await register(await actorFor(applicant), event.slug, registrationInput(category), now);
  await applyForGrant(await actorFor(applicant), event.slug, grantInput(over), now);
  const row = (await GrantApplicationRow.findOne({
    where: { eventId: event.id, accountId: applicant.id },
  })) as GrantApplicationRow;
  return { applicant, id: row.id, reference: row.reference };
}
