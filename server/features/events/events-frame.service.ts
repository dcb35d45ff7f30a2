import type {
  BlockInput,
  DeadlineInput,
  EventDetail,
  RoomInput,
} from '@shared/features/events/events.contract';
import { blockErrors, deadlineErrors, roomErrors } from '@shared/features/events/events.rules';
import { invalid } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { BlockRow, DeadlineRow, RoomRow, type EventRow } from './events.model';
import { eventForChange, placedRooms, readEvent, refuse, roomsOf } from './events.service';

/** The parts of an event share its version: every change of one counts as a change of the event. */
async function changeParts(
  actor: Actor,
  slug: string,
  version: number,
  action: string,
  work: (event: EventRow) => Promise<unknown>,
): Promise<EventDetail> {
  await transaction(async () => {
    const event = await eventForChange(actor, slug, version);
    const after = await work(event);
    event.changed('updatedAt' as never, true); // nothing else changes, but the version must
    await event.save();
    await recordAudit({ actor, action, subject: 'event', subjectId: event.id, eventId: event.id, after });
  });
  return readEvent(actor, slug);
}

/** Saves the rooms in the given order. @throws 422 when a room with placed talks is left out. */
export function replaceRooms(
  actor: Actor,
  slug: string,
  version: number,
  rooms: RoomInput[],
): Promise<EventDetail> {
  refuse(roomErrors(rooms));
  return changeParts(actor, slug, version, 'events.rooms_saved', async (event) => {
    const present = await roomsOf(event.id);
    const used = await placedRooms(event.id);
    for (const row of present.filter((room) => !rooms.some((wanted) => wanted.id === room.id))) {
      if (used.has(row.id)) throw invalid({ rooms: `Talks are placed in ${row.name}. Move them first.` });
      await row.destroy();
    }
    for (const [position, { id, ...fields }] of rooms.entries()) {
      const row = present.find((candidate) => candidate.id === id);
      if (id && !row)
        throw invalid({ [`rooms.${position}.name`]: 'This room does not belong to the event.' });
      if (row) await row.update({ ...fields, position });
      else await RoomRow.create({ id: newId(), eventId: event.id, ...fields, position });
    }
    return rooms.map((room) => `${room.name} (${room.capacity})`);
  });
}

/** Saves the blocks of all days; ids of blocks that stay are kept. */
export function replaceDayFrames(
  actor: Actor,
  slug: string,
  version: number,
  blocks: BlockInput[],
): Promise<EventDetail> {
  return changeParts(actor, slug, version, 'events.day_frames_saved', async (event) => {
    refuse(blockErrors(blocks, event));
    const present = new Set(
      (await BlockRow.findAll({ where: { eventId: event.id }, attributes: ['id'] })).map((row) => row.id),
    );
    await BlockRow.destroy({ where: { eventId: event.id } });
    await BlockRow.bulkCreate(
      blocks.map(({ id, ...fields }) => ({
        id: id && present.has(id) ? id : newId(),
        eventId: event.id,
        ...fields,
      })),
    );
    return { blocks: blocks.length };
  });
}

export function replaceDeadlines(
  actor: Actor,
  slug: string,
  version: number,
  deadlines: DeadlineInput[],
): Promise<EventDetail> {
  refuse(deadlineErrors(deadlines));
  return changeParts(actor, slug, version, 'events.deadlines_saved', async (event) => {
    await DeadlineRow.destroy({ where: { eventId: event.id } });
    await DeadlineRow.bulkCreate(deadlines.map((fields) => ({ id: newId(), eventId: event.id, ...fields })));
    return deadlines.map(({ kind, date, time }) => `${kind} ${date} ${time}`);
  });
}
