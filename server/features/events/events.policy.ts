import { holds, isAdministrator, type Actor } from '@server/http/authorize';

interface Subject {
  id: string;
  state: string;
}

/** Organisers of the event work on it until it is archived. */
export const canEditEvent = (actor: Actor | null, event: Subject): boolean =>
  event.state !== 'archived' && holds(actor, 'organiser', event.id);

export const canChangeState = (actor: Actor | null, event: Subject): boolean =>
  holds(actor, 'organiser', event.id);

/** The event office sets events up. */
export const canCreateEvents = (actor: Actor | null): boolean => isAdministrator(actor);

export const canManageTeam = (actor: Actor | null, event: Subject): boolean =>
  holds(actor, 'organiser', event.id);
