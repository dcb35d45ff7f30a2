import { Op } from 'sequelize';
import type {
  EventDetail,
  EventInput,
  EventState,
  EventSummary,
} from '@shared/features/events/events.contract';
import { eventErrors, nextStates } from '@shared/features/events/events.rules';
import { slugFrom } from '@shared/lib/ids';
import { instantToLocal } from '@shared/lib/time';
import { conflict, forbidden, invalid, notFound } from '@shared/http/problem';
import type { Page } from '@shared/http/page';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { eventStateChanged } from './events.jobs';
import { BlockRow, DeadlineRow, EventRow, RoomRow } from './events.model';
import { canChangeState, canCreateEvents, canEditEvent } from './events.policy';
import { factsOf, presentEvent, presentSummary, type EventParts } from './events.presenter';

/** The event of an address. @throws 404. */
export async function requireEvent(slug: string): Promise<EventRow> {
  const event = await EventRow.bySlug(slug);
  if (!event) throw notFound('This event');
  return event;
}

/** For the doors. */
export const eventIdOf = async (slug: string): Promise<string | null> =>
  (await EventRow.bySlug(slug))?.id ?? null;

export async function eventById(id: string): Promise<EventRow> {
  const event = await EventRow.findByPk(id);
  if (!event) throw notFound('This event');
  return event;
}

export async function eventsById(ids: Iterable<string>): Promise<Map<string, EventRow>> {
  const rows = await EventRow.findAll({ where: { id: [...new Set(ids)] } });
  return new Map(rows.map((row) => [row.id, row]));
}

/** Every event that the public may see, by date. */
export const publicEvents = (): Promise<EventRow[]> =>
  EventRow.findAll({ where: { state: { [Op.ne]: 'draft' } }, order: ['startsOn', 'id'] });

export const allEvents = (): Promise<EventRow[]> => EventRow.findAll({ order: ['startsOn', 'id'] });

/** Rooms in their order. */
export const roomsOf = (eventId: string): Promise<RoomRow[]> =>
  RoomRow.findAll({ where: { eventId }, order: ['position', 'id'] });

/** Session blocks and breaks by day and start. */
export const blocksOf = (eventId: string): Promise<BlockRow[]> =>
  BlockRow.findAll({ where: { eventId }, order: ['day', 'startsAt'] });

export const deadlinesOf = (eventId: string): Promise<DeadlineRow[]> =>
  DeadlineRow.findAll({ where: { eventId } });

/** What a higher feature knows that the steps of an event depend on; given by routes.ts. */
const known: {
  feeCategories(eventId: string): Promise<number>;
  placedRooms(eventId: string): Promise<Set<string>>;
} = {
  feeCategories: async () => 0,
  placedRooms: async () => new Set(),
};
export function knowAboutEvents(more: Partial<typeof known>): void {
  Object.assign(known, more);
}

async function partsOf(event: EventRow): Promise<EventParts> {
  const [rooms, blocks, deadlines, feeCategories] = await Promise.all([
    roomsOf(event.id),
    blocksOf(event.id),
    deadlinesOf(event.id),
    known.feeCategories(event.id),
  ]);
  return { event, rooms, blocks, deadlines, feeCategories };
}

/** Today in the event's zone. */
export const todayAt = (event: { timeZone: string }, now: Date): string =>
  instantToLocal(now, event.timeZone).date;

/** An event as those who work on it get it. */
export async function readEvent(actor: Actor | null, slug: string, now = new Date()): Promise<EventDetail> {
  const event = await requireEvent(slug);
  return presentEvent(await partsOf(event), actor, todayAt(event, now));
}

/** Creates a draft. @throws 403; 422 with field errors; 409 when the address is taken. */
export async function createEvent(actor: Actor, input: EventInput & { slug?: string }): Promise<EventDetail> {
  if (!canCreateEvents(actor)) throw forbidden('The event office creates events.');
  refuse(eventErrors(input));
  const { slug: wanted, ...fields } = input;
  const slug = await transaction(async () => {
    const address = await freeSlug(
      wanted ?? slugFrom(`${fields.shortTitle} ${fields.startsOn.slice(0, 4)}`),
      wanted !== undefined,
    );
    const row = await EventRow.create({
      id: newId(),
      slug: address,
      state: 'draft',
      settings: {},
      ...fields,
    });
    await recordAudit({
      actor,
      action: 'events.created',
      subject: 'event',
      subjectId: row.id,
      eventId: row.id,
      after: { title: row.title },
    });
    return row.slug;
  });
  return readEvent(actor, slug);
}

async function freeSlug(slug: string, asked: boolean): Promise<string> {
  if (!(await EventRow.bySlug(slug))) return slug;
  if (asked) throw conflict('events.slug_taken', `The address ${slug} is taken. Choose another.`);
  for (let n = 2; ; n++) {
    const next = `${slug.slice(0, 56)}-${n}`;
    if (!(await EventRow.bySlug(next))) return next;
  }
}

export const refuse = (errors: Record<string, string>): void => {
  if (Object.keys(errors).length > 0) throw invalid(errors);
};

/** Loads for a change: right version, allowed. @throws 404, 412, 403. */
export async function eventForChange(actor: Actor, slug: string, version: number): Promise<EventRow> {
  const event = await requireEvent(slug);
  if (!canEditEvent(actor, event))
    throw forbidden(event.state === 'archived' ? 'The event is archived.' : undefined);
  sameVersion(event.version, version);
  return event;
}

export async function updateEvent(
  actor: Actor,
  slug: string,
  version: number,
  input: EventInput,
): Promise<EventDetail> {
  refuse(eventErrors(input));
  await transaction(async () => {
    const event = await eventForChange(actor, slug, version);
    if (event.currency !== input.currency && (await known.feeCategories(event.id)) > 0) {
      throw invalid({ currency: 'Fees exist in the present currency. Remove them first.' });
    }
    const outside = (await blocksOf(event.id)).find(
      (block) => block.day < input.startsOn || block.day > input.endsOn,
    );
    if (outside)
      throw invalid({ startsOn: `There are session blocks on ${outside.day}. Remove them first.` });
    const before = presentSummary(event);
    await event.update(input);
    await recordAudit({
      actor,
      action: 'events.updated',
      subject: 'event',
      subjectId: event.id,
      eventId: event.id,
      before,
      after: presentSummary(event),
    });
  });
  return readEvent(actor, slug);
}

/** Takes the event one step along its states. @throws 409 with what is missing. */
export async function changeEventState(
  actor: Actor,
  slug: string,
  to: EventState,
  version?: number,
  now = new Date(),
): Promise<EventDetail> {
  await transaction(async () => {
    const event = await requireEvent(slug);
    if (!canChangeState(actor, event)) throw forbidden();
    if (version !== undefined) sameVersion(event.version, version);
    const parts = await partsOf(event);
    const step = nextStates(factsOf(parts), todayAt(event, now)).find((candidate) => candidate.to === to);
    if (!step) throw conflict('events.no_such_step', `A ${event.state} event can’t become ${to}.`);
    if (step.missing.length > 0)
      throw conflict('events.step_missing', step.missing.join(' '), { missing: step.missing });
    const from = event.state;
    await event.update({ state: to });
    await recordAudit({
      actor,
      action: 'events.state_changed',
      subject: 'event',
      subjectId: event.id,
      eventId: event.id,
      before: { state: from },
      after: { state: to },
    });
    await announce(eventStateChanged, { eventId: event.id, from, to });
  });
  return readEvent(actor, slug, now);
}

/** Events in which the actor has a role, with the roles; administrators and finance officers see all. */
export async function eventsToWorkOn(actor: Actor): Promise<(EventSummary & { roles: string[] })[]> {
  const office = actor.grants.filter((grant) => grant.scope === 'institute').map((grant) => grant.role);
  const own = actor.grants.filter((grant) => grant.scope === 'event');
  const where = office.length > 0 ? {} : { id: own.flatMap((grant) => grant.scopeId ?? []) };
  const rows = await EventRow.findAll({ where, order: [['startsOn', 'DESC'], 'id'] });
  const order: EventState[] = ['running', 'open', 'announced', 'draft', 'finished', 'archived'];
  return rows
    .map((row) => ({
      ...presentSummary(row),
      roles: [
        ...new Set([
          ...office,
          ...own.filter((grant) => grant.scopeId === row.id).map((grant) => grant.role),
        ]),
      ],
    }))
    .sort((a, b) => order.indexOf(a.state) - order.indexOf(b.state) || a.startsOn.localeCompare(b.startsOn));
}

export async function listEvents(query: { cursor?: string; limit: number }): Promise<Page<EventSummary>> {
  const [date = '', id = ''] = query.cursor ? query.cursor.split('~') : [];
  const where = query.cursor
    ? { [Op.or]: [{ startsOn: { [Op.gt]: date } }, { startsOn: date, id: { [Op.gt]: id } }] }
    : {};
  const rows = await EventRow.findAll({ where, order: ['startsOn', 'id'], limit: query.limit + 1 });
  const last = rows[query.limit - 1];
  return {
    items: rows.slice(0, query.limit).map(presentSummary),
    next: rows.length > query.limit && last ? `${last.startsOn}~${last.id}` : null,
  };
}

/** Rooms in which something is placed can't be removed; the programme tells which. */
export const placedRooms = (eventId: string): Promise<Set<string>> => known.placedRooms(eventId);
