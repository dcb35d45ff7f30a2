import { Model, type Sequelize } from 'sequelize';
import type { TalkKind, TalkPart, TalkState } from '@shared/features/talks/talks.contract';
import type { RoomFeature } from '@shared/features/events/events.contract';
import {
  at,
  integer,
  json,
  key,
  optionalAt,
  optionalInteger,
  optionalText,
  text,
  version,
} from '@server/db/columns';

export class TalkRow extends Model {
  declare id: string;
  declare eventId: string;
  declare kind: TalkKind;
  declare title: string;
  declare abstract: string;
  declare coAuthors: { name: string; affiliation: string }[];
  declare msc: string[];
  declare references: string[];
  declare needs: RoomFeature[];
  declare minutes: number;
  declare questionMinutes: number;
  declare courseId: string | null;
  declare number: number | null;
  declare exerciseOf: string | null;
  declare expectedAudience: number | null;
  declare state: TalkState;
  declare invitation: 'invited' | 'accepted' | 'declined' | null;
  declare invitationMessage: string;
  declare abstractAt: Date | null;
  declare decisionNote: string;
  declare version: number;
  declare createdAt: Date;

  static ofEvent(eventId: string): Promise<TalkRow[]> {
    return TalkRow.findAll({ where: { eventId }, order: ['id'] });
  }
}

export class TalkPersonRow extends Model {
  declare id: string;
  declare talkId: string;
  declare accountId: string;
  declare part: TalkPart;
  declare position: number;

  static ofTalks(talkId: string | string[]): Promise<TalkPersonRow[]> {
    return TalkPersonRow.findAll({ where: { talkId }, order: ['talkId', 'position'] });
  }
}

export class CourseRow extends Model {
  declare id: string;
  declare eventId: string;
  declare letter: string;
  declare title: string;
  declare shortTitle: string;
  declare minNights: number;
  declare maxPerDay: number;
  declare version: number;
}

export class PrerequisiteRow extends Model {
  declare id: string;
  declare eventId: string;
  declare before: string;
  declare after: string;
}

export class PresenceRow extends Model {
  declare id: string;
  declare eventId: string;
  declare accountId: string;
  declare arrivesAt: string | null;
  declare leavesAt: string | null;
  declare blocked: { from: string; to: string }[];
  declare wishes: string;
  declare version: number;
}

export class MaterialRow extends Model {
  declare id: string;
  declare talkId: string;
  declare kind: 'slides' | 'notes' | 'problems';
  declare visibility: 'organisers' | 'participants' | 'public';
  declare visibleFrom: string | null;
  declare licence: 'all_rights' | 'cc_by' | 'cc_by_sa' | 'cc_by_nc';
  declare version: number;
}

export class MaterialVersionRow extends Model {
  declare id: string;
  declare materialId: string;
  declare number: number;
  declare fileName: string;
  declare bytes: number;
  declare sha256: string;
  declare type: string;
  declare storedName: string;
  declare uploadedBy: string;
  declare createdAt: Date;
}

export class ConsentRow extends Model {
  declare id: string;
  declare accountId: string;
  declare purpose: string;
  declare subjectId: string;
  declare textVersion: string;
  declare givenAt: Date;
  declare withdrawnAt: Date | null;
}

export function initialiseTalks(sequelize: Sequelize): void {
  TalkRow.init(
    {
      id: key(),
      eventId: text(),
      kind: text(),
      title: text(),
      abstract: text(''),
      coAuthors: json(),
      msc: json(),
      references: json(),
      needs: json(),
      minutes: integer(),
      questionMinutes: integer(0),
      courseId: optionalText(),
      number: optionalInteger(),
      exerciseOf: optionalText(),
      expectedAudience: optionalInteger(),
      state: text('draft'),
      invitation: optionalText(),
      invitationMessage: text(''),
      abstractAt: optionalAt(),
      decisionNote: text(''),
      version: version(),
    },
    { sequelize, modelName: 'talks', version: true },
  );
  TalkPersonRow.init(
    { id: key(), talkId: text(), accountId: text(), part: text(), position: integer() },
    { sequelize, modelName: 'talk_people' },
  );
  CourseRow.init(
    {
      id: key(),
      eventId: text(),
      letter: text(),
      title: text(),
      shortTitle: text(),
      minNights: integer(1),
      maxPerDay: integer(1),
      version: version(),
    },
    { sequelize, modelName: 'courses', version: true },
  );
  PrerequisiteRow.init(
    { id: key(), eventId: text(), before: text(), after: text() },
    { sequelize, modelName: 'prerequisites' },
  );
  PresenceRow.init(
    {
      id: key(),
      eventId: text(),
      accountId: text(),
      arrivesAt: optionalText(),
      leavesAt: optionalText(),
      blocked: json(),
      wishes: text(''),
      version: version(),
    },
    { sequelize, modelName: 'presences', version: true },
  );
  MaterialRow.init(
    {
      id: key(),
      talkId: text(),
      kind: text(),
      visibility: text('organisers'),
      visibleFrom: optionalText(),
      licence: text('all_rights'),
      version: version(),
    },
    { sequelize, modelName: 'materials', version: true },
  );
  MaterialVersionRow.init(
    {
      id: key(),
      materialId: text(),
      number: integer(),
      fileName: text(),
      bytes: integer(),
      sha256: text(),
      type: text(),
      storedName: text(),
      uploadedBy: text(),
    },
    { sequelize, modelName: 'material_versions' },
  );
  ConsentRow.init(
    {
      id: key(),
      accountId: text(),
      purpose: text(),
      subjectId: text(),
      textVersion: text(),
      givenAt: at(),
      withdrawnAt: optionalAt(),
    },
    { sequelize, modelName: 'consents' },
  );
}
