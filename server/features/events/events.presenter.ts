import type {
  Block,
  Deadline,
  EventDetail,
  EventSummary,
  Room,
} from '@shared/features/events/events.contract';
import { nextStates, type EventFacts } from '@shared/features/events/events.rules';
import { localToInstant } from '@shared/lib/time';
import type { Actor } from '@server/http/authorize';
import type { BlockRow, DeadlineRow, EventRow, RoomRow } from './events.model';
import { canChangeState, canEditEvent, canManageTeam } from './events.policy';

export const presentSummary = (row: EventRow): EventSummary => ({
  id: row.id,
  slug: row.slug,
  kind: row.kind,
  title: row.title,
  shortTitle: row.shortTitle,
  startsOn: row.startsOn,
  endsOn: row.endsOn,
  timeZone: row.timeZone,
  town: row.town,
  venue: row.venue,
  state: row.state,
  admission: row.admission,
});

export const presentRoom = (row: RoomRow): Room => ({
  id: row.id,
  name: row.name,
  shortName: row.shortName,
  capacity: row.capacity,
  features: row.features,
  position: row.position,
});

export const presentBlock = (row: BlockRow): Block => ({
  id: row.id,
  day: row.day,
  startsAt: row.startsAt,
  endsAt: row.endsAt,
  kind: row.kind,
  title: row.title,
  minimalMinutes: row.minimalMinutes ?? null,
});

export const presentDeadline = (row: DeadlineRow, zone: string): Deadline => ({
  kind: row.kind,
  date: row.date,
  time: row.time,
  at: localToInstant(row.date, row.time, zone),
});

export interface EventParts {
  event: EventRow;
  rooms: RoomRow[];
  blocks: BlockRow[];
  deadlines: DeadlineRow[];
  feeCategories: number;
}

export function factsOf({ event, rooms, blocks, feeCategories }: EventParts): EventFacts {
  return {
    state: event.state,
    startsOn: event.startsOn,
    endsOn: event.endsOn,
    lead: event.texts.lead,
    rooms: rooms.length,
    sessionBlocks: blocks.filter((block) => block.kind === 'session').length,
    feeCategories,
    admitsMinors: event.admitsMinors,
    safeguarding: event.texts.safeguarding,
  };
}

export function presentEvent(parts: EventParts, actor: Actor | null, today: string): EventDetail {
  const { event } = parts;
  return {
    ...presentSummary(event),
    currency: event.currency,
    capacity: event.capacity,
    contactEmail: event.contactEmail,
    texts: event.texts,
    admitsMinors: event.admitsMinors,
    rooms: parts.rooms.map(presentRoom),
    blocks: parts.blocks.map(presentBlock),
    deadlines: parts.deadlines
      .map((row) => presentDeadline(row, event.timeZone))
      .sort((a, b) => a.at.localeCompare(b.at)),
    version: event.version,
    nextStates: nextStates(factsOf(parts), today),
    can: {
      edit: canEditEvent(actor, event),
      announce: canChangeState(actor, event),
      manageRoles: canManageTeam(actor, event),
    },
  };
}
