import type {
  DraftPlacement,
  ProgrammePerson,
  TalkCard,
} from '@shared/features/programme/programme.contract';
import { cardsOf, problemOf, type ProgrammeSource } from '@shared/features/programme/programme-problem.rules';
import { isPlaceable } from '@shared/features/programme/programme.rules';
import type { Problem } from '@shared/features/programme/timetable/problem';
import { accountsById, type PersonView } from '@server/features/accounts/accounts.service';
import type { BlockRow, EventRow, RoomRow } from '@server/features/events/events.model';
import { blocksOf, roomsOf } from '@server/features/events/events.service';
import {
  coursesOf,
  prerequisitesOf,
  presencesOf,
  talksForProgramme,
} from '@server/features/talks/talks.service';
import { PlacementRow } from './programme.model';

/** Everything that the draft of an event is judged and shown by. */
export interface ProgrammeState {
  event: EventRow;
  rooms: RoomRow[];
  blocks: BlockRow[];
  cards: TalkCard[];
  problem: Problem;
  placements: DraftPlacement[];
  people: Map<string, PersonView>;
}

/** Loads talks, rooms, stays and placements of an event. Talks that were declined or withdrawn have dropped out. */
export async function programmeState(event: EventRow): Promise<ProgrammeState> {
  const [rooms, blocks, talks, courses, prerequisites, presences] = await Promise.all([
    roomsOf(event.id),
    blocksOf(event.id),
    talksForProgramme(event.id),
    coursesOf(event.id),
    prerequisitesOf(event.id),
    presencesOf(event.id),
  ]);
  const placeable = talks.filter(isPlaceable);
  const people = await accountsById(
    placeable.flatMap((talk) => talk.people.map((person) => person.accountId)),
  );
  const source: ProgrammeSource = {
    event,
    rooms,
    blocks,
    courses: courses.map(({ id, letter, minNights, maxPerDay }) => ({ id, letter, minNights, maxPerDay })),
    talks: placeable.map((talk) => ({ ...talk, people: talk.people.map((person) => named(person, people)) })),
    prerequisites: prerequisites.map(({ before, after }) => ({ before, after })),
    presences,
  };
  const cards = cardsOf(source);
  const rows = await PlacementRow.ofEvent(event.id);
  return {
    event,
    rooms,
    blocks,
    cards,
    problem: problemOf(source, cards),
    placements: placed(rows, cards, event),
    people,
  };
}

/** The same state with the placements as they are now; everything else stands still within a transaction. */
export async function withPresentPlacements(state: ProgrammeState): Promise<ProgrammeState> {
  return {
    ...state,
    placements: placed(await PlacementRow.ofEvent(state.event.id), state.cards, state.event),
  };
}

type Part = Pick<ProgrammePerson, 'accountId' | 'part'>;

/** A person with the names that tiles use. */
export function named(
  person: Part & { printedName?: string },
  people: Map<string, PersonView>,
): ProgrammePerson {
  const view = people.get(person.accountId);
  const printedName = view?.printedName ?? person.printedName ?? 'Unknown';
  return {
    accountId: person.accountId,
    part: person.part,
    printedName,
    shortName: view?.familyName || printedName,
  };
}

/** Placements of talks that are still in, on days that the event still has. */
function placed(rows: PlacementRow[], cards: TalkCard[], event: EventRow): DraftPlacement[] {
  const lengths = new Map(cards.map((card) => [card.talkId, card.minutes]));
  return rows
    .filter((row) => lengths.has(row.talkId) && row.day >= event.startsOn && row.day <= event.endsOn)
    .map((row) => ({
      talkId: row.talkId,
      roomId: row.roomId,
      day: row.day,
      startMinute: row.startMinute,
      minutes: row.minutes ?? (lengths.get(row.talkId) as number),
      fixed: row.fixed,
    }));
}
