import type {
  DraftAfterChange,
  DraftPlacement,
  ProgrammeChange,
  RevisionSummary,
} from '@shared/features/programme/programme.contract';
import { compareProgrammes, isPlaceable } from '@shared/features/programme/programme.rules';
import type { Clash } from '@shared/features/programme/timetable/clash';
import { count } from '@shared/lib/text';
import { addDays, localToInstant, timeOf } from '@shared/lib/time';
import { conflict, notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { announce } from '@server/jobs/job';
import { accountsById, recordAudit } from '@server/features/accounts/accounts.service';
import { eventById, requireEvent } from '@server/features/events/events.service';
import { talksForProgramme } from '@server/features/talks/talks.service';
import { revisionPublished } from './programme.jobs';
import { DraftRow, RevisionPlacementRow, RevisionRow } from './programme.model';
import { changeDraft, draftForChange } from './programme-draft.service';
import { clashesOf, presentPlacement, snapshotOfRevision, snapshotsOfDraft } from './programme.presenter';
import { programmeState, type ProgrammeState } from './programme-state.service';

/** The draft of an event: its version, placements and clashes. */
export async function draftOf(
  eventId: string,
): Promise<{ version: number; placements: DraftPlacement[]; clashes: Clash[]; toBePlaced: number }> {
  const state = await programmeState(await eventById(eventId));
  const row = await DraftRow.findByPk(eventId);
  const toBePlaced = state.cards.length - state.placements.length;
  return { version: row?.version ?? 0, placements: state.placements, clashes: clashesOf(state), toBePlaced };
}

/** Rooms in which something stands in the draft; what has dropped out gives its room free. */
export async function placedRooms(eventId: string): Promise<Set<string>> {
  const { placements } = await programmeState(await eventById(eventId));
  return new Set(placements.map((one) => one.roomId));
}

/** Places one talk, whatever the draft's version: for seeds and jobs. `minutes` defaults to what the talk asks for. */
export async function placeTalk(
  actor: Actor,
  slug: string,
  input: {
    talkId: string;
    roomId: string;
    day: string;
    startMinute: number;
    minutes?: number;
    fixed?: boolean;
  },
): Promise<DraftAfterChange> {
  return placeTalks(actor, slug, [input]);
}

/** Places many talks at once, as `placeTalk` does. */
export async function placeTalks(
  actor: Actor,
  slug: string,
  inputs: readonly {
    talkId: string;
    roomId: string;
    day: string;
    startMinute: number;
    minutes?: number;
    fixed?: boolean;
  }[],
): Promise<DraftAfterChange> {
  const { cards } = await programmeState(await requireEvent(slug));
  const lengths = new Map(cards.map((card) => [card.talkId, card.minutes]));
  const changes = inputs.map(({ talkId, fixed, roomId, day, startMinute, minutes }) => ({
    talkId,
    to: { roomId, day, startMinute, minutes: minutes ?? lengths.get(talkId) ?? 5 },
    fixed,
  }));
  return changeDraft(actor, slug, changes);
}

/**
 * Publishes the draft as the next revision and announces it.
 * @throws 409 when nothing is placed, nothing has changed, or clashes are left and `withClashes` is not said.
 */
export function publishRevision(
  actor: Actor,
  slug: string,
  input: { note?: string; withClashes?: boolean },
  version?: number,
  now = new Date(),
): Promise<RevisionSummary & { version: number }> {
  return transaction(async () => {
    const { event, draft } = await draftForChange(actor, slug, version);
    const state = await programmeState(event);
    const last = await RevisionRow.latest(event.id);
    await refusePublishing(state, last, input.withClashes ?? false);
    const number = (last?.number ?? 0) + 1;
    const note = input.note ?? '';
    const row = await RevisionRow.create({
      id: newId(),
      eventId: event.id,
      number,
      publishedAt: now,
      publishedBy: actor.accountId,
      note,
    });
    await RevisionPlacementRow.bulkCreate(recordOf(state, row.id));
    await recordAudit({
      actor,
      action: 'programme.published',
      subject: 'programme',
      subjectId: event.id,
      eventId: event.id,
      after: { number, talks: state.placements.length, note },
    });
    await announce(revisionPublished, { eventId: event.id, number });
    const head = { number, publishedAt: now.toISOString(), byName: actor.printedName, note };
    return { ...head, talks: state.placements.length, version: draft.version };
  });
}

async function refusePublishing(
  state: ProgrammeState,
  last: RevisionRow | null,
  withClashes: boolean,
): Promise<void> {
  if (state.placements.length === 0 && !last) {
    throw conflict('programme.nothing_placed', 'No talk has been placed. Place one, then publish.');
  }
  if (last) {
    const before = await RevisionPlacementRow.ofRevision(last.id);
    const changes = compareProgrammes(
      before.map((row) => snapshotOfRevision(row, state.people)),
      snapshotsOfDraft(state),
    );
    if (changes.length === 0) {
      throw conflict('programme.nothing_new', `Nothing has changed since revision ${last.number}.`);
    }
  }
  const clashes = clashesOf(state).length;
  if (clashes > 0 && !withClashes) {
    throw conflict('programme.clashes', `${count(clashes, 'clash', 'clashes')} would go public.`, {
      clashes,
    });
  }
}

/** The lines of a revision: what is told to people now, whatever becomes of the talks later. */
function recordOf(state: ProgrammeState, revisionId: string): Record<string, unknown>[] {
  const fixed = new Map(state.placements.map((one) => [one.talkId, one.fixed]));
  return snapshotsOfDraft(state).map(({ talkId, kind, word, title, spot, people }) => {
    const end = spot.startMinute + spot.minutes;
    const endDay = end >= 1440 ? addDays(spot.day, 1) : spot.day;
    return {
      revisionId,
      talkId,
      kind,
      word,
      title,
      people: people.map(({ accountId, part }) => ({ accountId, part })),
      ...spot,
      startsAt: new Date(localToInstant(spot.day, timeOf(spot.startMinute), state.event.timeZone)),
      endsAt: new Date(localToInstant(endDay, timeOf(end % 1440), state.event.timeZone)),
      fixed: fixed.get(talkId) ?? false,
    };
  });
}

/** What revision `number` changed against the one before; the first one placed everything. */
export async function revisionChanges(
  eventId: string,
  number: number,
  from = number - 1,
): Promise<ProgrammeChange[]> {
  const after = await revisionRows(eventId, number);
  const before = from === 0 ? [] : await revisionRows(eventId, from);
  const people = await accountsById(
    [...before, ...after].flatMap((row) => row.people.map((one) => one.accountId)),
  );
  const snapshots = (rows: RevisionPlacementRow[]) => rows.map((row) => snapshotOfRevision(row, people));
  return compareProgrammes(snapshots(before), snapshots(after));
}

/** The lines of a revision. @throws 404. */
export async function revisionRows(eventId: string, number: number): Promise<RevisionPlacementRow[]> {
  const row = await RevisionRow.numbered(eventId, number);
  if (!row) throw notFound(`Revision ${number}`);
  return RevisionPlacementRow.ofRevision(row.id);
}

/** A talk as it was published. Instants are UTC. */
export interface PublishedPlacement extends DraftPlacement {
  roomName: string;
  startsAt: string;
  endsAt: string;
  word: string;
  title: string;
  people: { accountId: string; part: string }[];
}

/** The programme that the public reads now: the latest revision without what has been withdrawn since. */
export async function publishedProgramme(
  eventId: string,
): Promise<{ number: number; publishedAt: string; placements: PublishedPlacement[] } | null> {
  const revision = await RevisionRow.latest(eventId);
  if (!revision) return null;
  const rows = await stillOn(eventId, await RevisionPlacementRow.ofRevision(revision.id));
  const placements = rows.map(asPublished);
  return { number: revision.number, publishedAt: revision.publishedAt.toISOString(), placements };
}

const asPublished = (row: RevisionPlacementRow): PublishedPlacement => ({
  ...presentPlacement(row),
  roomName: row.roomName,
  startsAt: row.startsAt.toISOString(),
  endsAt: row.endsAt.toISOString(),
  word: row.word,
  title: row.title,
  people: row.people,
});

/** What was public at some time after `since` and is no longer: as it was published last. For feeds, which tell it. */
export async function droppedPlacements(eventId: string, since: Date): Promise<PublishedPlacement[]> {
  const revisions = await RevisionRow.findAll({ where: { eventId }, order: [['number', 'DESC']] });
  const current = new Set((await publishedProgramme(eventId))?.placements.map(({ talkId }) => talkId));
  const dropped = new Map<string, PublishedPlacement>();
  for (const [index, revision] of revisions.entries()) {
    const replacedAt = revisions[index - 1]?.publishedAt;
    if (replacedAt && replacedAt < since) break;
    for (const row of await RevisionPlacementRow.ofRevision(revision.id)) {
      if (!current.has(row.talkId) && !dropped.has(row.talkId)) dropped.set(row.talkId, asPublished(row));
    }
  }
  return [...dropped.values()];
}

/** Published lines whose talk has not been declined or withdrawn since. */
export async function stillOn(
  eventId: string,
  rows: RevisionPlacementRow[],
): Promise<RevisionPlacementRow[]> {
  const talks = new Map((await talksForProgramme(eventId)).map((talk) => [talk.id, talk]));
  return rows.filter((row) => {
    const talk = talks.get(row.talkId);
    return talk !== undefined && isPlaceable(talk);
  });
}
