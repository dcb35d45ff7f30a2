import type { Migration } from '../migrate';
import { statements } from '../migrate';

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE registrations (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      account_id TEXT NOT NULL REFERENCES accounts (id),
      code TEXT NOT NULL UNIQUE,
      state TEXT NOT NULL CHECK (state IN ('reserved','registered','attended','absent','cancelled')),
      category_id TEXT NOT NULL REFERENCES fee_categories (id),
      arrives_on TEXT,
      leaves_on TEXT,
      badge_name TEXT NOT NULL,
      diet TEXT NOT NULL,
      allergies TEXT NOT NULL DEFAULT '',
      needs TEXT NOT NULL DEFAULT '',
      invoice JSON NOT NULL,
      checked_in_at DATETIME,
      checked_in_by TEXT,
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE UNIQUE INDEX registrations_once ON registrations (event_id, account_id) WHERE state <> 'cancelled'`,
    `CREATE INDEX registrations_by_event ON registrations (event_id, id)`,
    `CREATE INDEX registrations_by_account ON registrations (account_id)`,
    `CREATE TABLE applications (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      account_id TEXT NOT NULL REFERENCES accounts (id),
      state TEXT NOT NULL CHECK (state IN ('received','offered','waiting','declined','withdrawn')),
      motivation TEXT NOT NULL,
      background TEXT NOT NULL,
      answer_by DATETIME,
      note TEXT NOT NULL DEFAULT '',
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE UNIQUE INDEX applications_once ON applications (event_id, account_id) WHERE state <> 'withdrawn'`,
    `CREATE INDEX applications_by_event ON applications (event_id, id)`,
    `CREATE TRIGGER registrations_within_capacity AFTER INSERT ON registrations WHEN NEW.state <> 'cancelled'
     BEGIN SELECT RAISE(ABORT, 'the event is full')
       WHERE (SELECT count(*) FROM registrations WHERE event_id = NEW.event_id AND state <> 'cancelled')
           > (SELECT capacity FROM events WHERE id = NEW.event_id); END`,
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    ['applications', 'registrations'].map((t) => `DROP TABLE ${t}`),
  );
