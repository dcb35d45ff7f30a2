import type { Migration } from '../migrate';
import { statements } from '../migrate';

const posted = (verb: string): string =>
  `CREATE TRIGGER journal_lines_no_${verb} BEFORE ${verb.toUpperCase()} ON journal_lines
   WHEN (SELECT posted FROM journal_entries WHERE id = ${verb === 'insert' ? 'NEW' : 'OLD'}.entry_id) = 1
   BEGIN SELECT RAISE(ABORT, 'a posted entry is never changed'); END`;

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE fee_categories (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      name TEXT NOT NULL,
      stages JSON NOT NULL,
      early_minor INTEGER CHECK (early_minor >= 0),
      early_until TEXT,
      regular_minor INTEGER NOT NULL CHECK (regular_minor >= 0),
      tax_basis_points INTEGER NOT NULL DEFAULT 0,
      position INTEGER NOT NULL,
      removed_at DATETIME,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX fee_categories_by_event ON fee_categories (event_id, position)`,
    `CREATE TABLE extras (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      name TEXT NOT NULL,
      price_minor INTEGER NOT NULL CHECK (price_minor >= 0),
      capacity INTEGER,
      until TEXT,
      tax_basis_points INTEGER NOT NULL DEFAULT 0,
      hint TEXT NOT NULL DEFAULT '',
      position INTEGER NOT NULL,
      removed_at DATETIME,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX extras_by_event ON extras (event_id, position)`,
    `CREATE TABLE orders (
      id TEXT PRIMARY KEY,
      number TEXT NOT NULL UNIQUE,
      event_id TEXT NOT NULL REFERENCES events (id),
      registration_id TEXT NOT NULL,
      account_id TEXT NOT NULL REFERENCES accounts (id),
      state TEXT NOT NULL CHECK (state IN ('placed','paid','expired','cancelled')),
      currency TEXT NOT NULL,
      total_minor INTEGER NOT NULL CHECK (total_minor >= 0),
      price JSON NOT NULL,
      reserved_until DATETIME,
      paid_at DATETIME,
      last_failure TEXT,
      oddity TEXT,
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE UNIQUE INDEX orders_open ON orders (registration_id) WHERE state IN ('placed','paid')`,
    `CREATE INDEX orders_by_event ON orders (event_id, id)`,
    `CREATE TABLE order_lines (
      id TEXT PRIMARY KEY,
      order_id TEXT NOT NULL REFERENCES orders (id),
      kind TEXT NOT NULL,
      ref_id TEXT NOT NULL,
      quantity INTEGER NOT NULL CHECK (quantity > 0),
      net_minor INTEGER NOT NULL,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX order_lines_by_ref ON order_lines (ref_id)`,
    `CREATE TABLE payments (
      id TEXT PRIMARY KEY,
      order_id TEXT NOT NULL REFERENCES orders (id),
      provider TEXT NOT NULL,
      provider_id TEXT NOT NULL,
      amount_minor INTEGER NOT NULL,
      currency TEXT NOT NULL,
      state TEXT NOT NULL CHECK (state IN ('pending','paid','failed')),
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (provider, provider_id)
    )`,
    `CREATE INDEX payments_by_order ON payments (order_id)`,
    `CREATE TABLE provider_events (
      id TEXT PRIMARY KEY,
      type TEXT NOT NULL,
      effect TEXT NOT NULL,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE TABLE journal_entries (
      id TEXT PRIMARY KEY,
      voucher TEXT NOT NULL,
      memo TEXT NOT NULL,
      currency TEXT NOT NULL,
      posted INTEGER NOT NULL DEFAULT 0 CHECK (posted IN (0, 1)),
      at DATETIME NOT NULL,
      UNIQUE (voucher)
    )`,
    `CREATE TABLE journal_lines (
      id TEXT PRIMARY KEY,
      entry_id TEXT NOT NULL REFERENCES journal_entries (id),
      account TEXT NOT NULL,
      debit_minor INTEGER NOT NULL CHECK (debit_minor >= 0),
      credit_minor INTEGER NOT NULL CHECK (credit_minor >= 0),
      CHECK ((debit_minor = 0) <> (credit_minor = 0))
    )`,
    `CREATE INDEX journal_lines_by_entry ON journal_lines (entry_id)`,
    `CREATE INDEX journal_lines_by_account ON journal_lines (account)`,
    `CREATE TRIGGER journal_balanced BEFORE UPDATE ON journal_entries WHEN NEW.posted = 1 AND OLD.posted = 0
     BEGIN SELECT RAISE(ABORT, 'the entry is not balanced')
       WHERE (SELECT ifnull(sum(debit_minor - credit_minor), 0) FROM journal_lines WHERE entry_id = NEW.id) <> 0
          OR NOT EXISTS (SELECT 1 FROM journal_lines WHERE entry_id = NEW.id); END`,
    `CREATE TRIGGER journal_entries_stay BEFORE UPDATE ON journal_entries WHEN OLD.posted = 1
     BEGIN SELECT RAISE(ABORT, 'a posted entry is never changed'); END`,
    `CREATE TRIGGER journal_entries_begin BEFORE INSERT ON journal_entries WHEN NEW.posted <> 0
     BEGIN SELECT RAISE(ABORT, 'lines first, then post'); END`,
    `CREATE TRIGGER journal_entries_no_delete BEFORE DELETE ON journal_entries BEGIN SELECT RAISE(ABORT, 'a posted entry is never changed'); END`,
    posted('insert'),
    posted('update'),
    posted('delete'),
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    [
      'journal_lines',
      'journal_entries',
      'provider_events',
      'payments',
      'order_lines',
      'orders',
      'extras',
      'fee_categories',
    ].map((t) => `DROP TABLE ${t}`),
  );
