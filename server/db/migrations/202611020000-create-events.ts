import type { Migration } from '../migrate';
import { statements } from '../migrate';

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE events (
      id TEXT PRIMARY KEY,
      slug TEXT NOT NULL UNIQUE,
      kind TEXT NOT NULL CHECK (kind IN ('conference','workshop','summer_school','thematic_programme')),
      title TEXT NOT NULL,
      short_title TEXT NOT NULL,
      starts_on TEXT NOT NULL,
      ends_on TEXT NOT NULL CHECK (ends_on >= starts_on),
      time_zone TEXT NOT NULL,
      currency TEXT NOT NULL CHECK (length(currency) = 3),
      venue TEXT NOT NULL,
      town TEXT NOT NULL,
      capacity INTEGER NOT NULL CHECK (capacity > 0),
      admission TEXT NOT NULL CHECK (admission IN ('open','application')),
      state TEXT NOT NULL CHECK (state IN ('draft','announced','open','running','finished','archived')),
      contact_email TEXT NOT NULL,
      texts JSON NOT NULL,
      admits_minors TINYINT(1) NOT NULL DEFAULT 0,
      settings JSON NOT NULL,
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX events_by_date ON events (starts_on, id)`,
    `CREATE TABLE rooms (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      name TEXT NOT NULL,
      short_name TEXT NOT NULL,
      capacity INTEGER NOT NULL CHECK (capacity > 0),
      features JSON NOT NULL,
      position INTEGER NOT NULL,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX rooms_by_event ON rooms (event_id, position)`,
    `CREATE TABLE session_blocks (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      day TEXT NOT NULL,
      starts_at TEXT NOT NULL,
      ends_at TEXT NOT NULL CHECK (ends_at > starts_at),
      kind TEXT NOT NULL CHECK (kind IN ('session','coffee','lunch','social')),
      title TEXT NOT NULL,
      minimal_minutes INTEGER,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX session_blocks_by_event ON session_blocks (event_id, day, starts_at)`,
    `CREATE TABLE deadlines (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      kind TEXT NOT NULL,
      date TEXT NOT NULL,
      time TEXT NOT NULL,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (event_id, kind)
    )`,
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    ['deadlines', 'session_blocks', 'rooms', 'events'].map((table) => `DROP TABLE ${table}`),
  );
