import type { DeadlineKind, EventInput } from '@shared/features/events/events.contract';
import { addDays, datesBetween } from '@shared/lib/time';
import { systemActor } from '@server/features/accounts/accounts.service';
import { changeEventState, createEvent } from '@server/features/events/events.service';
import type { Cast } from './10-accounts';
import { base, build, category, conferenceDay, texts, type DemoDates } from './20-events';

const input = (
  kind: EventInput['kind'],
  title: string,
  shortTitle: string,
  startsOn: string,
  days: number,
  capacity: number,
  lead: string,
): EventInput => ({
  ...base,
  kind,
  title,
  shortTitle,
  startsOn,
  endsOn: addDays(startsOn, days - 1),
  capacity,
  admission: 'open',
  contactEmail: 'office@tarnholt.example.org',
  admitsMinors: false,
  texts: texts(lead),
});

/** Smaller events in the states that the three main ones are not in: archived, announced, draft. */
export async function seedMoreEvents(cast: Cast, dates: DemoDates, now: Date): Promise<void> {
  const make = (slug: string, event: EventInput, deadlines: [DeadlineKind, string][]) =>
    build(cast, slug, event, conferenceDay, datesBetween(event.startsOn, event.endsOn), deadlines, {
      taxNote: 'No tax: education.',
      categories: [category('everybody', [], 6_000, 9_000, addDays(event.startsOn, -60))],
      extras: [],
    });
  const old = input(
    'workshop',
    'Workshop on Braids and Surfaces',
    'Braids and Surfaces',
    addDays(dates.today, -430),
    3,
    35,
    'Three days on braids, mapping classes and the surfaces that they live on.',
  );
  await make('braids-and-surfaces', old, [['registration_closes', addDays(old.startsOn, -10)]]);
  for (const to of ['open', 'running', 'finished', 'archived'] as const)
    await changeEventState(systemActor, 'braids-and-surfaces', to, undefined, now);
  const next = input(
    'conference',
    'Conference on Counting and Randomness',
    'Counting and Randomness',
    addDays(dates.today, 240),
    5,
    80,
    'Five days on random structures, and on what can be said about a structure by counting it.',
  );
  await make('counting-and-randomness', next, [
    ['registration_opens', addDays(next.startsOn, -150)],
    ['abstracts_due', addDays(next.startsOn, -80)],
    ['registration_closes', addDays(next.startsOn, -10)],
  ]);
  await createEvent(systemActor, {
    slug: 'aperiodic-order',
    ...input(
      'thematic_programme',
      'Thematic Programme on Aperiodic Order',
      'Aperiodic Order',
      addDays(dates.today, 400),
      90,
      60,
      'A season on order without repetition. Not announced yet.',
    ),
  });
}
