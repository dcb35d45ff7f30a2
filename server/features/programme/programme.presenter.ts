import type {
  Band,
  Draft,
  DraftPlacement,
  PublicTalk,
  RevisionSummary,
} from '@shared/features/programme/programme.contract';
import { pinFixed } from '@shared/features/programme/programme-problem.rules';
import { toTimetable, type Snapshot } from '@shared/features/programme/programme.rules';
import { checkAll } from '@shared/features/programme/timetable/check';
import type { Clash } from '@shared/features/programme/timetable/clash';
import { minuteOf } from '@shared/lib/time';
import type { PersonView } from '@server/features/accounts/accounts.service';
import type { BlockRow } from '@server/features/events/events.model';
import type { RevisionPlacementRow, RevisionRow } from './programme.model';
import { named, type ProgrammeState } from './programme-state.service';

/** The clashes of a draft, judged by the very rules that the browser uses while dragging. */
export function clashesOf({ problem, placements, event }: ProgrammeState): Clash[] {
  const laid = placements.map((one) => ({ ...toTimetable(one, event.startsOn), fixed: one.fixed }));
  return checkAll(pinFixed(problem, laid), laid);
}

export const bandsOf = (blocks: BlockRow[]): Band[] =>
  blocks
    .filter((block) => block.kind === 'coffee' || block.kind === 'lunch')
    .map((block) => ({
      day: block.day,
      startMinute: minuteOf(block.startsAt),
      endMinute: minuteOf(block.endsAt),
      kind: block.kind as Band['kind'],
      title: block.title || (block.kind === 'lunch' ? 'Lunch' : 'Coffee'),
    }));

export function presentDraft(
  state: ProgrammeState,
  version: number,
  revision: { row: RevisionRow; placements: RevisionPlacementRow[]; byName: string } | null,
  can: Draft['can'],
): Draft {
  const { slug, title, startsOn, endsOn, timeZone } = state.event;
  return {
    version,
    event: { slug, title, startsOn, endsOn, timeZone },
    problem: state.problem,
    cards: state.cards,
    bands: bandsOf(state.blocks),
    placements: state.placements,
    clashes: clashesOf(state),
    revision: revision && {
      ...presentHead(revision.row, revision.byName),
      placements: revision.placements.map(presentPlacement),
    },
    can,
  };
}

export const presentHead = (row: RevisionRow, byName: string): Omit<RevisionSummary, 'talks'> => ({
  number: row.number,
  publishedAt: row.publishedAt.toISOString(),
  byName,
  note: row.note,
});

export const presentPlacement = (row: RevisionPlacementRow): DraftPlacement => ({
  talkId: row.talkId,
  roomId: row.roomId,
  day: row.day,
  startMinute: row.startMinute,
  minutes: row.minutes,
  fixed: row.fixed,
});

/** A published talk as everybody may see it. */
export function presentPublic(
  row: RevisionPlacementRow,
  courseLetter: string | null,
  people: Map<string, PersonView>,
): PublicTalk {
  return {
    talkId: row.talkId,
    kind: row.kind,
    word: row.word,
    title: row.title,
    courseLetter,
    people: row.people.map(({ accountId, part }) => ({
      printedName: people.get(accountId)?.printedName ?? 'Unknown',
      affiliation: people.get(accountId)?.affiliation ?? '',
      part: part as PublicTalk['people'][number]['part'],
    })),
    ...presentSpot(row),
    startsAt: row.startsAt.toISOString(),
    endsAt: row.endsAt.toISOString(),
  };
}

export const presentSpot = ({ roomId, roomName, day, startMinute, minutes }: RevisionPlacementRow) => ({
  roomId,
  roomName,
  day,
  startMinute,
  minutes,
});

export const snapshotOfRevision = (row: RevisionPlacementRow, people: Map<string, PersonView>): Snapshot => ({
  talkId: row.talkId,
  kind: row.kind,
  word: row.word,
  title: row.title,
  spot: presentSpot(row),
  people: row.people.map((person) => named(person as Parameters<typeof named>[0], people)),
});

/** The draft as a comparison sees it. */
export function snapshotsOfDraft({ cards, rooms, placements }: ProgrammeState): Snapshot[] {
  const byId = new Map(cards.map((card) => [card.talkId, card]));
  const names = new Map(rooms.map((room) => [room.id, room.name]));
  return placements.flatMap(({ talkId, roomId, day, startMinute, minutes }) => {
    const card = byId.get(talkId);
    if (!card) return [];
    const { kind, word, title, people } = card;
    const spot = { roomId, roomName: names.get(roomId) ?? '', day, startMinute, minutes };
    return [{ talkId, kind, word, title, spot, people }];
  });
}
