import { Model, type Sequelize } from 'sequelize';
import type {
  AwardState,
  CostKind,
  Eligibility,
  FloorShare,
  GrantState,
} from '@shared/features/grants/grants.contract';
import type { CareerStage } from '@shared/features/accounts/accounts.contract';
import {
  flag,
  integer,
  json,
  key,
  optionalAt,
  optionalInteger,
  optionalText,
  text,
  version,
} from '@server/db/columns';

export class FundRow extends Model {
  declare id: string;
  declare eventId: string;
  declare name: string;
  declare funder: string;
  declare budgetMinor: number;
  declare currency: string;
  declare covers: CostKind[];
  declare eligibility: Eligibility;
  declare capPerPersonMinor: number | null;
  declare floors: FloorShare[];
  declare showScores: boolean;
  declare version: number;
}

export class GrantApplicationRow extends Model {
  declare id: string;
  declare eventId: string;
  declare accountId: string;
  declare basis: 'registration' | 'application';
  declare number: number;
  declare reference: string;
  declare state: GrantState;
  declare motivation: string;
  declare minUsefulMinor: number;
  declare firstMeeting: boolean;
  declare noOtherMoney: boolean;
  declare talkId: string | null;
  /** Stage, country and affiliation as they were when it was handed in: decisions rest on them. */
  declare stage: CareerStage | null;
  declare country: string | null;
  declare affiliation: string;
  declare submittedAt: Date | null;
  declare decision: 'offered' | 'not_awarded' | null;
  declare decidedAt: Date | null;
  declare answerBy: Date | null;
  declare version: number;
  declare updatedAt: Date;
}

export class GrantItemRow extends Model {
  declare id: string;
  declare applicationId: string;
  declare kind: CostKind;
  declare amountMinor: number;
  declare quantity: number | null;
  declare note: string;
}

export class GrantEvidenceRow extends Model {
  declare id: string;
  declare applicationId: string;
  declare kind: CostKind;
  declare fileName: string;
  declare bytes: number;
  declare sha256: string;
  declare type: string;
  declare storedName: string;
  declare createdAt: Date;
}

export class GrantReviewRow extends Model {
  declare id: string;
  declare applicationId: string;
  declare reviewerId: string;
  declare score: number | null;
  declare comment: string;
  declare conflict: boolean;
}

export class AwardRow extends Model {
  declare id: string;
  declare fundId: string;
  declare applicationId: string;
  declare state: AwardState;
  declare proposedBy: string;
  declare decidedBy: string | null;
  declare decidedAt: Date | null;
  declare answeredAt: Date | null;
  declare updatedAt: Date;
  declare version: number;
}

export class AwardLineRow extends Model {
  declare id: string;
  declare awardId: string;
  declare applicationId: string;
  declare kind: CostKind;
  declare amountMinor: number;
  declare paidMinor: number;
  declare returned: boolean;
}

export class AwardTalkRow extends Model {
  declare id: string;
  declare awardId: string;
  declare authorId: string;
  declare side: 'funder' | 'committee';
  declare text: string;
  declare createdAt: Date;
}

export function initialiseGrants(sequelize: Sequelize): void {
  FundRow.init(
    {
      id: key(),
      eventId: text(),
      name: text(),
      funder: text(),
      budgetMinor: integer(),
      currency: text(),
      covers: json(),
      eligibility: json(),
      capPerPersonMinor: optionalInteger(),
      floors: json(),
      showScores: flag(),
      version: version(),
    },
    { sequelize, modelName: 'funds', version: true },
  );
  GrantApplicationRow.init(
    {
      id: key(),
      eventId: text(),
      accountId: text(),
      basis: text(),
      number: integer(),
      reference: text(),
      state: text(),
      motivation: text(''),
      minUsefulMinor: integer(0),
      firstMeeting: flag(),
      noOtherMoney: flag(),
      talkId: optionalText(),
      stage: optionalText(),
      country: optionalText(),
      affiliation: text(''),
      submittedAt: optionalAt(),
      decision: optionalText(),
      decidedAt: optionalAt(),
      answerBy: optionalAt(),
      version: version(),
    },
    { sequelize, modelName: 'grant_applications', version: true },
  );
  GrantItemRow.init(
    {
      id: key(),
      applicationId: text(),
      kind: text(),
      amountMinor: integer(),
      quantity: optionalInteger(),
      note: text(''),
    },
    { sequelize, modelName: 'grant_items' },
  );
  GrantEvidenceRow.init(
    {
      id: key(),
      applicationId: text(),
      kind: text(),
      fileName: text(),
      bytes: integer(),
      sha256: text(),
      type: text(),
      storedName: text(),
    },
    { sequelize, modelName: 'grant_evidence', tableName: 'grant_evidence' },
  );
  GrantReviewRow.init(
    {
      id: key(),
      applicationId: text(),
      reviewerId: text(),
      score: optionalInteger(),
      comment: text(''),
      conflict: flag(),
    },
    { sequelize, modelName: 'grant_reviews' },
  );
  AwardRow.init(
    {
      id: key(),
      fundId: text(),
      applicationId: text(),
      state: text(),
      proposedBy: text(),
      decidedBy: optionalText(),
      decidedAt: optionalAt(),
      answeredAt: optionalAt(),
      version: version(),
    },
    { sequelize, modelName: 'awards', version: true },
  );
  AwardLineRow.init(
    {
      id: key(),
      awardId: text(),
      applicationId: text(),
      kind: text(),
      amountMinor: integer(),
      paidMinor: integer(0),
      returned: flag(),
    },
    { sequelize, modelName: 'award_lines' },
  );
  AwardTalkRow.init(
    { id: key(), awardId: text(), authorId: text(), side: text(), text: text() },
    { sequelize, modelName: 'award_talks' },
  );
}
