import type { Overview } from '@shared/features/runup/runup.contract';
import { diets } from '@shared/features/registration/registration.contract';
import { dutiesOf, incomeByDay } from '@shared/features/runup/runup.rules';
import { owesAbstract } from '@shared/features/talks/talks.rules';
import { instantToLocal } from '@shared/lib/time';
import type { Actor } from '@server/http/authorize';
import { auditOfEvent } from '@server/features/accounts/accounts.service';
import { deadlinesOf, readEvent, requireEvent } from '@server/features/events/events.service';
import { moneyIn, odditiesOf } from '@server/features/finance/finance.service';
import { grantCounts } from '@server/features/grants/grants-board.service';
import { failedMessages } from '@server/features/messages/messages.service';
import { draftOf } from '@server/features/programme/programme.service';
import { undecidedApplications } from '@server/features/registration/registration-applications.service';
import { placesOf, registrationsOf } from '@server/features/registration/registration.service';
import { presencesOf, talkCounts, talksForProgramme } from '@server/features/talks/talks.service';

const DAY_MS = 86_400_000;

/** The overview of an event, all of it computed from the data of the features. */
export async function overviewOf(actor: Actor, slug: string, now: Date): Promise<Overview> {
  const event = await requireEvent(slug);
  const [
    detail,
    talks,
    presences,
    places,
    registrations,
    money,
    draft,
    deadlines,
    oddities,
    failed,
    undecided,
    grants,
    audit,
  ] = await Promise.all([
    readEvent(actor, slug, now),
    talksForProgramme(event.id),
    presencesOf(event.id),
    placesOf(event.id, now),
    registrationsOf(event.id),
    moneyIn(event.id),
    draftOf(event.id),
    deadlinesOf(event.id),
    odditiesOf(event.id),
    failedMessages(event.id),
    undecidedApplications(event.id),
    grantCounts(event.id),
    auditOfEvent(event.id, new Date(now.getTime() - DAY_MS), 12),
  ]);
  const today = instantToLocal(now, event.timeZone).date;
  const on = talks.filter((talk) => !['declined', 'withdrawn'].includes(talk.state));
  const speakers = on.flatMap((talk) => talk.people.filter((person) => person.part !== 'chair'));
  const stays = new Set(
    presences.filter((presence) => presence.arrivesAt).map((presence) => presence.accountId),
  );
  const present = registrations.filter((row) => row.state !== 'cancelled');
  const nameOf = (talk: (typeof talks)[number]): string =>
    talk.people.find((person) => person.part === 'speaker')?.printedName ?? talk.title;
  const later = today <= event.endsOn;
  return {
    duties: dutiesOf({
      slug,
      state: event.state,
      today,
      startsOn: event.startsOn,
      endsOn: event.endsOn,
      deadlines,
      missingSteps: detail.nextStates[0]?.missing ?? [],
      unanswered: on.filter((talk) => talk.invitation === 'invited').map(nameOf),
      missingAbstracts: later
        ? on
            .filter(
              (talk) => owesAbstract(talk.kind) && talk.state === 'accepted' && talk.abstractAt === null,
            )
            .map(nameOf)
        : [],
      submitted: on.filter((talk) => talk.state === 'submitted').length,
      toBePlaced: later ? draft.toBePlaced : 0,
      clashes: later ? draft.clashes.length : 0,
      unpaid: { people: places.reserved, amountMinor: money.openMinor, currency: money.currency },
      undecidedApplications: undecided,
      oddities,
      failedMessages: failed,
      speakersWithoutStay:
        today < event.startsOn
          ? [
              ...new Map(
                speakers
                  .filter((person) => person.part === 'speaker' && !stays.has(person.accountId))
                  .map((person) => [person.accountId, person.printedName]),
              ).values(),
            ]
          : [],
      grants: { undecided: grants.toDecline, queried: grants.queried, toTell: grants.toOffer },
    }),
    places,
    speakers: new Set(speakers.map((person) => person.accountId)).size,
    money: {
      currency: money.currency,
      receivedMinor: money.receivedMinor,
      openMinor: money.openMinor,
      steps: incomeByDay(
        money.steps.map((step) => ({
          on: instantToLocal(step.at, event.timeZone).date,
          amountMinor: step.amountMinor,
        })),
      ),
    },
    abstracts: await talkCounts(event.id),
    arrivals: arrivalsOf(present.map((row) => row.arrivesOn)),
    meals: {
      diets: diets
        .map((diet) => ({ diet, people: present.filter((row) => row.diet === diet).length }))
        .filter((row) => row.people > 0),
      allergies: present.filter((row) => row.allergies !== '').length,
    },
    log: audit.map((row) => ({ id: row.id, at: row.at.toISOString(), who: row.actorName, what: row.action })),
  };
}

/** People by day of arrival; those who have not said stand last. */
function arrivalsOf(days: readonly (string | null)[]): Overview['arrivals'] {
  const known = [...new Set(days.filter((day) => day !== null))].sort();
  const rows: Overview['arrivals'] = known.map((on) => ({
    on,
    people: days.filter((day) => day === on).length,
  }));
  const silent = days.filter((day) => day === null).length;
  return silent > 0 ? [...rows, { on: null, people: silent }] : rows;
}
