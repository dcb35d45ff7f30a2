import { randomInt } from 'node:crypto';
import { Op } from 'sequelize';
import type {
  DoorView,
  Places,
  RegistrationInput,
  RegistrationView,
} from '@shared/features/registration/registration.contract';
import {
  CODE_ALPHABET,
  RESERVATION_HOURS,
  closedBecause,
  holdsPlace,
  placesFree,
  stayErrors,
} from '@shared/features/registration/registration.rules';
import { localToInstant } from '@shared/lib/time';
import { conflict, invalid, notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { deadlinesOf, eventById, requireEvent } from '@server/features/events/events.service';
import {
  closeUnpaidOrder,
  feeTableOf,
  orderOf,
  placeOrder,
  presentOrder,
} from '@server/features/finance/finance.service';
import { refreshOrder, startCheckout } from '@server/features/finance/finance-payments.service';
import { registrationCancelled } from './registration.jobs';
import { ApplicationRow, RegistrationRow } from './registration.model';

type Event = Awaited<ReturnType<typeof eventById>>;

/** Counts of an event's places. Open offers keep a place until they are answered or run out. */
export async function placesOf(eventId: string, now = new Date()): Promise<Places> {
  const event = await eventById(eventId);
  const states = await RegistrationRow.findAll({
    where: { eventId, state: [...holdsPlace] },
    attributes: ['state'],
    raw: true,
  });
  const reserved = states.filter((row) => row.state === 'reserved').length;
  const offered = await openOffers(eventId, now);
  const waiting = await ApplicationRow.count({ where: { eventId, state: 'waiting' } });
  const free = placesFree({ capacity: event.capacity, taken: states.length, offered });
  return { capacity: event.capacity, paid: states.length - reserved, reserved, offered, free, waiting };
}

/** Offers that are neither out of date nor turned into a registration. */
async function openOffers(eventId: string, now: Date, exceptAccount?: string): Promise<number> {
  const offers = await ApplicationRow.findAll({
    where: {
      eventId,
      state: 'offered',
      [Op.or]: [{ answerBy: null }, { answerBy: { [Op.gt]: now } }],
      ...(exceptAccount && { accountId: { [Op.ne]: exceptAccount } }),
    },
    attributes: ['accountId'],
  });
  if (offers.length === 0) return 0;
  const registered = await RegistrationRow.count({
    where: { eventId, state: [...holdsPlace], accountId: offers.map((offer) => offer.accountId) },
  });
  return offers.length - registered;
}

export const registrationOf = (eventId: string, accountId: string): Promise<RegistrationRow | null> =>
  RegistrationRow.findOne({ where: { eventId, accountId, state: { [Op.ne]: 'cancelled' } } });

export const applicationOf = (eventId: string, accountId: string): Promise<ApplicationRow | null> =>
  ApplicationRow.findOne({ where: { eventId, accountId, state: { [Op.ne]: 'withdrawn' } } });

export const registrationsOf = (eventId: string): Promise<RegistrationRow[]> =>
  RegistrationRow.findAll({ where: { eventId }, order: ['id'] });

/** Takes part, so that material for participants is shown. */
export async function isParticipant(eventId: string, accountId: string): Promise<boolean> {
  const row = await registrationOf(eventId, accountId);
  return row !== null && ['registered', 'attended'].includes(row.state);
}

async function doorFacts(event: Event, accountId: string) {
  const deadlines = await deadlinesOf(event.id);
  const at = (kind: string): string | null => {
    const row = deadlines.find((deadline) => deadline.kind === kind);
    return row ? localToInstant(row.date, row.time, event.timeZone) : null;
  };
  const application = await applicationOf(event.id, accountId);
  const fees = await feeTableOf(event.id);
  return {
    fees,
    application,
    facts: {
      eventState: event.state,
      admission: event.admission,
      timeZone: event.timeZone,
      opensAt: at('registration_opens'),
      closesAt: at('registration_closes'),
      feeCategories: fees.categories.length,
      application: application && {
        state: application.state,
        answerBy: application.answerBy?.toISOString() ?? null,
      },
    },
  };
}

/** Everything that the registration pages show before and after. @throws 404 for a draft event. */
export async function readDoor(actor: Actor, slug: string, now: Date): Promise<DoorView> {
  const event = await requireEvent(slug);
  if (event.state === 'draft') throw notFound('This event');
  const { fees, application, facts } = await doorFacts(event, actor.accountId);
  const places = await placesOf(event.id, now);
  const registration = await registrationOf(event.id, actor.accountId);
  const reason = closedBecause(facts, now) ?? null;
  const { id, title, startsOn, endsOn, timeZone, town, admission, capacity } = event;
  return {
    eventTitle: title,
    eventSlug: slug,
    startsOn,
    endsOn,
    timeZone,
    town,
    admission,
    capacity,
    fees,
    open: reason === null && registration === null,
    closedBecause: registration ? 'You are registered.' : reason,
    opensAt: facts.opensAt,
    closesAt: facts.closesAt,
    placesLeft: placesFree({
      capacity,
      taken: places.paid + places.reserved,
      offered: await openOffers(id, now, actor.accountId),
    }),
    registration: registration && (await presentRegistration(registration)),
    application: application && presentApplication(application),
  };
}

export const presentApplication = (row: ApplicationRow) => ({
  id: row.id,
  state: row.state,
  motivation: row.motivation,
  background: row.background,
  answerBy: row.answerBy?.toISOString() ?? null,
  note: row.note,
  version: row.version,
});

export async function presentRegistration(row: RegistrationRow): Promise<RegistrationView> {
  const order = await orderOf(row.id);
  const { id, code, state, categoryId, arrivesOn, leavesOn, badgeName, diet, allergies, needs, version } =
    row;
  return {
    id,
    code,
    state,
    categoryId,
    arrivesOn,
    leavesOn,
    badgeName,
    diet,
    allergies,
    needs,
    checkedInAt: row.checkedInAt?.toISOString() ?? null,
    order: order && presentOrder(order),
    version,
  };
}

const newCode = (): string =>
  Array.from({ length: 8 }, () => CODE_ALPHABET[randomInt(CODE_ALPHABET.length)]).join('');

/**
 * Takes a place, if there is one: counted and taken in one transaction, so that the last place is given once.
 * @throws 409 `registration.full` (the waiting list is offered), `registration.closed`, `registration.exists`; 422.
 */
export async function register(
  actor: Actor,
  slug: string,
  input: RegistrationInput,
  now: Date,
): Promise<RegistrationView> {
  const errors = stayErrors(input);
  if (Object.keys(errors).length > 0) throw invalid(errors);
  const event = await requireEvent(slug);
  if (event.state === 'draft') throw notFound('This event');
  const { facts } = await doorFacts(event, actor.accountId);
  const reason = closedBecause(facts, now);
  if (reason) throw conflict('registration.closed', reason);
  const row = await transaction(async () => {
    if (await registrationOf(event.id, actor.accountId))
      throw conflict('registration.exists', 'You are registered already.');
    const taken = await RegistrationRow.count({ where: { eventId: event.id, state: [...holdsPlace] } });
    const free = placesFree({
      capacity: event.capacity,
      taken,
      offered: await openOffers(event.id, now, actor.accountId),
    });
    if (free === 0)
      throw conflict('registration.full', 'All places are taken. You can put yourself on the waiting list.');
    const { categoryId, extras, consent: _consent, ...fields } = input;
    const made = await RegistrationRow.create({
      id: newId(),
      eventId: event.id,
      accountId: actor.accountId,
      code: newCode(),
      state: 'reserved',
      categoryId,
      ...fields,
    });
    const reservedUntil = new Date(now.getTime() + RESERVATION_HOURS * 3_600_000);
    const order = await placeOrder({
      registrationId: made.id,
      eventId: event.id,
      accountId: actor.accountId,
      wish: { categoryId, extras },
      reservedUntil,
      now,
    });
    await recordAudit({
      actor,
      action: 'registration.reserved',
      subject: 'registration',
      subjectId: made.id,
      eventId: event.id,
      after: { order: order.number, totalMinor: order.totalMinor },
    });
    return made;
  });
  return presentRegistration(row);
}

/** One's own registration. @throws 404. */
export async function ownRegistration(actor: Actor, slug: string): Promise<RegistrationRow> {
  const event = await requireEvent(slug);
  const row = await registrationOf(event.id, actor.accountId);
  if (!row) throw notFound('Your registration');
  return row;
}

export async function changeRegistration(
  actor: Actor,
  slug: string,
  version: number,
  input: Pick<RegistrationInput, 'arrivesOn' | 'leavesOn' | 'badgeName' | 'diet' | 'allergies' | 'needs'>,
): Promise<RegistrationView> {
  const errors = stayErrors(input);
  if (Object.keys(errors).length > 0) throw invalid(errors);
  const row = await ownRegistration(actor, slug);
  await transaction(async () => {
    await row.reload();
    sameVersion(row.version, version);
    await row.update(input);
    await recordAudit({
      actor,
      action: 'registration.changed',
      subject: 'registration',
      subjectId: row.id,
      eventId: row.eventId,
      after: { arrivesOn: input.arrivesOn, leavesOn: input.leavesOn },
    });
  });
  return presentRegistration(row);
}

/** The offer that led to a registration ends with it; else it would go on keeping a place. In the ambient transaction. */
export async function useUpOffer(row: RegistrationRow): Promise<void> {
  const { eventId, accountId } = row;
  await ApplicationRow.update({ state: 'withdrawn' }, { where: { eventId, accountId, state: 'offered' } });
}

/** Gives the place back. An unpaid order is closed; money that was paid is refunded by the finance office. */
export async function cancelRegistration(
  actor: Actor,
  slug: string,
  version: number,
  now: Date,
): Promise<RegistrationView> {
  const row = await ownRegistration(actor, slug);
  await transaction(async () => {
    await row.reload();
    sameVersion(row.version, version);
    if (!['reserved', 'registered'].includes(row.state))
      throw conflict('registration.step', `The registration is ${row.state}.`);
    await row.update({ state: 'cancelled' });
    await useUpOffer(row);
    const order = await orderOf(row.id);
    if (order?.state === 'placed') await closeUnpaidOrder(order, 'cancelled', now);
    if (order?.state === 'paid' && order.totalMinor > 0)
      await order.update({ oddity: 'Cancelled after payment. The finance office decides about the refund.' });
    await recordAudit({
      actor,
      action: 'registration.cancelled',
      subject: 'registration',
      subjectId: row.id,
      eventId: row.eventId,
    });
    await announce(registrationCancelled, { registrationId: row.id });
  });
  return presentRegistration(row);
}

/** Opens the payment page of one's order. */
export async function payOwnOrder(actor: Actor, slug: string, now: Date): Promise<{ url: string }> {
  const row = await ownRegistration(actor, slug);
  const order = await orderOf(row.id);
  if (!order) throw notFound('Your order');
  const event = await eventById(row.eventId);
  const back = `${env.BASE_URL}/events/${event.slug}/registration`;
  return startCheckout(
    order.id,
    { title: event.title, email: actor.email, successUrl: `${back}?paid=1`, cancelUrl: `${back}?paid=0` },
    now,
  );
}

/** Asks the card service now; after it the answer shows what is true. */
export async function refreshOwnOrder(actor: Actor, slug: string, now: Date): Promise<RegistrationView> {
  const row = await ownRegistration(actor, slug);
  const order = await orderOf(row.id);
  if (order?.state === 'placed') await refreshOrder(order.id, now);
  await row.reload();
  return presentRegistration(row);
}
