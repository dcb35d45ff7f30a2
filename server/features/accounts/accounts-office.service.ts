import type { Request, Response } from 'express';
import { Op, type WhereOptions } from 'sequelize';
import type { Account, Role, Scope, Session } from '@shared/features/accounts/accounts.contract';
import { roleFitsScope, roleNames } from '@shared/features/accounts/accounts.rules';
import { foldCase } from '@shared/lib/text';
import { forbidden, invalid, notFound } from '@shared/http/problem';
import type { Page } from '@shared/http/page';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import type { Actor } from '@server/http/authorize';
import { csrfToken } from '@server/http/csrf';
import { sameVersion } from '@server/http/serve';
import { queueMessage } from '@server/mail/outbox';
import { roleInvitationLetter } from './accounts.mail';
import { AccountRow, AuditRow, RoleGrantRow } from './accounts.model';
import { canGrantRole } from './accounts.policy';
import { presentAccount, presentAccountRow, presentAudit, type ScopeName } from './accounts.presenter';
import {
  accountById,
  ensureAccountForEmail,
  grantRole,
  issueToken,
  peekToken,
  recordAudit,
  redeemToken,
  sortNameOf,
} from './accounts.service';
import { hashPassword, openSession, refuseWeak, setPassword } from './accounts-sign-in.service';

/** Names of events and funds, for showing grants; given by routes.ts because this feature knows no higher one. */
const scopeNames: { find(ids: string[]): Promise<Map<string, ScopeName>> } = { find: async () => new Map() };
export function nameScopesWith(find: (ids: string[]) => Promise<Map<string, ScopeName>>): void {
  scopeNames.find = find;
}
const namesOf = (grants: RoleGrantRow[]): Promise<Map<string, ScopeName>> =>
  scopeNames.find([...new Set(grants.flatMap((grant) => grant.scopeId ?? []))]);

/** One's own account as the client gets it. */
export async function ownAccount(accountId: string): Promise<Account> {
  const row = await AccountRow.findByPk(accountId);
  if (!row) throw notFound('This account');
  const grants = await RoleGrantRow.openOf(accountId);
  return presentAccount(row, grants, await namesOf(grants));
}

/** Who is signed in, as the client gets it; `accountId` is given when the session was opened in this very request. */
export async function sessionFor(
  req: Request,
  res: Response,
  accountId: string | undefined,
): Promise<Session> {
  return {
    account: accountId ? await ownAccount(accountId) : null,
    csrfToken: (res.locals.csrfToken as string | undefined) ?? csrfToken(req, res),
    demo: env.DEMO,
    instituteName: env.INSTITUTE_NAME,
  };
}

export interface ProfileInput {
  givenName: string;
  familyName: string;
  printedName: string;
  affiliation: string;
  country: string | null;
  careerStage: string | null;
  orcid: string | null;
  timeZone: string;
}

export async function saveProfile(actor: Actor, version: number, input: ProfileInput): Promise<Account> {
  await transaction(async () => {
    const row = (await AccountRow.findByPk(actor.accountId)) as AccountRow;
    sameVersion(row.version, version);
    await row.update({ ...input, sortName: sortNameOf(input.givenName, input.familyName) });
    await recordAudit({ actor, action: 'accounts.profile_saved', subject: 'account', subjectId: row.id });
  });
  return ownAccount(actor.accountId);
}

/** Accounts in the order of names, from a cursor on. */
export async function listAccounts(query: {
  cursor?: string;
  limit: number;
  q?: string;
  role?: Role;
}): Promise<Page<unknown>> {
  const conditions: WhereOptions[] = [];
  if (query.q) {
    const like = `%${foldCase(query.q).replace(/[\\%_]/g, (c) => `\\${c}`)}%`;
    conditions.push({
      [Op.or]: ['sortName', 'email', 'affiliation'].map((column) => ({ [column]: { [Op.like]: like } })),
    });
  }
  if (query.role) {
    const holders = await RoleGrantRow.findAll({
      where: { role: query.role, endedAt: null },
      attributes: ['accountId'],
    });
    conditions.push({ id: holders.map((grant) => grant.accountId) });
  }
  if (query.cursor) {
    const [name = '', id = ''] = decodeCursor(query.cursor);
    conditions.push({ [Op.or]: [{ sortName: { [Op.gt]: name } }, { sortName: name, id: { [Op.gt]: id } }] });
  }
  const rows = await AccountRow.findAll({
    where: { [Op.and]: conditions },
    order: ['sortName', 'id'],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  const grants = await RoleGrantRow.openOf(page.map((row) => row.id));
  const names = await namesOf(grants);
  const last = page[page.length - 1];
  return {
    items: page.map((row) =>
      presentAccountRow(
        row,
        grants.filter((grant) => grant.accountId === row.id),
        names,
      ),
    ),
    next: rows.length > query.limit && last ? encodeCursor([last.sortName, last.id]) : null,
  };
}

export const encodeCursor = (parts: string[]): string =>
  Buffer.from(JSON.stringify(parts)).toString('base64url');
export function decodeCursor(cursor: string): string[] {
  try {
    return (JSON.parse(Buffer.from(cursor, 'base64url').toString()) as unknown[]).map(String);
  } catch {
    throw invalid({ cursor: 'This cursor is not from here.' });
  }
}

export async function accountRow(accountId: string) {
  const row = await AccountRow.findByPk(accountId);
  if (!row) throw notFound('This account');
  const grants = await RoleGrantRow.openOf(accountId);
  return presentAccountRow(row, grants, await namesOf(grants));
}

/** Sends a link that opens an account with a role. @throws 403 unless the actor may give that role. */
export async function createInvitation(
  actor: Actor,
  input: {
    email: string;
    givenName: string;
    familyName: string;
    role: Role;
    scope: Scope;
    scopeId: string | null;
  },
): Promise<void> {
  const { role, scope, scopeId } = input;
  if (!roleFitsScope(role, scope) || (scope === 'institute') !== (scopeId === null)) {
    throw invalid({ role: 'This role is not given there.' });
  }
  if (!canGrantRole(actor, role, scope, scopeId)) throw forbidden();
  const names = await scopeNames.find(scopeId ? [scopeId] : []);
  if (scopeId && !names.has(scopeId)) throw invalid({ scopeId: 'This event or fund does not exist.' });
  const scopeTitle = scopeId ? (names.get(scopeId)?.title ?? '') : env.INSTITUTE_NAME;
  await transaction(async () => {
    const data = {
      role,
      scope,
      scopeId,
      scopeTitle,
      givenName: input.givenName,
      familyName: input.familyName,
      by: actor.accountId,
    };
    const token = await issueToken({ purpose: 'invitation', email: input.email, data, hours: 14 * 24 });
    await queueMessage({
      letter: 'accounts.invitation',
      eventId: scope === 'event' ? (scopeId ?? undefined) : undefined,
      to: { name: `${input.givenName} ${input.familyName}`, address: input.email },
      subjectId: scopeId ?? 'institute',
      dedupKey: `invitation:${newId()}`,
      mail: roleInvitationLetter({
        name: `${input.givenName} ${input.familyName}`,
        inviter: actor.printedName,
        role: roleNames[role],
        scopeTitle,
        institute: env.INSTITUTE_NAME,
        url: `${env.BASE_URL}/invitation/${token}`,
      }),
    });
    await recordAudit({
      actor,
      action: 'accounts.invited',
      subject: scope,
      subjectId: scopeId ?? 'institute',
      eventId: scope === 'event' ? scopeId : null,
      after: { email: input.email, role },
    });
  });
}

interface InvitationData {
  role: Role;
  scope: Scope;
  scopeId: string | null;
  scopeTitle: string;
  givenName: string;
  familyName: string;
  by: string;
}

export async function readInvitation(token: string) {
  const row = await peekToken('invitation', token);
  const data = row.data as InvitationData;
  const account = await AccountRow.byEmail(row.email as string);
  return {
    email: row.email as string,
    givenName: data.givenName,
    familyName: data.familyName,
    role: data.role,
    scopeTitle: data.scopeTitle,
    hasPassword: account?.passwordHash != null,
  };
}

/**
 * Takes the invitation. A new account gets its password here. A person who has one must be signed in as that
 * person: the link alone must not open an account that a password guards.
 */
export async function acceptInvitation(
  req: Request,
  res: Response,
  actor: Actor | null,
  token: string,
  password: string | undefined,
): Promise<string> {
  const offered = await readInvitation(token);
  if (offered.hasPassword && actor?.email !== offered.email) {
    throw forbidden(`Sign in as ${offered.email} first, then open the link again.`);
  }
  if (!offered.hasPassword) {
    if (!password) throw invalid({ password: 'Choose a password for the new account.' });
    refuseWeak(password, { email: offered.email, name: `${offered.givenName} ${offered.familyName}` });
  }
  const passwordHash = offered.hasPassword ? undefined : await hashPassword(password as string);
  const accountId = await transaction(async () => {
    const row = await redeemToken('invitation', token);
    const data = row.data as InvitationData;
    const person = await ensureAccountForEmail({ ...data, email: row.email as string });
    if (passwordHash && person.hasPassword)
      throw forbidden('A password has been set meanwhile. Sign in with it.');
    if (passwordHash) await setPassword(person.id, passwordHash);
    const inviter = await accountById(data.by);
    const by: Actor = {
      accountId: data.by,
      email: '',
      printedName: inviter?.printedName ?? 'Analemma',
      grants: [],
    };
    await grantRole({ accountId: person.id, role: data.role, scope: data.scope, scopeId: data.scopeId, by });
    return person.id;
  });
  await openSession(req, res, accountId);
  return accountId;
}

/** The audit trail, newest first. */
export async function listAudit(query: {
  cursor?: string;
  limit: number;
  action?: string;
  q?: string;
}): Promise<Page<unknown>> {
  const conditions: WhereOptions[] = [];
  if (query.action) conditions.push({ action: { [Op.startsWith]: query.action } });
  if (query.q)
    conditions.push({ actorName: { [Op.like]: `%${query.q.replace(/[\\%_]/g, (c) => `\\${c}`)}%` } });
  if (query.cursor) conditions.push({ id: { [Op.lt]: decodeCursor(query.cursor)[0] ?? '' } });
  const rows = await AuditRow.findAll({
    where: { [Op.and]: conditions },
    order: [['id', 'DESC']],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  const last = page[page.length - 1];
  return {
    items: page.map(presentAudit),
    next: rows.length > query.limit && last ? encodeCursor([last.id]) : null,
  };
}
