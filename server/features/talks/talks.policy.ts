import { holds, type Actor } from '@server/http/authorize';

interface Subject {
  eventId: string;
  state: string;
  people: readonly { accountId: string; part: string }[];
}

export const isOrganiser = (actor: Actor | null, eventId: string): boolean =>
  holds(actor, 'organiser', eventId);

const hasPart = (actor: Actor | null, talk: Subject, ...parts: string[]): boolean =>
  talk.people.some((person) => person.accountId === actor?.accountId && parts.includes(person.part));

/** The talk's own people and the organisers; reviewers read what is submitted. */
export const canReadTalk = (actor: Actor | null, talk: Subject): boolean =>
  isOrganiser(actor, talk.eventId) ||
  hasPart(actor, talk, 'speaker', 'tutor', 'chair') ||
  (holds(actor, 'reviewer', talk.eventId) && talk.state !== 'draft');

export const canEditTalk = (actor: Actor | null, talk: Subject): boolean => isOrganiser(actor, talk.eventId);

/** Title and abstract: its speakers and the organisers, unless it is declined or withdrawn. */
export const canWriteAbstract = (actor: Actor | null, talk: Subject): boolean =>
  !['declined', 'withdrawn'].includes(talk.state) &&
  (isOrganiser(actor, talk.eventId) || hasPart(actor, talk, 'speaker'));

export const canDecideTalk = (actor: Actor | null, talk: Subject): boolean =>
  isOrganiser(actor, talk.eventId) && ['submitted', 'draft', 'declined'].includes(talk.state);

export const canWithdrawTalk = (actor: Actor | null, talk: Subject): boolean =>
  !['declined', 'withdrawn'].includes(talk.state) &&
  (isOrganiser(actor, talk.eventId) || hasPart(actor, talk, 'speaker'));

/** Slides by its speakers; notes and problems by tutors, too. */
export const canUpload = (actor: Actor | null, talk: Subject): boolean =>
  !['declined', 'withdrawn'].includes(talk.state) &&
  (isOrganiser(actor, talk.eventId) || hasPart(actor, talk, 'speaker', 'tutor'));

/** Consent is a person's own: nobody gives it for somebody else. */
export const canConsent = (actor: Actor | null, talk: Subject): boolean => hasPart(actor, talk, 'speaker');

/** Who may download: organisers, the talk's people and its chair always; others by visibility and date. */
export function canDownload(
  actor: Actor | null,
  talk: Subject,
  material: { visibility: string; visibleFrom: string | null },
  reader: { isParticipant: boolean; today: string; eventPublic: boolean },
): boolean {
  if (isOrganiser(actor, talk.eventId) || hasPart(actor, talk, 'speaker', 'tutor', 'chair')) return true;
  if (talk.state !== 'accepted' || !reader.eventPublic) return false;
  if (material.visibleFrom && material.visibleFrom > reader.today) return false;
  if (material.visibility === 'public') return true;
  return material.visibility === 'participants' && reader.isParticipant;
}
