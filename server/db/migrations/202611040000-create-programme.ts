import type { Migration } from '../migrate';
import { statements } from '../migrate';

/** A revision and its placements are a record of what people were told: no line of them is ever changed or removed. */
const insertOnly = (table: string): string[] =>
  ['UPDATE', 'DELETE'].map(
    (verb) => `CREATE TRIGGER ${table}_no_${verb.toLowerCase()} BEFORE ${verb} ON ${table}
      BEGIN SELECT RAISE(ABORT, 'a published revision is never changed'); END`,
  );

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE programme_drafts (
      event_id TEXT PRIMARY KEY REFERENCES events (id),
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE TABLE placements (
      talk_id TEXT PRIMARY KEY REFERENCES talks (id),
      event_id TEXT NOT NULL REFERENCES programme_drafts (event_id),
      room_id TEXT NOT NULL REFERENCES rooms (id),
      day TEXT NOT NULL CHECK (length(day) = 10),
      start_minute INTEGER NOT NULL CHECK (start_minute BETWEEN 0 AND 1435 AND start_minute % 5 = 0),
      minutes INTEGER CHECK (minutes IS NULL OR (minutes BETWEEN 5 AND 1440 AND minutes % 5 = 0)),
      fixed TINYINT(1) NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX placements_by_event ON placements (event_id)`,
    `CREATE INDEX placements_by_room ON placements (room_id)`,
    `CREATE TABLE programme_revisions (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      number INTEGER NOT NULL CHECK (number >= 1),
      published_at DATETIME NOT NULL,
      published_by TEXT NOT NULL,
      note TEXT NOT NULL DEFAULT '',
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (event_id, number)
    )`,
    `CREATE TRIGGER programme_revisions_without_gaps BEFORE INSERT ON programme_revisions
      WHEN NEW.number <> 1 + (SELECT ifnull(max(number), 0) FROM programme_revisions WHERE event_id = NEW.event_id)
      BEGIN SELECT RAISE(ABORT, 'revisions are numbered without gaps'); END`,
    `CREATE TABLE revision_placements (
      revision_id TEXT NOT NULL REFERENCES programme_revisions (id),
      talk_id TEXT NOT NULL,
      kind TEXT NOT NULL,
      word TEXT NOT NULL,
      title TEXT NOT NULL,
      people JSON NOT NULL,
      room_id TEXT NOT NULL,
      room_name TEXT NOT NULL,
      day TEXT NOT NULL,
      start_minute INTEGER NOT NULL,
      minutes INTEGER NOT NULL CHECK (minutes > 0),
      starts_at DATETIME NOT NULL,
      ends_at DATETIME NOT NULL,
      fixed TINYINT(1) NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      PRIMARY KEY (revision_id, talk_id)
    )`,
    ...insertOnly('programme_revisions'),
    ...insertOnly('revision_placements'),
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    ['revision_placements', 'programme_revisions', 'placements', 'programme_drafts'].map(
      (table) => `DROP TABLE ${table}`,
    ),
  );
