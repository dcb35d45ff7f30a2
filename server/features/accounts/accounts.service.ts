import { createHash, randomBytes } from 'node:crypto';
import { Op } from 'sequelize';
import type { Role, Scope } from '@shared/features/accounts/accounts.contract';
import { roleFitsScope } from '@shared/features/accounts/accounts.rules';
import { conflict, invalid, notFound } from '@shared/http/problem';
import { foldCase } from '@shared/lib/text';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { AccountRow, AuditRow, RoleGrantRow, TokenRow } from './accounts.model';

/** What other features may know of a person; what they show of it is their presenter's matter. */
export interface PersonView {
  id: string;
  email: string;
  emailVerified: boolean;
  hasPassword: boolean;
  givenName: string;
  familyName: string;
  printedName: string;
  sortName: string;
  affiliation: string;
  country: string | null;
  careerStage: string | null;
  orcid: string | null;
  timeZone: string;
}

/** The program itself: seeds and jobs act in its name. Stands in the audit trail as "Analemma". */
export const systemActor: Actor = {
  accountId: '00000000-0000-7000-8000-000000000000',
  email: 'system@analemma.example.org',
  printedName: 'Analemma',
  grants: [{ role: 'administrator', scope: 'institute', scopeId: null }],
};

export const personView = (row: AccountRow): PersonView => ({
  id: row.id,
  email: row.email,
  emailVerified: Boolean(row.emailVerifiedAt),
  hasPassword: Boolean(row.passwordHash),
  givenName: row.givenName,
  familyName: row.familyName,
  printedName: row.printedName,
  sortName: row.sortName,
  affiliation: row.affiliation,
  country: row.country,
  careerStage: row.careerStage,
  orcid: row.orcid,
  timeZone: row.timeZone,
});

export const sortNameOf = (givenName: string, familyName: string): string =>
  foldCase(`${familyName} ${givenName}`);

/** One person, or null. */
export async function accountById(id: string): Promise<PersonView | null> {
  const row = await AccountRow.findByPk(id);
  return row && personView(row);
}

/** Many persons by id; unknown ids are left out. */
export async function accountsById(ids: Iterable<string>): Promise<Map<string, PersonView>> {
  const wanted = [...new Set(ids)];
  const found = new Map<string, PersonView>();
  for (let i = 0; i < wanted.length; i += 500) {
    const rows = await AccountRow.findAll({ where: { id: wanted.slice(i, i + 500) } });
    for (const row of rows) found.set(row.id, personView(row));
  }
  return found;
}

export async function accountByEmail(email: string): Promise<PersonView | null> {
  const row = await AccountRow.byEmail(email);
  return row && personView(row);
}

/** People by name, address or affiliation, for pickers. At most `limit`. */
export async function searchPeople(q: string, limit = 20): Promise<PersonView[]> {
  const like = `%${foldCase(q).replace(/[\\%_]/g, (c) => `\\${c}`)}%`;
  const rows = await AccountRow.findAll({
    where: { [Op.or]: [{ sortName: { [Op.like]: like } }, { email: { [Op.like]: like } }] },
    order: ['sortName', 'id'],
    limit,
  });
  return rows.map(personView);
}

export interface NewPerson {
  email: string;
  givenName: string;
  familyName: string;
  printedName?: string;
  affiliation?: string;
  country?: string | null;
  careerStage?: string | null;
  timeZone?: string;
  orcid?: string | null;
}

/** The account of an address; made without a password and unverified when there is none. Nothing of an existing one changes. */
export function ensureAccountForEmail(person: NewPerson): Promise<PersonView> {
  return transaction(async () => {
    const present = await AccountRow.byEmail(person.email);
    if (present) return personView(present);
    const row = await AccountRow.create({
      id: newId(),
      email: person.email.toLowerCase(),
      givenName: person.givenName,
      familyName: person.familyName,
      printedName: person.printedName ?? `${person.givenName} ${person.familyName}`.trim(),
      sortName: sortNameOf(person.givenName, person.familyName),
      affiliation: person.affiliation ?? '',
      country: person.country ?? null,
      careerStage: person.careerStage ?? null,
      timeZone: person.timeZone ?? 'UTC',
      orcid: person.orcid ?? null,
    });
    return personView(row);
  });
}

/** One line of the audit trail, in the same transaction as what it tells. Never put secrets or health data in it. */
export async function recordAudit(entry: {
  actor: Actor | null;
  action: string;
  subject: string;
  subjectId: string;
  eventId?: string | null;
  before?: unknown;
  after?: unknown;
}): Promise<void> {
  await AuditRow.create({
    id: newId(),
    at: new Date(),
    actorId: entry.actor?.accountId ?? null,
    actorName: entry.actor?.printedName ?? 'Nobody signed in',
    action: entry.action,
    subject: entry.subject,
    subjectId: entry.subjectId,
    eventId: entry.eventId ?? null,
    before: entry.before ?? null,
    after: entry.after ?? null,
  });
}

/** The newest lines about one event, for its log. */
export function auditOfEvent(eventId: string, since: Date, limit = 20): Promise<AuditRow[]> {
  return AuditRow.findAll({ where: { eventId, at: { [Op.gte]: since } }, order: [['id', 'DESC']], limit });
}

/** Gives a role; does nothing when the person holds it already. @throws 422 when the role does not belong to the scope. */
export function grantRole(input: {
  accountId: string;
  role: Role;
  scope: Scope;
  scopeId: string | null;
  by: Actor;
}): Promise<void> {
  const { accountId, role, scope, scopeId, by } = input;
  if (!roleFitsScope(role, scope) || (scope === 'institute') !== (scopeId === null)) {
    throw invalid({ role: 'This role is not given there.' });
  }
  return transaction(async () => {
    if (!(await AccountRow.findByPk(accountId))) throw notFound('This account');
    const open = await RoleGrantRow.findOne({ where: { accountId, role, scope, scopeId, endedAt: null } });
    if (open) return;
    const grant = await RoleGrantRow.create({
      id: newId(),
      accountId,
      role,
      scope,
      scopeId,
      grantedBy: by.accountId,
    });
    await recordAudit({
      actor: by,
      action: 'accounts.role_granted',
      subject: 'account',
      subjectId: accountId,
      eventId: scope === 'event' ? scopeId : null,
      after: { role, scope, scopeId, grant: grant.id },
    });
  });
}

/** Ends a role; the row stays. The last administrator can't be ended. */
export function endRole(input: { accountId: string; grantId: string; by: Actor }): Promise<void> {
  return transaction(async () => {
    const grant = await RoleGrantRow.findOne({
      where: { id: input.grantId, accountId: input.accountId, endedAt: null },
    });
    if (!grant) throw notFound('This role');
    if (
      grant.role === 'administrator' &&
      (await RoleGrantRow.count({ where: { role: 'administrator', endedAt: null } })) === 1
    ) {
      throw conflict(
        'accounts.last_administrator',
        'This is the last administrator. Give the role to somebody else first.',
      );
    }
    await grant.update({ endedAt: new Date() });
    await recordAudit({
      actor: input.by,
      action: 'accounts.role_ended',
      subject: 'account',
      subjectId: input.accountId,
      eventId: grant.scope === 'event' ? grant.scopeId : null,
      before: { role: grant.role, scope: grant.scope, scopeId: grant.scopeId },
    });
  });
}

/** Who holds a role in a scope now, by name, with the grant's id. */
export async function holdersOf(
  scope: Scope,
  scopeId: string | null,
  role: Role,
): Promise<(PersonView & { grantId: string })[]> {
  const grants = await RoleGrantRow.findAll({ where: { scope, scopeId, role, endedAt: null } });
  const people = await accountsById(grants.map((grant) => grant.accountId));
  return grants
    .flatMap((grant) => {
      const person = people.get(grant.accountId);
      return person ? [{ ...person, grantId: grant.id }] : [];
    })
    .sort((a, b) => a.sortName.localeCompare(b.sortName));
}

const hashToken = (raw: string): string => createHash('sha256').update(raw).digest('hex');

/**
 * A token for a link: 256 random bits, of which the database keeps only the hash. Valid for `hours`.
 * A new token of the same purpose and subject does not end the earlier ones.
 */
export function issueToken(input: {
  purpose: string;
  accountId?: string;
  email?: string;
  subjectId?: string;
  data?: unknown;
  hours: number;
}): Promise<string> {
  const raw = randomBytes(32).toString('base64url');
  return transaction(async () => {
    await TokenRow.create({
      id: newId(),
      purpose: input.purpose,
      hash: hashToken(raw),
      accountId: input.accountId ?? null,
      email: input.email ?? null,
      subjectId: input.subjectId ?? null,
      data: input.data ?? null,
      expiresAt: new Date(Date.now() + input.hours * 3_600_000),
    });
    return raw;
  });
}

/** Reads a token without using it up. @throws 404 with a sentence when it is unknown, used or out of date. */
export async function peekToken(purpose: string, raw: string): Promise<TokenRow> {
  const row = await TokenRow.findOne({ where: { purpose, hash: hashToken(raw) } });
  if (!row || row.usedAt || row.expiresAt < new Date())
    throw notFound('This link has been used, is out of date, or');
  return row;
}

/** Uses a token up, in the ambient transaction (or one of its own). */
export function redeemToken(purpose: string, raw: string): Promise<TokenRow> {
  return transaction(async () => {
    const row = await peekToken(purpose, raw);
    await row.update({ usedAt: new Date() });
    return row;
  });
}

/** Ends all open tokens of a purpose for an account or subject. */
export async function revokeTokens(where: {
  purpose: string;
  accountId?: string;
  subjectId?: string;
}): Promise<void> {
  await transaction(() => TokenRow.update({ usedAt: new Date() }, { where: { ...where, usedAt: null } }));
}
