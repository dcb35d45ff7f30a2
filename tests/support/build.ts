import type { Role, Scope } from '../../shared/features/accounts/accounts.contract';
import { transaction } from '../../server/db/transaction';
import type { Actor } from '../../server/http/authorize';
import { hashPassword } from '../../server/features/accounts/accounts-sign-in.service';
import { AccountRow, RoleGrantRow } from '../../server/features/accounts/accounts.model';
import {
  ensureAccountForEmail,
  grantRole,
  systemActor,
  type NewPerson,
  type PersonView,
} from '../../server/features/accounts/accounts.service';

export const testPassword = 'a plain test passphrase';
let hash: Promise<string> | undefined;
let serial = 0;

/** A confirmed account with the test password and, where given, roles. */
export async function buildAccount(
  person: Partial<NewPerson> = {},
  grants: { role: Role; scope?: Scope; scopeId?: string | null }[] = [],
): Promise<PersonView> {
  serial += 1;
  const passwordHash = await (hash ??= hashPassword(testPassword));
  const built = await ensureAccountForEmail({
    email: `person${serial}@example.org`,
    givenName: `Given${serial}`,
    familyName: `Family${serial}`,
    affiliation: 'Norrhamn University',
    country: 'NO',
    careerStage: 'postdoc',
    timeZone: 'Europe/Oslo',
    ...person,
  });
  await transaction(async () => {
    await AccountRow.update({ passwordHash, emailVerifiedAt: new Date() }, { where: { id: built.id } });
    for (const grant of grants) {
      await grantRole({
        accountId: built.id,
        role: grant.role,
        scope: grant.scope ?? 'institute',
        scopeId: grant.scopeId ?? null,
        by: systemActor,
      });
    }
  });
  return { ...built, hasPassword: true, emailVerified: true };
}

/** The actor that a signed-in request of this person would carry. */
export async function actorFor(person: { id: string; email: string; printedName: string }): Promise<Actor> {
  const grants = await RoleGrantRow.openOf(person.id);
  return {
    accountId: person.id,
    email: person.email,
    printedName: person.printedName,
    grants: grants.map(({ role, scope, scopeId }) => ({ role, scope, scopeId })),
  };
}

export const administrator = { role: 'administrator' as const };
