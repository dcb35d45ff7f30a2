import type { ApplicationState, Diet, RegistrationState } from './registration.contract';
import { formatInstant } from '../../lib/time';

export const registrationStateNames: Record<RegistrationState, string> = {
  reserved: 'Reserved, not paid',
  registered: 'Registered',
  attended: 'Attended',
  absent: 'Absent',
  cancelled: 'Cancelled',
};
export const applicationStateNames: Record<ApplicationState, string> = {
  received: 'Received',
  offered: 'Offered',
  waiting: 'Waiting',
  declined: 'Declined',
  withdrawn: 'Withdrawn',
};
export const dietNames: Record<Diet, string> = {
  any: 'Any food',
  vegetarian: 'Vegetarian',
  vegan: 'Vegan',
  halal: 'Halal',
  kosher: 'Kosher',
  gluten_free: 'Without gluten',
};

/** States that hold a place. */
export const holdsPlace: readonly RegistrationState[] = ['reserved', 'registered', 'attended', 'absent'];

export interface DoorFacts {
  eventState: string;
  admission: 'open' | 'application';
  timeZone: string;
  /** Instants, null where there is no such deadline. */
  opensAt: string | null;
  closesAt: string | null;
  feeCategories: number;
  /** This person's application. */
  application: { state: ApplicationState; answerBy: string | null } | null;
}

/** Why this person can't register now, in a sentence; undefined when they can. A full event is another matter: `placesFree`. */
export function closedBecause(door: DoorFacts, now: Date): string | undefined {
  const at = now.toISOString();
  if (door.eventState === 'draft' || door.eventState === 'announced')
    return door.opensAt && at < door.opensAt
      ? `Registration opens ${formatInstant(door.opensAt, door.timeZone)}.`
      : 'Registration is not open yet.';
  if (door.eventState !== 'open' && door.eventState !== 'running') return 'The event is over.';
  if (door.feeCategories === 0) return 'The fees are not fixed yet.';
  if (door.opensAt && at < door.opensAt)
    return `Registration opens ${formatInstant(door.opensAt, door.timeZone)}.`;
  const offered = door.application?.state === 'offered';
  if (offered && door.application?.answerBy && at > door.application.answerBy)
    return `The offer was open until ${formatInstant(door.application.answerBy, door.timeZone)}.`;
  if (door.closesAt && at > door.closesAt && !offered)
    return `Registration closed ${formatInstant(door.closesAt, door.timeZone)}.`;
  if (door.admission === 'application' && !offered)
    return 'Places are given on application. You can register when you have an offer.';
  return undefined;
}

/** Places that a person without an offer may still take. Offers that are open keep theirs. */
export const placesFree = (places: { capacity: number; taken: number; offered: number }): number =>
  Math.max(0, places.capacity - places.taken - places.offered);

const APPLICATION_STEPS: Record<ApplicationState, readonly ApplicationState[]> = {
  received: ['offered', 'waiting', 'declined', 'withdrawn'],
  waiting: ['offered', 'declined', 'withdrawn'],
  offered: ['waiting', 'declined', 'withdrawn'],
  declined: ['offered', 'waiting'],
  withdrawn: [],
};
export const canStep = (from: ApplicationState, to: ApplicationState): boolean =>
  APPLICATION_STEPS[from].includes(to);

/** Field errors of a stay. */
export const stayErrors = (stay: {
  arrivesOn: string | null;
  leavesOn: string | null;
}): Record<string, string> =>
  stay.arrivesOn && stay.leavesOn && stay.leavesOn < stay.arrivesOn
    ? { leavesOn: 'You leave before you arrive.' }
    : {};

/** How long a place is kept for payment, in hours (the event's rule; common practice is one to seven days). */
export const RESERVATION_HOURS = 72;

/** Letters and digits that can't be mistaken for each other when read aloud or typed from a badge. */
export const CODE_ALPHABET = '23456789ABCDEFGHJKMNPQRSTUVWXYZ';
