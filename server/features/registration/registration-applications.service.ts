import { Op } from 'sequelize';
import type {
  ApplicationRow as ApplicationListRow,
  ApplicationState,
} from '@shared/features/registration/registration.contract';
import { canStep } from '@shared/features/registration/registration.rules';
import { localToInstant } from '@shared/lib/time';
import { conflict, forbidden, notFound } from '@shared/http/problem';
import type { Page } from '@shared/http/page';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { holds, type Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import {
  accountsById,
  recordAudit,
  systemActor,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import { eventById, requireEvent } from '@server/features/events/events.service';
import { applicationDecided, applicationReceived } from './registration.jobs';
import { ApplicationRow } from './registration.model';
import {
  applicationOf,
  placesOf,
  presentApplication,
  registrationOf,
  registrationsOf,
} from './registration.service';

/** Applies; in an event with open registration it is the waiting list, and only when there is no place. @throws 409. */
export async function applyForPlace(
  actor: Actor,
  slug: string,
  input: { motivation: string; background: string },
  now: Date,
) {
  const event = await requireEvent(slug);
  if (event.state === 'draft') throw notFound('This event');
  if (!['announced', 'open', 'running'].includes(event.state))
    throw conflict('registration.closed', 'The event is over.');
  const row = await transaction(async () => {
    if (await registrationOf(event.id, actor.accountId))
      throw conflict('registration.exists', 'You are registered already.');
    const before = await applicationOf(event.id, actor.accountId);
    // Who let an offer lapse may stand at the end of the waiting list again.
    if (before && event.admission === 'open' && before.state === 'declined')
      await before.update({ state: 'withdrawn' });
    else if (before) throw conflict('registration.applied', 'You have applied already.');
    if (event.admission === 'open' && (await placesOf(event.id, now)).free > 0)
      throw conflict('registration.free', 'There are places: register directly.');
    const state: ApplicationState = event.admission === 'open' ? 'waiting' : 'received';
    const made = await ApplicationRow.create({
      id: newId(),
      eventId: event.id,
      accountId: actor.accountId,
      state,
      ...input,
    });
    await recordAudit({
      actor,
      action: 'registration.applied',
      subject: 'application',
      subjectId: made.id,
      eventId: event.id,
      after: { state },
    });
    await announce(applicationReceived, { applicationId: made.id });
    return made;
  });
  return presentApplication(row);
}

export async function withdrawApplication(actor: Actor, slug: string, version: number) {
  const event = await requireEvent(slug);
  const row = await applicationOf(event.id, actor.accountId);
  if (!row) throw notFound('Your application');
  await transaction(async () => {
    sameVersion(row.version, version);
    if (!canStep(row.state, 'withdrawn'))
      throw conflict('registration.step', `The application is ${row.state}.`);
    await row.update({ state: 'withdrawn' });
    await recordAudit({
      actor,
      action: 'registration.application_withdrawn',
      subject: 'application',
      subjectId: row.id,
      eventId: event.id,
    });
  });
  await offerFreedPlaces(event.id, new Date());
  return presentApplication(row);
}

function presentRow(
  row: ApplicationRow,
  person: PersonView | undefined,
  registered: boolean,
): ApplicationListRow {
  return {
    ...presentApplication(row),
    accountId: row.accountId,
    printedName: person?.printedName ?? '',
    affiliation: person?.affiliation ?? '',
    country: person?.country ?? null,
    careerStage: person?.careerStage ?? null,
    appliedAt: row.createdAt.toISOString(),
    registered,
  };
}

export async function listApplications(
  eventId: string,
  query: { cursor?: string; limit: number; state?: ApplicationState },
): Promise<Page<ApplicationListRow>> {
  const rows = await ApplicationRow.findAll({
    where: {
      eventId,
      ...(query.state && { state: query.state }),
      ...(query.cursor && { id: { [Op.gt]: query.cursor } }),
    },
    order: ['id'],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  const people = await accountsById(page.map((row) => row.accountId));
  const registered = new Set(
    (await registrationsOf(eventId)).filter((row) => row.state !== 'cancelled').map((row) => row.accountId),
  );
  return {
    items: page.map((row) => presentRow(row, people.get(row.accountId), registered.has(row.accountId))),
    next: rows.length > query.limit ? (page[page.length - 1]?.id ?? null) : null,
  };
}

/** Offers a place, puts on the waiting list, or declines. An offer keeps a place; there must be one. @throws 409, 412. */
export async function decideApplication(
  actor: Actor,
  eventId: string,
  applicationId: string,
  version: number | undefined,
  input: { decision: 'offered' | 'waiting' | 'declined'; note: string; answerBy: string | null },
  now: Date,
): Promise<ApplicationListRow> {
  if (!holds(actor, 'organiser', eventId)) throw forbidden();
  const event = await eventById(eventId);
  const row = await transaction(async () => {
    const application = await ApplicationRow.findOne({ where: { id: applicationId, eventId } });
    if (!application) throw notFound('This application');
    if (version !== undefined) sameVersion(application.version, version);
    if (!canStep(application.state, input.decision))
      throw conflict(
        'registration.step',
        `A ${application.state} application can’t become ${input.decision}.`,
      );
    if (input.decision === 'offered' && (await placesOf(eventId, now)).free === 0)
      throw conflict(
        'registration.full',
        'No place is free. Put the person on the waiting list, or raise the capacity.',
      );
    const before = application.state;
    const answerBy =
      input.decision === 'offered' && input.answerBy
        ? new Date(localToInstant(input.answerBy, '23:59', event.timeZone))
        : null;
    await application.update({ state: input.decision, note: input.note, answerBy });
    await recordAudit({
      actor,
      action: 'registration.application_decided',
      subject: 'application',
      subjectId: applicationId,
      eventId,
      before: { state: before },
      after: { state: input.decision },
    });
    await announce(applicationDecided, { applicationId, decision: input.decision });
    return application;
  });
  const people = await accountsById([row.accountId]);
  return presentRow(row, people.get(row.accountId), (await registrationOf(eventId, row.accountId)) !== null);
}

const OFFER_DAYS = 5;

/** Places that have become free go to the waiting list in its order, each for five days. Only where registration is open to all. */
export async function offerFreedPlaces(eventId: string, now: Date): Promise<number> {
  const event = await eventById(eventId);
  if (event.admission !== 'open') return 0;
  return transaction(async () => {
    let offered = 0;
    for (let { free } = await placesOf(eventId, now); free > 0; free--) {
      const next = await ApplicationRow.findOne({ where: { eventId, state: 'waiting' }, order: ['id'] });
      if (!next) break;
      await next.update({ state: 'offered', answerBy: new Date(now.getTime() + OFFER_DAYS * 86_400_000) });
      await recordAudit({
        actor: systemActor,
        action: 'registration.application_decided',
        subject: 'application',
        subjectId: next.id,
        eventId,
        before: { state: 'waiting' },
        after: { state: 'offered' },
      });
      await announce(applicationDecided, { applicationId: next.id, decision: 'offered' });
      offered += 1;
    }
    return offered;
  });
}

/** Offers that were not taken in time lapse, and the next on the list is asked. */
export async function lapseOffers(now: Date): Promise<number> {
  const late = await ApplicationRow.findAll({ where: { state: 'offered', answerBy: { [Op.lt]: now } } });
  let lapsed = 0;
  for (const row of late) {
    if (await registrationOf(row.eventId, row.accountId)) continue;
    await transaction(async () => {
      await row.update({ state: 'declined', note: 'The offer was not taken in time.' });
      await recordAudit({
        actor: systemActor,
        action: 'registration.offer_lapsed',
        subject: 'application',
        subjectId: row.id,
        eventId: row.eventId,
      });
    });
    await offerFreedPlaces(row.eventId, now);
    lapsed += 1;
  }
  return lapsed;
}

export const undecidedApplications = (eventId: string): Promise<number> =>
  ApplicationRow.count({ where: { eventId, state: 'received' } });
