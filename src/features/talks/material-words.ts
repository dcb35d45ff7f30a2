import type { licences, materialKinds, visibilities } from '@shared/features/talks/talks.contract';

export const materialNames: Record<(typeof materialKinds)[number], { title: string; hint: string }> = {
  slides: { title: 'Slides', hint: 'PDF, PPTX, ODP or KEY' },
  notes: { title: 'Notes', hint: 'PDF, or ZIP with sources' },
  problems: { title: 'Problem sheet', hint: 'PDF, or ZIP with sources' },
};

export const visibilityOptions: { value: (typeof visibilities)[number]; label: string }[] = [
  { value: 'organisers', label: 'Organisers and the chair' },
  { value: 'participants', label: 'Participants' },
  { value: 'public', label: 'Everybody' },
];

export const licenceOptions: { value: (typeof licences)[number]; label: string }[] = [
  { value: 'all_rights', label: 'All rights reserved' },
  { value: 'cc_by', label: 'CC BY 4.0' },
  { value: 'cc_by_sa', label: 'CC BY-SA 4.0' },
  { value: 'cc_by_nc', label: 'CC BY-NC 4.0' },
];

/** Kind of a file in words, by its content. */
export const typeWords = (type: string): string =>
  ({
    'application/pdf': 'PDF',
    'application/zip': 'ZIP',
    'application/vnd.openxmlformats-officedocument.presentationml.presentation': 'PPTX',
    'application/vnd.oasis.opendocument.presentation': 'ODP',
    'image/png': 'PNG',
    'image/jpeg': 'JPEG',
  })[type] ?? type;
