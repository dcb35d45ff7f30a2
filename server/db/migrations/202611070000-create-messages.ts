import type { Migration } from '../migrate';
import { statements } from '../migrate';

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE messages (
      id TEXT PRIMARY KEY,
      letter TEXT NOT NULL,
      account_id TEXT REFERENCES accounts (id),
      event_id TEXT,
      subject_id TEXT,
      to_name TEXT NOT NULL,
      to_address TEXT NOT NULL,
      reply_to TEXT,
      subject TEXT NOT NULL,
      text TEXT NOT NULL,
      html TEXT NOT NULL,
      calendar_method TEXT,
      calendar_content TEXT,
      unsubscribe_url TEXT,
      dedup_key TEXT NOT NULL UNIQUE,
      message_id TEXT NOT NULL UNIQUE,
      state TEXT NOT NULL CHECK (state IN ('queued','sending','sent','failed')),
      attempts INTEGER NOT NULL DEFAULT 0,
      next_at DATETIME NOT NULL,
      last_error TEXT,
      server_reply TEXT,
      sent_at DATETIME,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX messages_due ON messages (next_at, id) WHERE state IN ('queued','sending')`,
    `CREATE INDEX messages_by_event ON messages (event_id, id)`,
    `CREATE INDEX messages_by_account ON messages (account_id, id)`,
  ]);

export const down: Migration['down'] = ({ context }) => statements(context, ['DROP TABLE messages']);
