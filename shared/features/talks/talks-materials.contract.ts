import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { localDate } from '../../lib/time';
import { inEvent, licences, materialKinds, ofTalk, talkSchema, visibilities } from './talks.contract';

/** Bytes of one file, at most. */
export const MAX_UPLOAD = 60_000_000;
export const uploadMaterial = endpoint({
  id: 'talks.upload',
  method: 'POST',
  path: '/api/events/:event/talks/:talk/materials',
  summary: 'Upload slides, notes or a problem sheet; earlier versions stay.',
  params: ofTalk,
  body: z.strictObject({ kind: z.enum(materialKinds) }),
  response: talkSchema,
  upload: { field: 'file', maxBytes: MAX_UPLOAD },
});
export const setMaterialAccess = endpoint({
  id: 'talks.material_access',
  method: 'PUT',
  path: '/api/events/:event/talks/:talk/materials/:material',
  summary: 'Who may see a material, from when, under which licence.',
  params: z.object({ event: slug, talk: id, material: id }),
  body: z.strictObject({
    visibility: z.enum(visibilities),
    visibleFrom: localDate.nullable(),
    licence: z.enum(licences),
  }),
  response: talkSchema,
  versioned: true,
});
export const downloadMaterial = endpoint({
  id: 'talks.download',
  method: 'GET',
  path: '/api/events/:event/materials/:file',
  summary: 'A version of a material, for those who may see it.',
  params: z.object({ event: slug, file: id }),
  response: 'file',
});
export const setRecordingConsent = endpoint({
  id: 'talks.recording',
  method: 'PUT',
  path: '/api/events/:event/talks/:talk/recording',
  summary: 'Give or withdraw one’s consent to being recorded.',
  params: ofTalk,
  body: z.strictObject({ consent: z.boolean() }),
  response: talkSchema,
});

/** The newest version of a material that the reader may see. */
export const visibleMaterial = z.object({
  talkId: id,
  kind: z.enum(materialKinds),
  /** For the download address. */
  file: id,
  fileName: z.string(),
  /** Real type by content. */
  type: z.string(),
  bytes: z.number().int(),
  licence: z.enum(licences),
});
export type VisibleMaterial = z.infer<typeof visibleMaterial>;
export const listMaterials = endpoint({
  id: 'talks.materials',
  method: 'GET',
  path: '/api/events/:event/materials',
  summary: 'Slides, notes and problem sheets of accepted talks that the reader may see, newest versions.',
  params: inEvent,
  response: z.object({ items: z.array(visibleMaterial) }),
});

export const talksMaterialsEndpoints = [
  listMaterials,
  uploadMaterial,
  setMaterialAccess,
  downloadMaterial,
  setRecordingConsent,
];
