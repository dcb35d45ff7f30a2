import type { CostKind, MyGrant } from '@shared/features/grants/grants.contract';
import { sumOf } from '@shared/features/grants/grants.rules';
import type { PersonView } from '@server/features/accounts/accounts.service';
import { caseOf, type GrantCase } from './grants-cases.service';
import { FundRow, GrantEvidenceRow, type GrantApplicationRow } from './grants.model';
import { presentEvidence } from './grants.presenter';

/** What the person's page and its rules depend on, read once. */
export interface GrantDoorFacts {
  event: {
    id: string;
    title: string;
    slug: string;
    startsOn: string;
    endsOn: string;
    currency: string;
    timeZone: string;
  };
  basis: 'registration' | 'application' | null;
  dueAt: string | null;
  closedBecause: string | null;
  coveredKinds: CostKind[];
  person: PersonView;
  talks: { id: string; title: string }[];
}

/** The decision as the person may know it: nothing before the letters are sent. */
export async function decisionOf(grant: GrantCase): Promise<MyGrant['decision']> {
  const { row } = grant;
  if (!row.decision) return null;
  const told = grant.awards.filter((award) => ['offered', 'accepted', 'returned'].includes(award.row.state));
  const holding = told.filter((award) => award.row.state !== 'returned');
  const shown = holding.length > 0 ? holding : told;
  const names = new Map(
    (await FundRow.findAll({ where: { id: shown.map((award) => award.row.fundId) } })).map((fund) => [
      fund.id,
      fund.name,
    ]),
  );
  const lines = shown.flatMap((award) =>
    award.lines.map((line) => ({ ...line, fund: names.get(award.row.fundId) ?? '' })),
  );
  const outcome =
    row.decision === 'not_awarded'
      ? 'not_awarded'
      : holding.some((award) => award.row.state === 'offered')
        ? 'offered'
        : holding.length > 0
          ? 'accepted'
          : 'returned';
  return { outcome, totalMinor: sumOf(lines), lines, answerBy: row.answerBy?.toISOString() ?? null };
}

function inputOf({ row, items }: GrantCase): NonNullable<MyGrant['application']>['input'] {
  const { motivation, minUsefulMinor, firstMeeting, noOtherMoney, talkId } = row;
  return {
    motivation,
    minUsefulMinor,
    firstMeeting,
    noOtherMoney,
    talkId,
    items: items.map(({ kind, amountMinor, quantity, note }) => ({ kind, amountMinor, quantity, note })),
  };
}

/** The person's own page: what was written, what was decided, what can be done now. */
export async function presentMyGrant(
  door: GrantDoorFacts,
  row: GrantApplicationRow | null,
  now: Date,
): Promise<MyGrant> {
  const { event, person, closedBecause } = door;
  const grant = row && (await caseOf(row));
  const decision = grant ? await decisionOf(grant) : null;
  const evidence = row
    ? await GrantEvidenceRow.findAll({ where: { applicationId: row.id }, order: ['id'] })
    : [];
  const open = closedBecause === null;
  const inTime = !decision?.answerBy || now.toISOString() <= decision.answerBy;
  return {
    eventTitle: event.title,
    eventSlug: event.slug,
    startsOn: event.startsOn,
    endsOn: event.endsOn,
    currency: event.currency,
    timeZone: event.timeZone,
    dueAt: door.dueAt,
    closedBecause,
    basis: door.basis,
    coveredKinds: door.coveredKinds,
    talks: door.talks,
    profile: {
      printedName: person.printedName,
      affiliation: person.affiliation,
      country: person.country,
      careerStage: person.careerStage as MyGrant['profile']['careerStage'],
    },
    application: row &&
      grant && {
        reference: row.reference,
        state: row.state,
        input: inputOf(grant),
        evidence: evidence.map(presentEvidence),
        submittedAt: row.submittedAt?.toISOString() ?? null,
        savedAt: row.updatedAt.toISOString(),
      },
    decision,
    can: {
      edit: open && row?.state !== 'submitted',
      submit: open && row?.state === 'draft',
      withdraw: row !== null && row.state !== 'withdrawn' && !row.decision,
      accept: decision?.outcome === 'offered' && inTime,
      return: decision?.outcome === 'offered' || decision?.outcome === 'accepted',
    },
    version: row?.version ?? 0,
  };
}
