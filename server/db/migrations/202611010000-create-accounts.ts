import type { Migration } from '../migrate';
import { statements } from '../migrate';

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE accounts (
      id TEXT PRIMARY KEY,
      email TEXT NOT NULL UNIQUE CHECK (email = lower(email)),
      password_hash TEXT,
      email_verified_at DATETIME,
      disabled_at DATETIME,
      given_name TEXT NOT NULL,
      family_name TEXT NOT NULL,
      printed_name TEXT NOT NULL CHECK (length(printed_name) > 0),
      sort_name TEXT NOT NULL,
      affiliation TEXT NOT NULL DEFAULT '',
      country TEXT CHECK (country IS NULL OR length(country) = 2),
      career_stage TEXT,
      orcid TEXT,
      time_zone TEXT NOT NULL DEFAULT 'UTC',
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX accounts_by_name ON accounts (sort_name, id)`,
    `CREATE TABLE role_grants (
      id TEXT PRIMARY KEY,
      account_id TEXT NOT NULL REFERENCES accounts (id),
      role TEXT NOT NULL CHECK (role IN ('administrator','finance','organiser','reviewer','desk','funder')),
      scope TEXT NOT NULL CHECK (scope IN ('institute','event','fund')),
      scope_id TEXT CHECK ((scope = 'institute') = (scope_id IS NULL)),
      granted_by TEXT,
      ended_at DATETIME,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE UNIQUE INDEX role_grants_open ON role_grants (account_id, role, scope, ifnull(scope_id, '')) WHERE ended_at IS NULL`,
    `CREATE INDEX role_grants_by_scope ON role_grants (scope_id, role) WHERE ended_at IS NULL`,
    `CREATE TABLE tokens (
      id TEXT PRIMARY KEY,
      purpose TEXT NOT NULL,
      hash TEXT NOT NULL UNIQUE,
      account_id TEXT REFERENCES accounts (id),
      email TEXT,
      subject_id TEXT,
      data JSON,
      expires_at DATETIME NOT NULL,
      used_at DATETIME,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE TABLE sessions (
      id TEXT PRIMARY KEY,
      account_id TEXT NOT NULL REFERENCES accounts (id),
      device TEXT NOT NULL,
      started_at DATETIME NOT NULL,
      last_seen_at DATETIME NOT NULL,
      idle_seconds INTEGER NOT NULL,
      expires_at DATETIME NOT NULL,
      ended_at DATETIME,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX sessions_by_account ON sessions (account_id) WHERE ended_at IS NULL`,
    `CREATE TABLE audit_entries (
      id TEXT PRIMARY KEY,
      at DATETIME NOT NULL,
      actor_id TEXT,
      actor_name TEXT NOT NULL,
      action TEXT NOT NULL,
      subject TEXT NOT NULL,
      subject_id TEXT NOT NULL,
      event_id TEXT,
      before JSON,
      after JSON
    )`,
    `CREATE INDEX audit_by_event ON audit_entries (event_id, id)`,
    `CREATE TRIGGER audit_no_update BEFORE UPDATE ON audit_entries BEGIN SELECT RAISE(ABORT, 'the audit trail is insert only'); END`,
    `CREATE TRIGGER audit_no_delete BEFORE DELETE ON audit_entries BEGIN SELECT RAISE(ABORT, 'the audit trail is insert only'); END`,
    `CREATE TABLE jobs (
      id TEXT PRIMARY KEY,
      name TEXT NOT NULL,
      payload JSON NOT NULL,
      key TEXT NOT NULL UNIQUE,
      state TEXT NOT NULL CHECK (state IN ('queued','running','done','failed')),
      attempts INTEGER NOT NULL DEFAULT 0,
      run_at DATETIME NOT NULL,
      last_error TEXT,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX jobs_due ON jobs (run_at, id) WHERE state = 'queued'`,
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    ['jobs', 'audit_entries', 'sessions', 'tokens', 'role_grants', 'accounts'].map(
      (table) => `DROP TABLE ${table}`,
    ),
  );
