import { env } from '@server/env';
import { on, type Reaction } from '@server/jobs/job';
import { queueMessage } from '@server/mail/outbox';
import { accountById, holdersOf, type PersonView } from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { caseOf, grantDates } from './grants-cases.service';
import {
  awardAnswered,
  awardProposed,
  awardQueried,
  awardQueryAnswered,
  awardsOffered,
  grantApplied,
  grantNotAwarded,
} from './grants.jobs';
import {
  awardLapsedLetter,
  awardReturnedLetter,
  awardsOfferedLetter,
  awardsProposedLetter,
  grantReceivedLetter,
  notAwardedLetter,
  queryAnsweredLetter,
  queryLetter,
} from './grants.mail';
import { AwardRow, AwardTalkRow, FundRow, GrantApplicationRow } from './grants.model';

type Mail = { subject: string; text: string; html: string };
type Event = Awaited<ReturnType<typeof eventById>>;

async function partsOf(applicationId: string) {
  const row = await GrantApplicationRow.findByPk(applicationId);
  if (!row) return null;
  const [event, person, grant, dates] = await Promise.all([
    eventById(row.eventId),
    accountById(row.accountId),
    caseOf(row),
    grantDates(row.eventId),
  ]);
  return {
    row,
    event,
    person: person as PersonView,
    grant,
    dates,
    reference: row.reference,
    url: `${env.BASE_URL}/events/${event.slug}/grant`,
  };
}

/** Null when the award was taken back meanwhile. */
async function awardParts(awardId: string) {
  const award = await AwardRow.findByPk(awardId);
  const fund = award && (await FundRow.findByPk(award.fundId));
  const row = award && (await GrantApplicationRow.findByPk(award.applicationId));
  return award && fund && row ? { award, fund, row, event: await eventById(row.eventId) } : null;
}

function send(
  letter: string,
  event: Event,
  person: PersonView,
  subjectId: string,
  key: string,
  mail: Mail,
): Promise<void> {
  return queueMessage({
    letter,
    accountId: person.id,
    eventId: event.id,
    subjectId,
    to: { name: person.printedName, address: person.email },
    replyTo: event.contactEmail,
    dedupKey: `${letter}:${key}:${person.id}`,
    mail,
  });
}

/** Organisers of the event; the committee's page is theirs. */
async function toOrganisers(
  letter: string,
  event: Event,
  subjectId: string,
  key: string,
  mail: (person: PersonView, url: string) => Mail,
): Promise<void> {
  for (const person of await holdersOf('event', event.id, 'organiser'))
    await send(
      letter,
      event,
      person,
      subjectId,
      key,
      mail(person, `${env.BASE_URL}/organise/${event.slug}/grants`),
    );
}

async function toFunders(
  letter: string,
  fund: FundRow,
  event: Event,
  key: string,
  mail: (person: PersonView, url: string) => Mail,
): Promise<void> {
  for (const person of await holdersOf('fund', fund.id, 'funder'))
    await send(letter, event, person, fund.id, key, mail(person, `${env.BASE_URL}/funds/${fund.id}`));
}

const toApplicant: Reaction[] = [
  on(grantApplied, 'letter', async ({ applicationId }, job) => {
    const parts = await partsOf(applicationId);
    if (!parts) return;
    const { event, person, grant, dates, reference, url } = parts;
    await send(
      'grants.received',
      event,
      person,
      applicationId,
      job.id,
      grantReceivedLetter({
        name: person.printedName,
        event,
        reference,
        requested: [...grant.who.requested],
        decidedAt: dates.decidedAt,
        url,
      }),
    );
  }),
  on(awardsOffered, 'letter', async ({ applicationId, answerBy }, job) => {
    const parts = await partsOf(applicationId);
    if (!parts) return;
    const { event, person, grant, reference, url } = parts;
    const names = new Map(
      (await FundRow.findAll({ where: { id: grant.awards.map((award) => award.row.fundId) } })).map(
        (fund) => [fund.id, fund.name],
      ),
    );
    const offered = grant.awards.filter((award) => award.row.state === 'offered');
    if (offered.length === 0) return;
    const lines = offered.flatMap((award) =>
      award.lines.map((line) => ({ ...line, fund: names.get(award.row.fundId) ?? '' })),
    );
    await send(
      'grants.offered',
      event,
      person,
      applicationId,
      job.id,
      awardsOfferedLetter({ name: person.printedName, event, reference, lines, answerBy, url }),
    );
  }),
  on(grantNotAwarded, 'letter', async ({ applicationId }) => {
    const parts = await partsOf(applicationId);
    if (!parts) return;
    const { event, person, reference, url } = parts;
    await send(
      'grants.not_awarded',
      event,
      person,
      applicationId,
      applicationId,
      notAwardedLetter({ name: person.printedName, event, reference, url }),
    );
  }),
] as unknown as Reaction[];

const toCommitteeAndFunders: Reaction[] = [
  on(awardAnswered, 'letter', async ({ applicationId, answer }, job) => {
    const parts = await partsOf(applicationId);
    if (!parts || answer === 'accepted') return;
    const { event, person, reference, url } = parts;
    if (answer === 'lapsed')
      await send(
        'grants.lapsed',
        event,
        person,
        applicationId,
        job.id,
        awardLapsedLetter({ name: person.printedName, event, reference, url }),
      );
    await toOrganisers('grants.returned', event, applicationId, job.id, (organiser, page) =>
      awardReturnedLetter({
        name: organiser.printedName,
        event,
        reference,
        person: person.printedName,
        url: page,
      }),
    );
  }),
  // One letter a day at most: a committee proposes many awards in a row.
  on(awardProposed, 'tell the funder', async ({ fundId }) => {
    const fund = (await FundRow.findByPk(fundId)) as FundRow;
    const [event, dates] = await Promise.all([eventById(fund.eventId), grantDates(fund.eventId)]);
    const day = new Date().toISOString().slice(0, 10);
    await toFunders('grants.proposed', fund, event, `${fundId}:${day}`, (funder, url) =>
      awardsProposedLetter({
        name: funder.printedName,
        event,
        fund: fund.name,
        decideBy: dates.decidedAt,
        url,
      }),
    );
  }),
  on(awardQueried, 'ask the committee', async ({ awardId, talkId }) => {
    const parts = await awardParts(awardId);
    const talk = await AwardTalkRow.findByPk(talkId);
    if (!parts || !talk) return;
    const { event, fund, row } = parts;
    await toOrganisers('grants.query', event, awardId, talkId, (person, url) =>
      queryLetter({
        name: person.printedName,
        event,
        fund: fund.name,
        reference: row.reference,
        question: talk.text,
        url: `${url}?application=${row.id}`,
      }),
    );
  }),
  on(awardQueryAnswered, 'tell the funder', async ({ awardId, talkId }) => {
    const parts = await awardParts(awardId);
    const talk = await AwardTalkRow.findByPk(talkId);
    if (!parts || !talk) return;
    const { event, fund, row } = parts;
    await toFunders('grants.query_answered', fund, event, talkId, (person, url) =>
      queryAnsweredLetter({
        name: person.printedName,
        event,
        fund: fund.name,
        reference: row.reference,
        answer: talk.text,
        url,
      }),
    );
  }),
] as unknown as Reaction[];

export const grantReactions: readonly Reaction[] = [...toApplicant, ...toCommitteeAndFunders];
