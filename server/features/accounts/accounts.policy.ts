import { isAdministrator, type Actor } from '@server/http/authorize';
import type { Role, Scope } from '@shared/features/accounts/accounts.contract';

/** Administrators give every role; an organiser gives the event's own roles in the event that they organise. */
export function canGrantRole(actor: Actor, role: Role, scope: Scope, scopeId: string | null): boolean {
  if (isAdministrator(actor)) return true;
  return (
    scope === 'event' &&
    ['organiser', 'reviewer', 'desk'].includes(role) &&
    actor.grants.some((grant) => grant.role === 'organiser' && grant.scopeId === scopeId)
  );
}
