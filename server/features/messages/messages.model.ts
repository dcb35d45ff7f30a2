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
  /** 256 random bits. Kept readable: the owner is shown the address again; it opens nothing but times and rooms. */
  declare token: string;
}

export function initialiseMessagesFeature(sequelize: Sequelize): void {
  CalendarInvitationRow.init(
    {
      id: key(), eventId: text(), talkId: text(), accountId: text(), uid: text(), sequence: integer(), lastMethod: text(), startsAt: text(), endsAt: text(), roomName: text(),
      answer: optionalText(), answeredAt: optionalAt(), version: version(),
    },
    { sequelize, modelName: 'calendar_invitations', version: true },
  );
  CalendarFeedRow.init({ id: key(), accountId: text(), token: text() }, { sequelize, modelName: 'calendar_feeds' });
}
