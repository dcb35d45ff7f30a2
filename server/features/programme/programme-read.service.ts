import type {
  Comparison,
  Draft,
  ProgrammeChange,
  PublicProgramme,
  RevisionSummary,
} from '@shared/features/programme/programme.contract';
import { compareProgrammes, peopleIn } from '@shared/features/programme/programme.rules';
import { notFound } from '@shared/http/problem';
import type { Actor } from '@server/http/authorize';
import { accountById, accountsById } from '@server/features/accounts/accounts.service';
import type { EventRow } from '@server/features/events/events.model';
import { blocksOf, requireEvent, roomsOf } from '@server/features/events/events.service';
import { coursesOf } from '@server/features/talks/talks.service';
import { DraftRow, RevisionPlacementRow, RevisionRow } from './programme.model';
import { canChangeProgramme, canReadProgramme } from './programme.policy';
import {
  bandsOf,
  presentDraft,
  presentHead,
  presentPlacement,
  presentPublic,
  presentSpot,
  snapshotOfRevision,
  snapshotsOfDraft,
} from './programme.presenter';
import { revisionChanges, revisionRows, stillOn } from './programme.service';
import { programmeState } from './programme-state.service';

/** The draft with everything that the composer needs. */
export async function readDraft(actor: Actor, slug: string): Promise<Draft> {
  const event = await requireEvent(slug);
  const [state, draft, last] = await Promise.all([
    programmeState(event),
    DraftRow.findByPk(event.id),
    RevisionRow.latest(event.id),
  ]);
  const change = canChangeProgramme(actor, event);
  const revision = last && {
    row: last,
    placements: await RevisionPlacementRow.ofRevision(last.id),
    byName: await nameOf(last.publishedBy),
  };
  return presentDraft(state, draft?.version ?? 0, revision, { change, publish: change });
}

const nameOf = async (accountId: string): Promise<string> =>
  (await accountById(accountId))?.printedName ?? 'Analemma';

/** The public programme; an event that is a draft does not exist for outsiders. */
export async function readPublic(actor: Actor | null, slug: string): Promise<PublicProgramme> {
  const event = await visibleEvent(actor, slug);
  const last = await RevisionRow.latest(event.id);
  const [rooms, blocks, courses] = await Promise.all([
    roomsOf(event.id),
    blocksOf(event.id),
    coursesOf(event.id),
  ]);
  const rows = last ? await stillOn(event.id, await RevisionPlacementRow.ofRevision(last.id)) : [];
  const people = await accountsById(rows.flatMap((row) => row.people.map((one) => one.accountId)));
  return {
    timeZone: event.timeZone,
    startsOn: event.startsOn,
    endsOn: event.endsOn,
    revision: last && { number: last.number, publishedAt: last.publishedAt.toISOString() },
    rooms: rooms.map(({ id, name, shortName }) => ({ id, name, shortName })),
    bands: bandsOf(blocks),
    talks: rows.map((row) => presentPublic(row, letterOf(row.word, courses), people)),
  };
}

/** `Course B 4` and `Exercises B 3` belong to course B, as they were published. */
const letterOf = (word: string, courses: { letter: string }[]): string | null =>
  courses.find((course) => word.split(' ')[1] === course.letter)?.letter ?? null;

async function visibleEvent(actor: Actor | null, slug: string): Promise<EventRow> {
  const event = await requireEvent(slug);
  if (!canReadProgramme(actor, event)) throw notFound('This event');
  return event;
}

/** Where and when the actor takes part, as published. */
export async function readMine(actor: Actor, slug: string) {
  const event = await visibleEvent(actor, slug);
  const last = await RevisionRow.latest(event.id);
  const rows = last ? await stillOn(event.id, await RevisionPlacementRow.ofRevision(last.id)) : [];
  const items = rows.flatMap((row) => {
    const parts = row.people.filter((one) => one.accountId === actor.accountId).map((one) => one.part);
    if (parts.length === 0) return [];
    const times = { startsAt: row.startsAt.toISOString(), endsAt: row.endsAt.toISOString() };
    return [
      {
        talkId: row.talkId,
        word: row.word,
        title: row.title,
        parts: parts as never[],
        ...presentSpot(row),
        ...times,
      },
    ];
  });
  return { revision: last?.number ?? null, timeZone: event.timeZone, items };
}

export async function listRevisions(slug: string): Promise<{ items: RevisionSummary[] }> {
  const event = await requireEvent(slug);
  const rows = await RevisionRow.findAll({ where: { eventId: event.id }, order: [['number', 'DESC']] });
  const people = await accountsById(rows.map((row) => row.publishedBy));
  const items = rows.map(async (row) => ({
    ...presentHead(row, people.get(row.publishedBy)?.printedName ?? 'Analemma'),
    talks: await RevisionPlacementRow.count({ where: { revisionId: row.id } }),
  }));
  return { items: await Promise.all(items) };
}

export async function readRevision(slug: string, number: number) {
  const event = await requireEvent(slug);
  const rows = await revisionRows(event.id, number);
  const row = (await RevisionRow.numbered(event.id, number)) as RevisionRow;
  return {
    ...presentHead(row, await nameOf(row.publishedBy)),
    placements: rows.map((one) => ({ ...presentPlacement(one), roomName: one.roomName, title: one.title })),
  };
}

/** What the draft would change against a revision, by default the latest; 0 compares with nothing. @throws 404. */
export async function compareDraft(slug: string, from?: number): Promise<Comparison> {
  const event = await requireEvent(slug);
  const earlier =
    from === undefined ? await RevisionRow.latest(event.id) : await revisionOrNone(event.id, from);
  const rows = earlier ? await RevisionPlacementRow.ofRevision(earlier.id) : [];
  const state = await programmeState(event);
  const people = await accountsById(rows.flatMap((row) => row.people.map((one) => one.accountId)));
  const before = rows.map((row) => snapshotOfRevision(row, people));
  return comparison(compareProgrammes(before, snapshotsOfDraft(state)), earlier, null);
}

async function revisionOrNone(eventId: string, number: number): Promise<RevisionRow | null> {
  const row = number === 0 ? null : await RevisionRow.numbered(eventId, number);
  if (number !== 0 && !row) throw notFound(`Revision ${number}`);
  return row;
}

/** What changed from revision `from` (by default the one before; 0 = nothing) to revision `number`. @throws 404. */
export async function compareRevisions(slug: string, number: number, from = number - 1): Promise<Comparison> {
  const event = await requireEvent(slug);
  const earlier = await revisionOrNone(event.id, from);
  return comparison(await revisionChanges(event.id, number, from), earlier, number);
}

const comparison = (changes: ProgrammeChange[], from: RevisionRow | null, to: number | null): Comparison => ({
  from: from?.number ?? null,
  to,
  fromPublishedAt: from?.publishedAt.toISOString() ?? null,
  changes,
  people: peopleIn(changes),
});
