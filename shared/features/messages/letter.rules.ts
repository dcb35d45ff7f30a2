/** To whom an organiser can write. */
export const letterGroups = [
  'speakers',
  'owing_abstract',
  'chairs',
  'participants',
  'unpaid',
  'committee',
] as const;
export type LetterGroup = (typeof letterGroups)[number];
export const groupNames: Record<LetterGroup, string> = {
  speakers: 'Speakers and lecturers',
  owing_abstract: 'Those who owe an abstract',
  chairs: 'Chairs and tutors',
  participants: 'Registered participants',
  unpaid: 'Registered, not yet paid',
  committee: 'Organisers and reviewers',
};

/** What a letter can say of its reader, in the order of the list that is offered. */
export const mergeFields = [
  'name',
  'given_name',
  'event',
  'dates',
  'place',
  'talks',
  'abstract_due',
  'own_page',
] as const;
export type MergeField = (typeof mergeFields)[number];
export const fieldNames: Record<MergeField, string> = {
  name: 'Name as printed',
  given_name: 'Given name',
  event: 'Title of the event',
  dates: 'Dates of the event',
  place: 'Venue and town',
  talks: 'Titles of their talks',
  abstract_due: 'When abstracts are due',
  own_page: 'Address of their own pages',
};
export type MergeValues = Record<MergeField, string | null>;

const FIELD = /\{\{([^{}]*)\}\}/g;
const isField = (name: string): name is MergeField => (mergeFields as readonly string[]).includes(name);
const namesIn = (text: string): string[] => [...text.matchAll(FIELD)].map((match) => (match[1] ?? '').trim());

/** Fields of a text that do not exist, each once, as they were written. */
export const unknownFields = (text: string): string[] => [
  ...new Set(namesIn(text).filter((name) => !isField(name))),
];

/** Fields that a text uses and for which this reader has no value. */
export const missingFields = (text: string, values: MergeValues): MergeField[] =>
  [...new Set(namesIn(text).filter(isField))].filter((field) => !values[field]?.trim());

/**
 * Fills in the fields of a text, once: a value that itself looks like a field stays as it is.
 * @throws Error naming the first field that is unknown or without a value.
 */
export function merge(text: string, values: MergeValues): string {
  return text.replace(FIELD, (_whole, inner: string) => {
    const name = inner.trim();
    const value = isField(name) ? values[name]?.trim() : undefined;
    if (!value) throw new Error(`no value for {{${name}}}`);
    return value;
  });
}
