import type { Migration } from '../migrate';
import { statements } from '../migrate';

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE courses (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      letter TEXT NOT NULL,
      title TEXT NOT NULL,
      short_title TEXT NOT NULL,
      min_nights INTEGER NOT NULL DEFAULT 1,
      max_per_day INTEGER NOT NULL DEFAULT 1,
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (event_id, letter)
    )`,
    `CREATE TABLE talks (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      kind TEXT NOT NULL,
      title TEXT NOT NULL,
      abstract TEXT NOT NULL DEFAULT '',
      co_authors JSON NOT NULL,
      msc JSON NOT NULL,
      "references" JSON NOT NULL,
      needs JSON NOT NULL,
      minutes INTEGER NOT NULL CHECK (minutes > 0),
      question_minutes INTEGER NOT NULL DEFAULT 0,
      course_id TEXT REFERENCES courses (id),
      number INTEGER,
      exercise_of TEXT REFERENCES talks (id),
      expected_audience INTEGER,
      state TEXT NOT NULL CHECK (state IN ('draft','submitted','accepted','declined','withdrawn')),
      invitation TEXT CHECK (invitation IN ('invited','accepted','declined')),
      invitation_message TEXT NOT NULL DEFAULT '',
      abstract_at DATETIME,
      decision_note TEXT NOT NULL DEFAULT '',
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX talks_by_event ON talks (event_id, id)`,
    `CREATE UNIQUE INDEX talks_course_number ON talks (course_id, number) WHERE kind = 'course_lecture' AND state <> 'withdrawn'`,
    `CREATE TABLE talk_people (
      id TEXT PRIMARY KEY,
      talk_id TEXT NOT NULL REFERENCES talks (id),
      account_id TEXT NOT NULL REFERENCES accounts (id),
      part TEXT NOT NULL CHECK (part IN ('speaker','chair','tutor')),
      position INTEGER NOT NULL,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (talk_id, account_id, part)
    )`,
    `CREATE INDEX talk_people_by_account ON talk_people (account_id)`,
    `CREATE TABLE prerequisites (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      before TEXT NOT NULL REFERENCES talks (id),
      after TEXT NOT NULL REFERENCES talks (id),
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (before, after), CHECK (before <> after)
    )`,
    `CREATE TABLE presences (
      id TEXT PRIMARY KEY,
      event_id TEXT NOT NULL REFERENCES events (id),
      account_id TEXT NOT NULL REFERENCES accounts (id),
      arrives_at TEXT,
      leaves_at TEXT,
      blocked JSON NOT NULL,
      wishes TEXT NOT NULL DEFAULT '',
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (event_id, account_id), CHECK (arrives_at IS NULL OR leaves_at IS NULL OR leaves_at > arrives_at)
    )`,
    `CREATE TABLE materials (
      id TEXT PRIMARY KEY,
      talk_id TEXT NOT NULL REFERENCES talks (id),
      kind TEXT NOT NULL CHECK (kind IN ('slides','notes','problems')),
      visibility TEXT NOT NULL CHECK (visibility IN ('organisers','participants','public')),
      visible_from TEXT,
      licence TEXT NOT NULL,
      version INTEGER NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (talk_id, kind)
    )`,
    `CREATE TABLE material_versions (
      id TEXT PRIMARY KEY,
      material_id TEXT NOT NULL REFERENCES materials (id),
      number INTEGER NOT NULL,
      file_name TEXT NOT NULL,
      bytes INTEGER NOT NULL,
      sha256 TEXT NOT NULL,
      type TEXT NOT NULL,
      stored_name TEXT NOT NULL UNIQUE,
      uploaded_by TEXT NOT NULL REFERENCES accounts (id),
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL,
      UNIQUE (material_id, number)
    )`,
    `CREATE TRIGGER material_versions_stay BEFORE UPDATE ON material_versions BEGIN SELECT RAISE(ABORT, 'versions are never overwritten'); END`,
    `CREATE TABLE consents (
      id TEXT PRIMARY KEY,
      account_id TEXT NOT NULL REFERENCES accounts (id),
      purpose TEXT NOT NULL,
      subject_id TEXT NOT NULL,
      text_version TEXT NOT NULL,
      given_at DATETIME NOT NULL,
      withdrawn_at DATETIME,
      created_at DATETIME NOT NULL,
      updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX consents_by_subject ON consents (subject_id, purpose)`,
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    [
      'consents',
      'material_versions',
      'materials',
      'presences',
      'prerequisites',
      'talk_people',
      'talks',
      'courses',
    ].map((t) => `DROP TABLE ${t}`),
  );
