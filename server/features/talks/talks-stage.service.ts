import type { Stage } from '@shared/features/talks/talks-stay.contract';
import { localToInstant } from '@shared/lib/time';
import type { Actor } from '@server/http/authorize';
import { deadlinesOf, requireEvent, roomsOf } from '@server/features/events/events.service';
import { refuseOutsider } from './talks-courses.service';

/** Dates, deadlines and rooms of an event for those who have a part in it. @throws 404 for others. */
export async function readStage(actor: Actor, slug: string): Promise<Stage> {
  const event = await requireEvent(slug);
  await refuseOutsider(actor, event.id);
  const [deadlines, rooms] = await Promise.all([deadlinesOf(event.id), roomsOf(event.id)]);
  const { title, shortTitle, startsOn, endsOn, timeZone, venue, town, contactEmail } = event;
  return {
    slug,
    title,
    shortTitle,
    startsOn,
    endsOn,
    timeZone,
    venue,
    town,
    contactEmail,
    deadlines: deadlines.map(({ kind, date, time }) => ({
      kind,
      date,
      time,
      at: localToInstant(date, time, timeZone),
    })),
    rooms: rooms.map(({ name, shortName, capacity, features }) => ({ name, shortName, capacity, features })),
  };
}
