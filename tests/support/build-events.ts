import type { EventInput } from '../../shared/features/events/events.contract';
import { createEvent, changeEventState } from '../../server/features/events/events.service';
import {
  replaceDayFrames,
  replaceDeadlines,
  replaceRooms,
} from '../../server/features/events/events-frame.service';
import { systemActor } from '../../server/features/accounts/accounts.service';
import { addDays, datesBetween } from '../../shared/lib/time';

let serial = 0;

export const eventInput = (over: Partial<EventInput> = {}): EventInput => ({
  kind: 'conference',
  title: 'Conference on Lattices',
  shortTitle: 'Lattices',
  startsOn: '2027-07-05',
  endsOn: '2027-07-07',
  timeZone: 'Europe/Copenhagen',
  currency: 'EUR',
  venue: 'Lakeside House',
  town: 'Tarnholt',
  capacity: 40,
  admission: 'open',
  contactEmail: 'lattices@tarnholt.example.org',
  texts: { lead: 'Three days on lattices.', practical: '', travel: '', safeguarding: '' },
  admitsMinors: false,
  ...over,
});

/** An announced event with two rooms, a morning and an afternoon block and a lunch on each day, and deadlines before it. */
export async function buildEvent(over: Partial<EventInput> = {}, state: 'draft' | 'announced' = 'announced') {
  serial += 1;
  const input = eventInput(over);
  let event = await createEvent(systemActor, { ...input, slug: `lattices-${serial}` });
  event = await replaceRooms(systemActor, event.slug, event.version, [
    { name: 'Great Hall', shortName: 'G', capacity: 120, features: ['blackboard', 'projector', 'stepFree'] },
    { name: 'Ivar', shortName: 'I', capacity: 40, features: ['blackboard'] },
  ]);
  const blocks = datesBetween(input.startsOn, input.endsOn).flatMap((day) => [
    { day, startsAt: '09:00', endsAt: '12:00', kind: 'session' as const, title: '', minimalMinutes: null },
    { day, startsAt: '12:00', endsAt: '13:30', kind: 'lunch' as const, title: '', minimalMinutes: 45 },
    { day, startsAt: '14:00', endsAt: '17:00', kind: 'session' as const, title: '', minimalMinutes: null },
  ]);
  event = await replaceDayFrames(systemActor, event.slug, event.version, blocks);
  event = await replaceDeadlines(systemActor, event.slug, event.version, [
    { kind: 'abstracts_due', date: addDays(input.startsOn, -60), time: '23:59' },
    { kind: 'programme_final', date: addDays(input.startsOn, -20), time: '23:59' },
  ]);
  return state === 'announced' ? changeEventState(systemActor, event.slug, 'announced') : event;
}
