import type { VisibleMaterial } from '@shared/features/talks/talks-materials.contract';
import type { Talk } from '@shared/features/talks/talks.contract';
import { instantToLocal } from '@shared/lib/time';
import { forbidden, invalid, notFound, Problem } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { sameVersion } from '@server/http/serve';
import { fileResponse, keepUpload, type FileResponse, type ReceivedFile } from '@server/http/uploads';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { ConsentRow, MaterialRow, MaterialVersionRow, TalkPersonRow, TalkRow } from './talks.model';
import { canConsent, canDownload, canReadTalk, canUpload, isOrganiser } from './talks.policy';
import { readTalk, requireTalk, subjectOf } from './talks.service';

const SLIDES = [
  'application/pdf',
  'application/vnd.openxmlformats-officedocument.presentationml.presentation',
  'application/vnd.oasis.opendocument.presentation',
  'application/zip',
];

/** Adds a version; earlier ones stay. @throws 404/403 for others' talks, 415 for a kind of file that does not fit. */
export async function uploadMaterial(
  actor: Actor,
  eventId: string,
  talkId: string,
  kind: 'slides' | 'notes' | 'problems',
  file: ReceivedFile | undefined,
): Promise<Talk> {
  const { talk, people } = await requireTalk(eventId, talkId);
  if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
  if (!canUpload(actor, subjectOf(talk, people))) throw forbidden('Nothing can be uploaded to this talk.');
  if (!file) throw invalid({ file: 'Choose a file.' });
  if (kind === 'slides' && !SLIDES.includes(file.type)) {
    const message = 'Slides are PDF, PPTX, ODP or KEY. A picture can be put into a PDF.';
    throw new Problem(415, 'upload.kind', message, { file: message });
  }
  const storedName = await keepUpload(file);
  await transaction(async () => {
    const material =
      (await MaterialRow.findOne({ where: { talkId, kind } })) ??
      (await MaterialRow.create({
        id: newId(),
        talkId,
        kind,
        visibility: kind === 'slides' ? 'organisers' : 'participants',
        licence: 'all_rights',
      }));
    const last =
      (await MaterialVersionRow.max<number, MaterialVersionRow>('number', {
        where: { materialId: material.id },
      })) ?? 0;
    const { originalName, bytes, sha256, type } = file;
    await MaterialVersionRow.create({
      id: newId(),
      materialId: material.id,
      number: last + 1,
      fileName: originalName,
      bytes,
      sha256,
      type,
      storedName,
      uploadedBy: actor.accountId,
    });
    await recordAudit({
      actor,
      action: 'talks.material_uploaded',
      subject: 'talk',
      subjectId: talkId,
      eventId,
      after: { kind, number: last + 1, fileName: originalName, sha256 },
    });
  });
  return readTalk(actor, eventId, talkId);
}

export async function setMaterialAccess(
  actor: Actor,
  eventId: string,
  talkId: string,
  materialId: string,
  version: number,
  input: {
    visibility: 'organisers' | 'participants' | 'public';
    visibleFrom: string | null;
    licence: 'all_rights' | 'cc_by' | 'cc_by_sa' | 'cc_by_nc';
  },
): Promise<Talk & { version: number }> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canUpload(actor, subjectOf(talk, people))) throw forbidden();
    const material = await MaterialRow.findOne({ where: { id: materialId, talkId } });
    if (!material) throw notFound('This file');
    sameVersion(material.version, version);
    const before = { visibility: material.visibility, licence: material.licence };
    await material.update(input);
    await recordAudit({
      actor,
      action: 'talks.material_access',
      subject: 'talk',
      subjectId: talkId,
      eventId,
      before,
      after: input,
    });
  });
  return readTalk(actor, eventId, talkId);
}

/** Whether the reader takes part in the event; told by the registration, which is a higher feature (routes.ts). */
const readers: { isParticipant(eventId: string, accountId: string): Promise<boolean> } = {
  isParticipant: async () => false,
};
export function knowParticipantsBy(isParticipant: typeof readers.isParticipant): void {
  readers.isParticipant = isParticipant;
}

async function readerOf(actor: Actor | null, eventId: string, now: Date) {
  const event = await eventById(eventId);
  return {
    isParticipant: actor ? await readers.isParticipant(eventId, actor.accountId) : false,
    today: instantToLocal(now, event.timeZone).date,
    eventPublic: event.state !== 'draft',
  };
}

/** What this reader may download of an event's accepted talks, the newest version of each. @throws 404 for outsiders of a draft event. */
export async function visibleMaterials(
  actor: Actor | null,
  eventId: string,
  now: Date,
): Promise<VisibleMaterial[]> {
  const reader = await readerOf(actor, eventId, now);
  if (!reader.eventPublic && !isOrganiser(actor, eventId)) throw notFound('This event');
  const talks = new Map(
    (await TalkRow.findAll({ where: { eventId, state: 'accepted' } })).map((talk) => [talk.id, talk]),
  );
  const people = await TalkPersonRow.ofTalks([...talks.keys()]);
  const materials = (
    await MaterialRow.findAll({ where: { talkId: [...talks.keys()] }, order: ['talkId', 'kind'] })
  ).filter((material) =>
    canDownload(
      actor,
      subjectOf(
        talks.get(material.talkId) as TalkRow,
        people.filter((person) => person.talkId === material.talkId),
      ),
      material,
      reader,
    ),
  );
  const versions = await MaterialVersionRow.findAll({
    where: { materialId: materials.map((material) => material.id) },
    order: ['number'],
  });
  const newest = new Map(versions.map((version) => [version.materialId, version]));
  return materials.flatMap((material) => {
    const version = newest.get(material.id);
    if (!version) return [];
    const { fileName, type, bytes } = version;
    return [
      {
        talkId: material.talkId,
        kind: material.kind,
        file: version.id,
        fileName,
        type,
        bytes,
        licence: material.licence,
      },
    ];
  });
}

/** The bytes of a version, after the policy. @throws 404 for everybody who may not see it. */
export async function downloadMaterial(
  actor: Actor | null,
  eventId: string,
  versionId: string,
  now: Date,
): Promise<FileResponse> {
  const version = await MaterialVersionRow.findByPk(versionId);
  const material = version && (await MaterialRow.findByPk(version.materialId));
  const talk = material && (await TalkRow.findOne({ where: { id: material.talkId, eventId } }));
  if (!version || !material || !talk) throw notFound('This file');
  const people = await TalkPersonRow.ofTalks(talk.id);
  const reader = await readerOf(actor, eventId, now);
  if (!canDownload(actor, subjectOf(talk, people), material, reader)) throw notFound('This file');
  return fileResponse({
    storedName: version.storedName,
    downloadName: version.fileName,
    type: version.type,
    inline: version.type === 'application/pdf',
  });
}

/** Version of the sentence that is agreed to; a change of it needs a new consent. */
const CONSENT_TEXT = 'recording/1';

/** Gives or withdraws consent to recording; the history is kept. Only the speaker can. */
export async function setRecordingConsent(
  actor: Actor,
  eventId: string,
  talkId: string,
  consent: boolean,
): Promise<Talk> {
  await transaction(async () => {
    const { talk, people } = await requireTalk(eventId, talkId);
    if (!canReadTalk(actor, subjectOf(talk, people))) throw notFound('This talk');
    if (!canConsent(actor, subjectOf(talk, people)))
      throw forbidden('Only the speaker can agree to a recording.');
    const open = await ConsentRow.findOne({
      where: { accountId: actor.accountId, purpose: 'recording', subjectId: talkId, withdrawnAt: null },
    });
    if (consent && !open)
      await ConsentRow.create({
        id: newId(),
        accountId: actor.accountId,
        purpose: 'recording',
        subjectId: talkId,
        textVersion: CONSENT_TEXT,
        givenAt: new Date(),
      });
    if (!consent && open) await open.update({ withdrawnAt: new Date() });
    await recordAudit({
      actor,
      action: 'talks.recording_consent',
      subject: 'talk',
      subjectId: talkId,
      eventId,
      after: { consent },
    });
  });
  return readTalk(actor, eventId, talkId);
}
