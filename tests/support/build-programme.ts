import type { EventInput } from '../../shared/features/events/events.contract';
import { roomsOf } from '../../server/features/events/events.service';
import { createTalk } from '../../server/features/talks/talks-structure.service';
import { systemActor, type PersonView } from '../../server/features/accounts/accounts.service';
import { buildAccount } from './build';
import { buildEvent } from './build-events';

type Structure = Parameters<typeof createTalk>[2];

/** An accepted talk of an event; 60 minutes and a speaker of its own unless told otherwise. */
export async function buildTalk(
  eventId: string,
  given: Partial<Structure> & { speaker?: PersonView; chair?: PersonView } = {},
) {
  const { speaker, chair, ...structure } = given;
  const person = speaker ?? (await buildAccount());
  const people = [
    { accountId: person.id, part: 'speaker' as const },
    ...(chair ? [{ accountId: chair.id, part: 'chair' as const }] : []),
  ];
  return createTalk(systemActor, eventId, {
    kind: 'contributed',
    title: 'Sums of three cubes',
    minutes: 60,
    questionMinutes: 10,
    courseId: null,
    number: null,
    exerciseOf: null,
    expectedAudience: 30,
    people,
    ...structure,
  });
}

/** Three days from 5 July 2027 (a Monday), blocks 9-12 and 14-17, Great Hall (120) and Ivar (40), an organiser, two talks. */
export async function buildProgramme(over: Partial<EventInput> = {}) {
  const event = await buildEvent(over);
  const [hall, ivar] = await roomsOf(event.id);
  if (!hall || !ivar) throw new Error('the event has two rooms');
  const organiser = await buildAccount({}, [{ role: 'organiser', scope: 'event', scopeId: event.id }]);
  const speaker = await buildAccount({ givenName: 'Ngô Thị', familyName: 'Hằng' });
  const first = await buildTalk(event.id, { speaker, title: 'Cubes' });
  const second = await buildTalk(event.id, { title: 'Squares' });
  return { event, hall, ivar, organiser, speaker, first, second };
}
