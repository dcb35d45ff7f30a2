import { Model, type Sequelize } from 'sequelize';
import { at, integer, key, optionalAt, optionalJson, optionalText, text, version } from '@server/db/columns';

export class AccountRow extends Model {
  declare id: string;
  declare email: string;
  declare passwordHash: string | null;
  declare emailVerifiedAt: Date | null;
  declare disabledAt: Date | null;
  declare givenName: string;
  declare familyName: string;
  declare printedName: string;
  /** Folded family and given name: sorting and searching. */
  declare sortName: string;
  declare affiliation: string;
  declare country: string | null;
  declare careerStage: string | null;
  declare orcid: string | null;
  declare timeZone: string;
  declare version: number;

  static byEmail(email: string): Promise<AccountRow | null> {
    return AccountRow.findOne({ where: { email: email.toLowerCase() } });
  }
}

export class RoleGrantRow extends Model {
  declare id: string;
  declare accountId: string;
  declare role: string;
  declare scope: string;
  declare scopeId: string | null;
  declare grantedBy: string | null;
  declare endedAt: Date | null;

  static openOf(accountId: string | string[]): Promise<RoleGrantRow[]> {
    return RoleGrantRow.findAll({ where: { accountId, endedAt: null }, order: [['id', 'ASC']] });
  }
}

export class TokenRow extends Model {
  declare id: string;
  declare purpose: string;
  declare hash: string;
  declare accountId: string | null;
  declare email: string | null;
  declare subjectId: string | null;
  declare data: unknown;
  declare expiresAt: Date;
  declare usedAt: Date | null;
}

export class SessionRow extends Model {
  /** SHA-256 of the cookie's secret. */
  declare id: string;
  declare accountId: string;
  declare device: string;
  declare startedAt: Date;
  declare lastSeenAt: Date;
  declare idleSeconds: number;
  declare expiresAt: Date;
  declare endedAt: Date | null;
}

export class AuditRow extends Model {
  declare id: string;
  declare at: Date;
  declare actorId: string | null;
  declare actorName: string;
  declare action: string;
  declare subject: string;
  declare subjectId: string;
  declare eventId: string | null;
  declare before: unknown;
  declare after: unknown;
}

export function initialiseAccounts(sequelize: Sequelize): void {
  AccountRow.init(
    {
      id: key(),
      email: text(),
      passwordHash: optionalText(),
      emailVerifiedAt: optionalAt(),
      disabledAt: optionalAt(),
      givenName: text(),
      familyName: text(),
      printedName: text(),
      sortName: text(),
      affiliation: text(''),
      country: optionalText(),
      careerStage: optionalText(),
      orcid: optionalText(),
      timeZone: text('UTC'),
      version: version(),
    },
    { sequelize, modelName: 'accounts', version: true },
  );
  RoleGrantRow.init(
    {
      id: key(),
      accountId: text(),
      role: text(),
      scope: text(),
      scopeId: optionalText(),
      grantedBy: optionalText(),
      endedAt: optionalAt(),
    },
    { sequelize, modelName: 'role_grants' },
  );
  TokenRow.init(
    {
      id: key(),
      purpose: text(),
      hash: text(),
      accountId: optionalText(),
      email: optionalText(),
      subjectId: optionalText(),
      data: optionalJson(),
      expiresAt: at(),
      usedAt: optionalAt(),
    },
    { sequelize, modelName: 'tokens' },
  );
  SessionRow.init(
    {
      id: key(),
      accountId: text(),
      device: text(),
      startedAt: at(),
      lastSeenAt: at(),
      idleSeconds: integer(),
      expiresAt: at(),
      endedAt: optionalAt(),
    },
    { sequelize, modelName: 'sessions' },
  );
  AuditRow.init(
    {
      id: key(),
      at: at(),
      actorId: optionalText(),
      actorName: text(),
      action: text(),
      subject: text(),
      subjectId: text(),
      eventId: optionalText(),
      before: optionalJson(),
      after: optionalJson(),
    },
    { sequelize, modelName: 'audit_entries', timestamps: false },
  );
}
