import type { Request } from 'express';
import { Op } from 'sequelize';
import { notFound } from '@shared/http/problem';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { hashSecret, sessionSecret } from '@server/http/session';
import { AccountRow, RoleGrantRow, SessionRow } from './accounts.model';

const SEEN_EVERY_MS = 5 * 60_000;

/** The actor of a request, by its session; null for a stranger, an ended or outdated session, a disabled account. */
export async function actorOf(req: Request): Promise<Actor | null> {
  const secret = sessionSecret(req);
  if (!secret) return null;
  const session = await SessionRow.findByPk(hashSecret(secret));
  const now = Date.now();
  if (!session || session.endedAt || session.expiresAt.getTime() < now) return null;
  if (session.lastSeenAt.getTime() + session.idleSeconds * 1000 < now) return null;
  const [account, grants] = await Promise.all([
    AccountRow.findByPk(session.accountId),
    RoleGrantRow.openOf(session.accountId),
  ]);
  if (!account || account.disabledAt) return null;
  if (now - session.lastSeenAt.getTime() > SEEN_EVERY_MS) {
    await transaction(() => session.update({ lastSeenAt: new Date(now) }));
  }
  return {
    accountId: account.id,
    email: account.email,
    printedName: account.printedName,
    grants: grants.map(({ role, scope, scopeId }) => ({ role, scope, scopeId })),
  };
}

/** One's own open sessions, the latest first. The id shown is a prefix: enough to end it, useless as a cookie. */
export async function openSessions(req: Request, accountId: string) {
  const present = hashSecret(sessionSecret(req) ?? '');
  const rows = await SessionRow.findAll({
    where: { accountId, endedAt: null, expiresAt: { [Op.gt]: new Date() } },
    order: [['lastSeenAt', 'DESC']],
  });
  return rows.map((row) => ({
    id: row.id.slice(0, 24),
    startedAt: row.startedAt.toISOString(),
    lastSeenAt: row.lastSeenAt.toISOString(),
    device: row.device,
    present: row.id === present,
  }));
}

export async function endSession(accountId: string, idPrefix: string): Promise<void> {
  if (!/^[0-9a-f]{24}$/.test(idPrefix)) throw notFound('This session');
  await transaction(async () => {
    const [ended] = await SessionRow.update(
      { endedAt: new Date() },
      { where: { accountId, endedAt: null, id: { [Op.startsWith]: idPrefix } } },
    );
    if (ended === 0) throw notFound('This session');
  });
}
