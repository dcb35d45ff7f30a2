import type {
  Account,
  AccountRow as AccountListRow,
  Grant,
} from '@shared/features/accounts/accounts.contract';
import type { AccountRow, AuditRow, RoleGrantRow } from './accounts.model';
import type { AuditRow as AuditListRow } from '@shared/features/accounts/accounts.contract';

export interface ScopeName {
  key: string;
  title: string;
}

export function presentGrant(grant: RoleGrantRow, names: Map<string, ScopeName>): Grant {
  const name = grant.scopeId ? names.get(grant.scopeId) : undefined;
  return {
    id: grant.id,
    role: grant.role as Grant['role'],
    scope: grant.scope as Grant['scope'],
    scopeId: grant.scopeId,
    scopeKey: name?.key ?? null,
    scopeTitle: name?.title ?? null,
  };
}

export function presentAccount(
  row: AccountRow,
  grants: RoleGrantRow[],
  names: Map<string, ScopeName>,
): Account {
  return {
    id: row.id,
    email: row.email,
    emailVerified: Boolean(row.emailVerifiedAt),
    givenName: row.givenName,
    familyName: row.familyName,
    printedName: row.printedName,
    affiliation: row.affiliation,
    country: row.country,
    careerStage: row.careerStage as Account['careerStage'],
    orcid: row.orcid,
    timeZone: row.timeZone,
    grants: grants.map((grant) => presentGrant(grant, names)),
    version: row.version,
  };
}

export function presentAccountRow(
  row: AccountRow,
  grants: RoleGrantRow[],
  names: Map<string, ScopeName>,
): AccountListRow {
  return {
    id: row.id,
    email: row.email,
    printedName: row.printedName,
    affiliation: row.affiliation,
    country: row.country,
    emailVerified: Boolean(row.emailVerifiedAt),
    disabled: Boolean(row.disabledAt),
    grants: grants.map((grant) => presentGrant(grant, names)),
  };
}

export function presentAudit(row: AuditRow): AuditListRow {
  return {
    id: row.id,
    at: row.at.toISOString(),
    actorName: row.actorName,
    action: row.action,
    subject: row.subject,
    subjectId: row.subjectId,
    eventId: row.eventId,
    before: row.before,
    after: row.after,
  };
}
