import type { Talk } from '@shared/features/talks/talks.contract';
import type { AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import { usualMinutes } from '@shared/features/talks/talks.rules';
import { conflict, forbidden, invalid, notFound } from '@shared/http/problem';
import { localToInstant } from '@shared/lib/time';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { holds, type Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { announce } from '@server/jobs/job';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { deadlinesOf, requireEvent } from '@server/features/events/events.service';
import { abstractErrors, type AbstractText } from './talks-print.service';
import { abstractHandedIn, talkSubmitted } from './talks.jobs';
import { TalkPersonRow, TalkRow } from './talks.model';
import { canReadTalk, canWriteAbstract } from './talks.policy';
import { readTalk, requireTalk, subjectOf } from './talks.service';

/** Saves what was typed, also with mistakes in it: nothing a speaker writes is lost. */
export async function saveAbstract(
  actor: Actor,
  eventId: string,
  talkId: string,
  version: number,
  input: AbstractInput,
): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canWriteAbstract(actor, subjectOf(talk, people)))
      throw forbidden('The abstract of this talk can’t be changed any more.');
    sameVersion(talk.version, version);
    talk.set(input);
    // An abstract that could not be printed any more counts as not handed in.
    if (talk.abstractAt && Object.keys(abstractErrors(input)).length > 0) talk.abstractAt = null;
    talk.changed('updatedAt' as never, true);
    await talk.save();
  });
  return readTalk(actor, eventId, talkId);
}

/** Refuses an abstract that could not be printed. @throws 422. */
function refuseAbstract(input: AbstractText): void {
  const errors = abstractErrors(input);
  if (Object.keys(errors).length > 0) throw invalid(errors);
}

export async function handInAbstract(
  actor: Actor,
  eventId: string,
  talkId: string,
  version: number,
): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canWriteAbstract(actor, subjectOf(talk, people))) throw forbidden();
    sameVersion(talk.version, version);
    refuseAbstract(talk);
    await talk.update({ abstractAt: new Date() });
    await recordAudit({
      actor,
      action: 'talks.abstract_handed_in',
      subject: 'talk',
      subjectId: talkId,
      eventId,
      after: { title: talk.title },
    });
    await announce(abstractHandedIn, { talkId });
  });
  return readTalk(actor, eventId, talkId);
}

/** The call for abstracts: open from the announcement until the deadline, in the event's zone. */
export async function readCall(slug: string, now: Date) {
  const event = await requireEvent(slug);
  if (event.state === 'draft') throw notFound('This event');
  const deadline = (await deadlinesOf(event.id)).find((row) => row.kind === 'abstracts_due');
  const until = deadline ? localToInstant(deadline.date, deadline.time, event.timeZone) : null;
  const open = ['announced', 'open'].includes(event.state) && (until === null || now.toISOString() <= until);
  return { open, title: event.title, until, timeZone: event.timeZone, ...usualMinutes.contributed };
}

/** A contributed talk in answer to the call. @throws 409 after the deadline, 422 for an abstract that can't be printed. */
export async function submitTalk(
  actor: Actor,
  slug: string,
  input: AbstractInput,
  now = new Date(),
): Promise<Talk> {
  const call = await readCall(slug, now);
  const event = await requireEvent(slug);
  if (!call.open && !holds(actor, 'organiser', event.id))
    throw conflict('talk.call_closed', 'The call for abstracts is closed.');
  refuseAbstract(input);
  const id = await transaction(async () => {
    const talk = await TalkRow.create({
      id: newId(),
      eventId: event.id,
      kind: 'contributed',
      ...usualMinutes.contributed,
      ...input,
      state: 'submitted',
      abstractAt: now,
    });
    await TalkPersonRow.create({
      id: newId(),
      talkId: talk.id,
      accountId: actor.accountId,
      part: 'speaker',
      position: 0,
    });
    await recordAudit({
      actor,
      action: 'talks.submitted',
      subject: 'talk',
      subjectId: talk.id,
      eventId: event.id,
      after: { title: input.title },
    });
    await announce(talkSubmitted, { talkId: talk.id });
    return talk.id;
  });
  return readTalk(actor, event.id, id);
}
