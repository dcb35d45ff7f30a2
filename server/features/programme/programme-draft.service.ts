import type { DraftAfterChange, DraftChange } from '@shared/features/programme/programme.contract';
import { conflict, forbidden, invalid } from '@shared/http/problem';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { recordAudit } from '@server/features/accounts/accounts.service';
import type { EventRow } from '@server/features/events/events.model';
import { requireEvent } from '@server/features/events/events.service';
import { DraftRow, PlacementRow } from './programme.model';
import { canChangeProgramme } from './programme.policy';
import { clashesOf } from './programme.presenter';
import { programmeState, withPresentPlacements, type ProgrammeState } from './programme-state.service';

/** The draft's row, made with the first change, at the version that the actor has seen. @throws 404, 403, 412. */
export async function draftForChange(
  actor: Actor,
  slug: string,
  version?: number,
): Promise<{ event: EventRow; draft: DraftRow }> {
  const event = await requireEvent(slug);
  if (!canChangeProgramme(actor, event)) {
    throw forbidden(event.state === 'archived' ? 'The event is archived.' : undefined);
  }
  const draft = (await DraftRow.findByPk(event.id)) ?? (await DraftRow.create({ eventId: event.id }));
  if (version !== undefined) sameVersion(draft.version, version);
  return { event, draft };
}

/**
 * Applies changes to the draft, all or none. Clashes are allowed and told in the answer; what does not exist is not.
 * @throws 412 when the draft has moved on, 422 for talks, rooms or days that are not of this event, 409 for a fixed talk.
 */
export function changeDraft(
  actor: Actor,
  slug: string,
  changes: readonly DraftChange[],
  version?: number,
): Promise<DraftAfterChange> {
  return transaction(async () => {
    const { event, draft } = await draftForChange(actor, slug, version);
    const state = await programmeState(event);
    refuseUnknown(state, changes);
    for (const change of changes) await applyChange(event.id, state, change);
    draft.changed('updatedAt' as never, true); // nothing else of the row changes, but the version must
    await draft.save();
    await recordAudit({
      actor,
      action: 'programme.draft_changed',
      subject: 'programme',
      subjectId: event.id,
      eventId: event.id,
      before: changes.map(
        ({ talkId }) => state.placements.find((one) => one.talkId === talkId) ?? { talkId },
      ),
      after: changes,
    });
    const after = await withPresentPlacements(state);
    return { version: draft.version, placements: after.placements, clashes: clashesOf(after) };
  });
}

/** Refuses references to nothing: field errors keyed like the body. */
function refuseUnknown({ cards, rooms, event }: ProgrammeState, changes: readonly DraftChange[]): void {
  const talks = new Set(cards.map((card) => card.talkId));
  const known = new Set(rooms.map((room) => room.id));
  const fields: Record<string, string> = {};
  const seen = new Set<string>();
  changes.forEach(({ talkId, to }, i) => {
    if (!talks.has(talkId))
      fields[`changes.${i}.talkId`] = 'This talk is not one of the event, or has been withdrawn.';
    else if (seen.has(talkId)) fields[`changes.${i}.talkId`] = 'Each talk once.';
    seen.add(talkId);
    if (!to) return;
    if (!known.has(to.roomId)) fields[`changes.${i}.to.roomId`] = 'This room is not one of the event.';
    if (to.day < event.startsOn || to.day > event.endsOn)
      fields[`changes.${i}.to.day`] = 'This day is outside the event.';
    if (to.startMinute + to.minutes > 1440)
      fields[`changes.${i}.to.minutes`] = 'A talk ends before midnight.';
  });
  if (Object.keys(fields).length > 0) throw invalid(fields);
}

async function applyChange(eventId: string, state: ProgrammeState, change: DraftChange): Promise<void> {
  const { talkId, to } = change;
  const card = state.cards.find((one) => one.talkId === talkId);
  const row = await PlacementRow.findByPk(talkId);
  if (row?.fixed && change.fixed !== false && moves(row, to)) {
    throw conflict('programme.fixed', `${card?.word ?? 'This talk'} is fixed. Release it first.`, { talkId });
  }
  if (!to) return void (await row?.destroy());
  const minutes = to.minutes === card?.minutes ? null : to.minutes;
  const fields = { roomId: to.roomId, day: to.day, startMinute: to.startMinute, minutes };
  if (row) await row.update({ ...fields, fixed: change.fixed ?? row.fixed });
  else await PlacementRow.create({ talkId, eventId, ...fields, fixed: change.fixed ?? false });
}

const moves = (row: PlacementRow, to: DraftChange['to']): boolean =>
  !to || row.roomId !== to.roomId || row.day !== to.day || row.startMinute !== to.startMinute;
