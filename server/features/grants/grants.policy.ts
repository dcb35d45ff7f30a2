import { holds, isAdministrator, type Actor } from '@server/http/authorize';
import { sameInstitution } from '@shared/features/grants/grants.rules';

/** Somebody of the committee, with what a conflict of interest depends on. */
export interface Viewer {
  actor: Actor;
  affiliation: string;
}
interface Subject {
  accountId: string;
  affiliation: string;
  eventId: string;
}
export type Conflict = 'declared' | 'institution' | 'own' | null;

export const onCommittee = (actor: Actor, eventId: string): boolean =>
  holds(actor, 'organiser', eventId) || holds(actor, 'reviewer', eventId);
export const canPropose = (actor: Actor, eventId: string): boolean => holds(actor, 'organiser', eventId);
export const canEditFunds = canPropose;
/** Roles in a fund are given by the event office. */
export const canInviteFunder = (actor: Actor): boolean => isAdministrator(actor);

/** One's own application, the same institution, or a declared conflict. */
export function conflictOf({ actor, affiliation }: Viewer, subject: Subject, declared: boolean): Conflict {
  if (subject.accountId === actor.accountId) return 'own';
  if (declared) return 'declared';
  return sameInstitution(affiliation, subject.affiliation) ? 'institution' : null;
}

/** Nothing is hidden from the event office; everybody else of the committee sees nothing of an application in conflict. */
export const isHidden = (viewer: Viewer, conflict: Conflict): boolean =>
  conflict !== null && !isAdministrator(viewer.actor);

export const canScore = (viewer: Viewer, subject: Subject, conflict: Conflict): boolean =>
  onCommittee(viewer.actor, subject.eventId) && (conflict === null || conflict === 'declared');

/** Other people's scores and their mean: after one's own; organisers also when nobody can apply any more, since they rank. */
export function canSeeScores(
  viewer: Viewer,
  subject: Subject,
  facts: { hasScored: boolean; scoringIsLate: boolean },
): boolean {
  if (isAdministrator(viewer.actor) || facts.hasScored) return true;
  return facts.scoringIsLate && holds(viewer.actor, 'organiser', subject.eventId);
}
