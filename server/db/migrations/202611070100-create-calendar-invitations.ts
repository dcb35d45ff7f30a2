import type { Migration } from '../migrate';
import { statements } from '../migrate';

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE calendar_invitations (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      talk_id TEXT NOT NULL REFERENCES talks (id),
      account_id TEXT NOT NULL REFERENCES accounts (id),
      uid TEXT NOT NULL UNIQUE,
      sequence INTEGER NOT NULL,
      last_method TEXT NOT NULL CHECK (last_method IN ('REQUEST','CANCEL')),
      starts_at TEXT NOT NULL,
      ends_at TEXT NOT NULL,
      room_name TEXT NOT NULL,
      answer TEXT CHECK (answer IN ('ACCEPTED','TENTATIVE','DECLINED')),
      answered_at DATETIME,
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (talk_id, account_id)
    )`,
    `CREATE INDEX calendar_invitations_by_event ON calendar_invitations (event_id)`,
    `CREATE INDEX calendar_invitations_by_account ON calendar_invitations (account_id)`,
    `CREATE TRIGGER calendar_sequence_grows BEFORE UPDATE ON calendar_invitations WHEN NEW.sequence < OLD.sequence
     BEGIN SELECT RAISE(ABORT, 'a sequence only grows'); END`,
    `CREATE TABLE calendar_feeds (
      id TEXT PRIMARY KEY,
      account_id TEXT NOT NULL UNIQUE REFERENCES accounts (id),
      token TEXT NOT NULL UNIQUE,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    ['calendar_feeds', 'calendar_invitations'].map((t) => `DROP TABLE ${t}`),
  );
