import { Model, type Sequelize } from 'sequelize';
import { at, integer, key, optionalAt, optionalText, text } from '../db/columns';

/** One letter to one person. */
export class MessageRow extends Model {
  declare id: string;
  /** Feature and name of the letter: `talks.invitation`. */
  declare letter: string;
  declare accountId: string | null;
  declare eventId: string | null;
  declare subjectId: string | null;
  declare toName: string;
  declare toAddress: string;
  declare replyTo: string | null;
  declare subject: string;
  declare text: string;
  declare html: string;
  declare calendarMethod: 'REQUEST' | 'CANCEL' | null;
  declare calendarContent: string | null;
  declare unsubscribeUrl: string | null;
  declare dedupKey: string;
  /** Derived from the key, so that a second sending of the same letter is recognisable as such. */
  declare messageId: string;
  declare state: 'queued' | 'sending' | 'sent' | 'failed';
  declare attempts: number;
  declare nextAt: Date;
  declare lastError: string | null;
  declare serverReply: string | null;
  declare sentAt: Date | null;
  declare createdAt: Date;
}

export function initialiseMessages(sequelize: Sequelize): void {
  MessageRow.init(
    {
      id: key(),
      letter: text(),
      accountId: optionalText(),
      eventId: optionalText(),
      subjectId: optionalText(),
      toName: text(),
      toAddress: text(),
      replyTo: optionalText(),
      subject: text(),
      text: text(),
      html: text(),
      calendarMethod: optionalText(),
      calendarContent: optionalText(),
      unsubscribeUrl: optionalText(),
      dedupKey: text(),
      messageId: text(),
      state: text('queued'),
      attempts: integer(0),
      nextAt: at(),
      lastError: optionalText(),
      serverReply: optionalText(),
      sentAt: optionalAt(),
    },
    { sequelize, modelName: 'messages' },
  );
}
