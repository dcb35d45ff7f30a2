import { holds, type Actor } from '@server/http/authorize';

type Event = { id: string; state: string };

/** Organisers of the event change its draft and publish, until it is archived. */
export const canChangeProgramme = (actor: Actor | null, event: Event): boolean =>
  holds(actor, 'organiser', event.id) && event.state !== 'archived';

/** An event that is still a draft shows nothing to the public. */
export const canReadProgramme = (actor: Actor | null, event: Event): boolean =>
  event.state !== 'draft' || holds(actor, 'organiser', event.id);
