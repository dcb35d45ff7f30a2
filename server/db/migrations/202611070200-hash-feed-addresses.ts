import type { Migration } from '../migrate';
import { statements } from '../migrate';

/** Feed addresses are kept as hashes; the ones made before can't be hashed in SQL and are made anew. */
export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    'DELETE FROM calendar_feeds',
    'ALTER TABLE calendar_feeds RENAME COLUMN token TO token_hash',
    `CREATE TABLE letter_refusals (
      id TEXT PRIMARY KEY,
      account_id TEXT NOT NULL REFERENCES accounts (id),
      event_id TEXT NOT NULL REFERENCES events (id),
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (account_id, event_id)
    )`,
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(context, [
    'DROP TABLE letter_refusals',
    'DELETE FROM calendar_feeds',
    'ALTER TABLE calendar_feeds RENAME COLUMN token_hash TO token',
  ]);
