import { rm } from 'node:fs/promises';
import path from 'node:path';
import type { CostKind, GrantInput, MyGrant } from '@shared/features/grants/grants.contract';
import { MAX_EVIDENCE_FILES } from '@shared/features/grants/grants.contract';
import { grantClosedBecause, submissionErrors } from '@shared/features/grants/grants-application.rules';
import { conflict, invalid, notFound, Problem } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { afterCommit, transaction } from '@server/db/transaction';
import { env } from '@server/env';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { fileResponse, keepUpload, type FileResponse, type ReceivedFile } from '@server/http/uploads';
import { announce } from '@server/jobs/job';
import { accountById, recordAudit, type PersonView } from '@server/features/accounts/accounts.service';
import { requireEvent } from '@server/features/events/events.service';
import { applicationOf, registrationOf } from '@server/features/registration/registration.service';
import { talksOfPerson } from '@server/features/talks/talks.service';
import { fundsOf, grantDates, viewerOf } from './grants-cases.service';
import { removeAwards } from './grants-awards.service';
import { grantApplied } from './grants.jobs';
import {
  AwardRow,
  GrantApplicationRow,
  GrantEvidenceRow,
  GrantItemRow,
  GrantReviewRow,
} from './grants.model';
import { conflictOf, isHidden, onCommittee } from './grants.policy';
import { presentMyGrant, type GrantDoorFacts } from './grants-mine.service';

/** What the application hangs on: a registration, else an application for a place that was not declined. */
export async function basisOf(
  eventId: string,
  accountId: string,
): Promise<'registration' | 'application' | null> {
  if (await registrationOf(eventId, accountId)) return 'registration';
  const application = await applicationOf(eventId, accountId);
  return application && application.state !== 'declined' ? 'application' : null;
}

async function doorOf(actor: Actor, slug: string, now: Date): Promise<GrantDoorFacts> {
  const event = await requireEvent(slug);
  if (event.state === 'draft') throw notFound('This event');
  const [basis, dates, funds, person, talks] = await Promise.all([
    basisOf(event.id, actor.accountId),
    grantDates(event.id),
    fundsOf(event.id),
    accountById(actor.accountId),
    talksOfPerson(actor.accountId),
  ]);
  return {
    event,
    basis,
    dueAt: dates.dueAt,
    closedBecause: grantClosedBecause(
      { eventState: event.state, hasBasis: basis !== null, dueAt: dates.dueAt },
      now,
    ),
    coveredKinds: [...new Set(funds.flatMap((fund) => fund.row.covers))] as CostKind[],
    person: person as PersonView,
    talks: talks
      .filter((talk) => talk.eventSlug === slug && ['submitted', 'accepted'].includes(talk.state))
      .map(({ id, title, label }) => ({ id, title: title || label })),
  };
}

const ownRow = (eventId: string, accountId: string): Promise<GrantApplicationRow | null> =>
  GrantApplicationRow.findOne({ where: { eventId, accountId } });

/** Everything of the person's own page. @throws 404 for a draft event. */
export async function readMyGrant(actor: Actor, slug: string, now: Date): Promise<MyGrant> {
  const door = await doorOf(actor, slug, now);
  return presentMyGrant(door, await ownRow(door.event.id, actor.accountId), now);
}

/** Saves the draft; the first save (version 0) gives the reference. @throws 409 when handed in or closed, 412, 422. */
export async function saveMyGrant(
  actor: Actor,
  slug: string,
  version: number,
  input: GrantInput,
  now: Date,
): Promise<MyGrant> {
  const door = await doorOf(actor, slug, now);
  if (door.closedBecause) throw conflict('grants.closed', door.closedBecause);
  refuseTwice(input);
  if (input.talkId && !door.talks.some((talk) => talk.id === input.talkId))
    throw invalid({ talkId: 'Choose one of your own talks at this event.' });
  await transaction(async () => {
    let row = await ownRow(door.event.id, actor.accountId);
    if (row) sameVersion(row.version, version);
    else if (version !== 0) sameVersion(0, version);
    if (row?.state === 'submitted')
      throw conflict('grants.handed_in', 'The application is handed in. Withdraw it first, then change it.');
    const { items, ...fields } = input;
    if (row) await bump(row, { ...fields, basis: door.basis, state: 'draft' });
    else row = await firstSave(door, actor, fields);
    await GrantItemRow.destroy({ where: { applicationId: row.id } });
    for (const item of items) await GrantItemRow.create({ id: newId(), applicationId: row.id, ...item });
    await recordAudit({
      actor,
      action: 'grants.draft_saved',
      subject: 'grant application',
      subjectId: row.id,
      eventId: door.event.id,
    });
  });
  return readMyGrant(actor, slug, now);
}

function refuseTwice(input: GrantInput): void {
  const twice = input.items.findIndex(
    (item, index) => input.items.findIndex((other) => other.kind === item.kind) < index,
  );
  if (twice >= 0) throw invalid({ [`items.${twice}.kind`]: 'This cost kind stands there twice.' });
}

/** A save always makes a new version, also when only the items have changed. */
async function bump(row: GrantApplicationRow, fields: Record<string, unknown>): Promise<void> {
  row.changed('updatedAt', true);
  await row.update({ ...fields, updatedAt: new Date() });
}

async function firstSave(
  door: GrantDoorFacts,
  actor: Actor,
  fields: Omit<GrantInput, 'items'>,
): Promise<GrantApplicationRow> {
  const last =
    (await GrantApplicationRow.max<number, GrantApplicationRow>('number', {
      where: { eventId: door.event.id },
    })) ?? 0;
  const number = last + 1;
  const reference = `T${door.event.startsOn.slice(2, 4)}-${String(number).padStart(3, '0')}`;
  const row = await GrantApplicationRow.create({
    id: newId(),
    eventId: door.event.id,
    accountId: actor.accountId,
    basis: door.basis,
    number,
    reference,
    state: 'draft',
    ...fields,
  });
  // Version 0 means "nothing saved yet" to the page.
  await bump(row, {});
  return row;
}

/** Hands the saved draft in; stage, country and affiliation are kept as they are now. @throws 409, 412, 422 with all that is missing. */
export async function submitMyGrant(
  actor: Actor,
  slug: string,
  version: number,
  now: Date,
): Promise<MyGrant> {
  const door = await doorOf(actor, slug, now);
  if (door.closedBecause) throw conflict('grants.closed', door.closedBecause);
  await transaction(async () => {
    const row = await ownRow(door.event.id, actor.accountId);
    if (!row) throw notFound('Your grant application');
    sameVersion(row.version, version);
    if (row.state !== 'draft') throw conflict('grants.step', `The application is ${row.state}.`);
    const view = await presentMyGrant(door, row, now);
    const { country, careerStage, affiliation } = door.person;
    const errors = submissionErrors((view.application as NonNullable<MyGrant['application']>).input, {
      coveredKinds: door.coveredKinds,
      currency: door.event.currency,
      country,
      careerStage,
    });
    if (Object.keys(errors).length > 0) throw invalid(errors);
    await row.update({ state: 'submitted', submittedAt: now, stage: careerStage, country, affiliation });
    await recordAudit({
      actor,
      action: 'grants.applied',
      subject: 'grant application',
      subjectId: row.id,
      eventId: door.event.id,
      after: {
        reference: row.reference,
        items: view.application?.input.items.map(({ kind, amountMinor }) => ({ kind, amountMinor })),
      },
    });
    await announce(grantApplied, { applicationId: row.id });
  });
  return readMyGrant(actor, slug, now);
}

/** Saves and hands in at once; for seeds and other programs. */
export async function applyForGrant(
  actor: Actor,
  slug: string,
  input: GrantInput,
  now: Date,
): Promise<MyGrant> {
  const saved = await saveMyGrant(actor, slug, 0, input, now);
  return submitMyGrant(actor, slug, saved.version, now);
}

/** Takes the application back before a decision was sent; proposals go with it, and scores of the old text. */
export async function withdrawMyGrant(
  actor: Actor,
  slug: string,
  version: number,
  now: Date,
): Promise<MyGrant> {
  const event = await requireEvent(slug);
  await transaction(async () => {
    const row = await ownRow(event.id, actor.accountId);
    if (!row) throw notFound('Your grant application');
    sameVersion(row.version, version);
    if (row.state === 'withdrawn' || row.decision)
      throw conflict(
        'grants.step',
        row.decision
          ? 'The decision has been sent. You can accept the grant or give it back.'
          : 'The application is withdrawn.',
      );
    for (const award of await AwardRow.findAll({ where: { applicationId: row.id } }))
      await removeAwards(actor, event.id, award);
    await GrantReviewRow.destroy({ where: { applicationId: row.id, conflict: false } });
    await row.update({ state: 'withdrawn', submittedAt: null });
    await recordAudit({
      actor,
      action: 'grants.withdrawn',
      subject: 'grant application',
      subjectId: row.id,
      eventId: event.id,
    });
  });
  return readMyGrant(actor, slug, now);
}

const EVIDENCE_TYPES = ['application/pdf', 'image/png', 'image/jpeg'];

async function draftOfOwn(actor: Actor, eventId: string): Promise<GrantApplicationRow> {
  const row = await ownRow(eventId, actor.accountId);
  if (!row) throw conflict('grants.no_draft', 'Save the application first, then add documents.');
  if (row.state !== 'draft')
    throw conflict('grants.handed_in', 'The application is handed in. Withdraw it first, then change it.');
  return row;
}

/** Adds a document to the draft. @throws 415 for another kind of file, 409 when there is no draft or twelve documents. */
export async function addEvidence(
  actor: Actor,
  slug: string,
  kind: CostKind,
  file: ReceivedFile | undefined,
  now: Date,
): Promise<MyGrant> {
  const event = await requireEvent(slug);
  const row = await draftOfOwn(actor, event.id);
  if (!file) throw invalid({ file: 'Choose a file.' });
  if (!EVIDENCE_TYPES.includes(file.type))
    throw new Problem(415, 'upload.kind', 'Documents are PDF, PNG or JPEG.', {
      file: 'Documents are PDF, PNG or JPEG.',
    });
  const storedName = await keepUpload(file);
  await transaction(async () => {
    if ((await GrantEvidenceRow.count({ where: { applicationId: row.id } })) >= MAX_EVIDENCE_FILES)
      throw conflict('grants.too_many_files', `At most ${MAX_EVIDENCE_FILES} documents. Remove one first.`);
    const { originalName, bytes, sha256, type } = file;
    const made = await GrantEvidenceRow.create({
      id: newId(),
      applicationId: row.id,
      kind,
      fileName: originalName,
      bytes,
      sha256,
      type,
      storedName,
    });
    await recordAudit({
      actor,
      action: 'grants.evidence_added',
      subject: 'grant application',
      subjectId: row.id,
      eventId: event.id,
      after: { evidence: made.id, kind, sha256 },
    });
  });
  return readMyGrant(actor, slug, now);
}

/** Removes a document of one's own draft, with its bytes. */
export async function removeEvidence(
  actor: Actor,
  slug: string,
  evidenceId: string,
  now: Date,
): Promise<MyGrant> {
  const event = await requireEvent(slug);
  const row = await ownRow(event.id, actor.accountId);
  const evidence =
    row && (await GrantEvidenceRow.findOne({ where: { id: evidenceId, applicationId: row.id } }));
  if (!row || !evidence) throw notFound('This document');
  await draftOfOwn(actor, event.id);
  await transaction(async () => {
    await evidence.destroy();
    await recordAudit({
      actor,
      action: 'grants.evidence_removed',
      subject: 'grant application',
      subjectId: row.id,
      eventId: event.id,
      before: { evidence: evidence.id },
    });
    afterCommit(
      () => void rm(path.join(env.UPLOADS_DIR, path.basename(evidence.storedName)), { force: true }),
    );
  });
  return readMyGrant(actor, slug, now);
}

/** A document for its owner, and for the committee once it is handed in and without a conflict. @throws 404 for everybody else. */
export async function downloadEvidence(
  actor: Actor,
  eventId: string,
  evidenceId: string,
): Promise<FileResponse> {
  const evidence = await GrantEvidenceRow.findByPk(evidenceId);
  const row =
    evidence && (await GrantApplicationRow.findOne({ where: { id: evidence.applicationId, eventId } }));
  if (!evidence || !row) throw notFound('This document');
  if (row.accountId !== actor.accountId) {
    const declared = await GrantReviewRow.findOne({
      where: { applicationId: row.id, reviewerId: actor.accountId, conflict: true },
    });
    const viewer = await viewerOf(actor);
    if (
      row.state !== 'submitted' ||
      !onCommittee(actor, eventId) ||
      isHidden(viewer, conflictOf(viewer, row, declared !== null))
    )
      throw notFound('This document');
  }
  return fileResponse({
    storedName: evidence.storedName,
    downloadName: evidence.fileName,
    type: evidence.type,
    inline: true,
  });
}
