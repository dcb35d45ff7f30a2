import { Model, type Sequelize } from 'sequelize';
import { integer, key, optionalAt, optionalText, text, version } from '@server/db/columns';

export class CalendarInvitationRow extends Model {
  declare id: string;
  declare eventId: string;
  declare talkId: string;
  declare accountId: string;
  declare uid: string;
  declare sequence: number;
  declare lastMethod: 'REQUEST' | 'CANCEL';
  declare startsAt: string;
  declare endsAt: string;
  declare roomName: string;
  declare answer: 'ACCEPTED' | 'TENTATIVE' | 'DECLINED' | null;
  declare answeredAt: Date | null;
  declare version: number;
  declare updatedAt: Date;
}

export class CalendarFeedRow extends Model {
  declare id: string;
  declare accountId: string;
  /** SHA-256 of the secret part of the address; the secret itself is computed, never kept. */
  declare tokenHash: string;
}

/** Does not want letters of this event that are not owed to them. */
export class LetterRefusalRow extends Model {
  declare id: string;
  declare accountId: string;
  declare eventId: string;
}

export function initialiseMessagesFeature(sequelize: Sequelize): void {
  CalendarInvitationRow.init(
    {
      id: key(),
      eventId: text(),
      talkId: text(),
      accountId: text(),
      uid: text(),
      sequence: integer(),
      lastMethod: text(),
      startsAt: text(),
      endsAt: text(),
      roomName: text(),
      answer: optionalText(),
      answeredAt: optionalAt(),
      version: version(),
    },
    { sequelize, modelName: 'calendar_invitations', version: true },
  );
  CalendarFeedRow.init(
    { id: key(), accountId: text(), tokenHash: text() },
    { sequelize, modelName: 'calendar_feeds' },
  );
  LetterRefusalRow.init(
    { id: key(), accountId: text(), eventId: text() },
    { sequelize, modelName: 'letter_refusals' },
  );
}
