import { Model, type Sequelize } from 'sequelize';
import type { ProgrammeKind } from '@shared/features/programme/programme.contract';
import { at, flag, integer, json, key, optionalInteger, text, version } from '@server/db/columns';

export class DraftRow extends Model {
  declare eventId: string;
  declare version: number;
}

export class PlacementRow extends Model {
  declare talkId: string;
  declare eventId: string;
  declare roomId: string;
  /** Local date. */
  declare day: string;
  declare startMinute: number;
  /** Null: as long as the talk asks for. */
  declare minutes: number | null;
  declare fixed: boolean;

  static ofEvent(eventId: string): Promise<PlacementRow[]> {
    return PlacementRow.findAll({ where: { eventId }, order: ['day', 'startMinute', 'talkId'] });
  }
}

export class RevisionRow extends Model {
  declare id: string;
  declare eventId: string;
  declare number: number;
  declare publishedAt: Date;
  declare publishedBy: string;
  declare note: string;

  static latest(eventId: string): Promise<RevisionRow | null> {
    return RevisionRow.findOne({ where: { eventId }, order: [['number', 'DESC']] });
  }

  static numbered(eventId: string, number: number): Promise<RevisionRow | null> {
    return RevisionRow.findOne({ where: { eventId, number } });
  }
}

export class RevisionPlacementRow extends Model {
  declare revisionId: string;
  declare talkId: string;
  declare kind: ProgrammeKind;
  declare word: string;
  declare title: string;
  /** Ids only: names are looked up, so that an erased person is erased here too. */
  declare people: { accountId: string; part: string }[];
  declare roomId: string;
  declare roomName: string;
  declare day: string;
  declare startMinute: number;
  declare minutes: number;
  declare startsAt: Date;
  declare endsAt: Date;
  declare fixed: boolean;

  static ofRevision(revisionId: string): Promise<RevisionPlacementRow[]> {
    return RevisionPlacementRow.findAll({ where: { revisionId }, order: ['startsAt', 'roomName', 'talkId'] });
  }
}

export function initialiseProgramme(sequelize: Sequelize): void {
  DraftRow.init(
    { eventId: key(), version: version() },
    { sequelize, modelName: 'programme_drafts', version: true },
  );
  PlacementRow.init(
    {
      talkId: key(),
      eventId: text(),
      roomId: text(),
      day: text(),
      startMinute: integer(),
      minutes: optionalInteger(),
      fixed: flag(),
    },
    { sequelize, modelName: 'placements' },
  );
  RevisionRow.init(
    { id: key(), eventId: text(), number: integer(), publishedAt: at(), publishedBy: text(), note: text('') },
    { sequelize, modelName: 'programme_revisions' },
  );
  RevisionPlacementRow.init(
    {
      revisionId: key(),
      talkId: key(),
      kind: text(),
      word: text(),
      title: text(),
      people: json(),
      roomId: text(),
      roomName: text(),
      day: text(),
      startMinute: integer(),
      minutes: integer(),
      startsAt: at(),
      endsAt: at(),
      fixed: flag(),
    },
    { sequelize, modelName: 'revision_placements' },
  );
}
