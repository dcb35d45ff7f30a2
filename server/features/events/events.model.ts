import { Model, type Sequelize } from 'sequelize';
import type {
  BlockKind,
  DeadlineKind,
  EventKind,
  EventState,
  RoomFeature,
} from '@shared/features/events/events.contract';
import { flag, integer, json, key, optionalInteger, text, version } from '@server/db/columns';

export class EventRow extends Model {
  declare id: string;
  declare slug: string;
  declare kind: EventKind;
  declare title: string;
  declare shortTitle: string;
  declare startsOn: string;
  declare endsOn: string;
  declare timeZone: string;
  declare currency: string;
  declare venue: string;
  declare town: string;
  declare capacity: number;
  declare admission: 'open' | 'application';
  declare state: EventState;
  declare contactEmail: string;
  declare texts: { lead: string; practical: string; travel: string; safeguarding: string };
  declare admitsMinors: boolean;
  /** Settings of higher features, each under its own word. */
  declare settings: Record<string, unknown>;
  declare version: number;

  static bySlug(slug: string): Promise<EventRow | null> {
    return EventRow.findOne({ where: { slug } });
  }
}

export class RoomRow extends Model {
  declare id: string;
  declare eventId: string;
  declare name: string;
  declare shortName: string;
  declare capacity: number;
  declare features: RoomFeature[];
  declare position: number;
}

export class BlockRow extends Model {
  declare id: string;
  declare eventId: string;
  declare day: string;
  declare startsAt: string;
  declare endsAt: string;
  declare kind: BlockKind;
  declare title: string;
  declare minimalMinutes: number | null;
}

export class DeadlineRow extends Model {
  declare id: string;
  declare eventId: string;
  declare kind: DeadlineKind;
  declare date: string;
  declare time: string;
}

export function initialiseEvents(sequelize: Sequelize): void {
  EventRow.init(
    {
      id: key(),
      slug: text(),
      kind: text(),
      title: text(),
      shortTitle: text(),
      startsOn: text(),
      endsOn: text(),
      timeZone: text(),
      currency: text(),
      venue: text(),
      town: text(),
      capacity: integer(),
      admission: text(),
      state: text('draft'),
      contactEmail: text(),
      texts: json(),
      admitsMinors: flag(),
      settings: json(),
      version: version(),
    },
    { sequelize, modelName: 'events', version: true },
  );
  RoomRow.init(
    {
      id: key(),
      eventId: text(),
      name: text(),
      shortName: text(),
      capacity: integer(),
      features: json(),
      position: integer(),
    },
    { sequelize, modelName: 'rooms' },
  );
  BlockRow.init(
    {
      id: key(),
      eventId: text(),
      day: text(),
      startsAt: text(),
      endsAt: text(),
      kind: text(),
      title: text(''),
      minimalMinutes: optionalInteger(),
    },
    { sequelize, modelName: 'session_blocks' },
  );
  DeadlineRow.init(
    { id: key(), eventId: text(), kind: text(), date: text(), time: text() },
    { sequelize, modelName: 'deadlines' },
  );
}
