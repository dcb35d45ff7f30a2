import { forbidden, notFound, unauthenticated } from '@shared/http/problem';

/** Who asks. `grants` are the open roles; speaker, chair and participant are derived from talks and registrations. */
export interface Actor {
  accountId: string;
  email: string;
  printedName: string;
  grants: { role: string; scope: string; scopeId: string | null }[];
}

/** Who may pass a door. Deny by default: an endpoint without one does not compile. */
export type Access =
  | { kind: 'anyone' }
  | { kind: 'signedIn' }
  | { kind: 'institute'; roles: string[] }
  | { kind: 'event'; roles: string[] }
  | { kind: 'fund'; roles: string[] };

export const anyone: Access = { kind: 'anyone' };
/** Any account; the service checks by policy whose thing it is. */
export const signedIn: Access = { kind: 'signedIn' };
export const inInstitute = (...roles: string[]): Access => ({ kind: 'institute', roles });
/** One of the roles in the event of the path (or the institute's finance role, when listed). */
export const inEvent = (...roles: string[]): Access => ({ kind: 'event', roles });
export const inFund = (...roles: string[]): Access => ({ kind: 'fund', roles });

export const isAdministrator = (actor: Actor | null): boolean =>
  actor?.grants.some((grant) => grant.role === 'administrator') ?? false;

/** Holds the role in that scope, or for the whole institute; administrators hold every role. */
export function holds(actor: Actor | null, role: string, scopeId?: string | null): boolean {
  if (!actor) return false;
  return (
    isAdministrator(actor) ||
    actor.grants.some(
      (grant) => grant.role === role && (grant.scope === 'institute' || grant.scopeId === scopeId),
    )
  );
}

/**
 * Passes or throws: 401 for a stranger; 403 for somebody with another role here; 404 for everybody else, so that the
 * existence of an event or fund is not told to outsiders.
 */
export function enter(access: Access, actor: Actor | null, scopeId: string | null): void {
  if (access.kind === 'anyone') return;
  if (!actor) throw unauthenticated();
  if (access.kind === 'signedIn' || isAdministrator(actor)) return;
  if (access.roles.some((role) => holds(actor, role, scopeId))) return;
  const insider = actor.grants.some(
    (grant) => grant.scope === 'institute' || (scopeId && grant.scopeId === scopeId),
  );
  throw insider || access.kind === 'institute' ? forbidden() : notFound();
}
