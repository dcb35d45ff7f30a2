import type { Migration } from '../migrate';
import { statements } from '../migrate';

/** Money rules that hold whatever the program does: paid <= awarded <= requested; a fund never above its budget. */
const within = (verb: 'INSERT' | 'UPDATE'): string[] => [
  `CREATE TRIGGER award_lines_within_budget_${verb.toLowerCase()} AFTER ${verb} ON award_lines WHEN NEW.returned = 0
   BEGIN SELECT RAISE(ABORT, 'the fund is spent')
     WHERE (SELECT sum(l.amount_minor) FROM award_lines l JOIN awards a ON a.id = l.award_id
            WHERE l.returned = 0 AND a.fund_id = (SELECT fund_id FROM awards WHERE id = NEW.award_id))
         > (SELECT budget_minor FROM funds WHERE id = (SELECT fund_id FROM awards WHERE id = NEW.award_id)); END`,
  `CREATE TRIGGER award_lines_within_request_${verb.toLowerCase()} AFTER ${verb} ON award_lines
   BEGIN SELECT RAISE(ABORT, 'more than was asked for')
     WHERE NEW.amount_minor > ifnull((SELECT amount_minor FROM grant_items WHERE application_id = NEW.application_id AND kind = NEW.kind), 0); END`,
];

const KINDS = `('travel','accommodation','subsistence','fee')`;

export const up: Migration['up'] = ({ context }) =>
  statements(context, [
    `CREATE TABLE funds (
      id TEXT PRIMARY KEY, event_id TEXT NOT NULL REFERENCES events (id), name TEXT NOT NULL, funder TEXT NOT NULL,
      budget_minor INTEGER NOT NULL CHECK (budget_minor > 0), currency TEXT NOT NULL, covers JSON NOT NULL, eligibility JSON NOT NULL,
      cap_per_person_minor INTEGER CHECK (cap_per_person_minor > 0), floors JSON NOT NULL, show_scores TINYINT(1) NOT NULL DEFAULT 0,
      version INTEGER NOT NULL DEFAULT 0, created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX funds_by_event ON funds (event_id, id)`,
    `CREATE TABLE grant_applications (
      id TEXT PRIMARY KEY, event_id TEXT NOT NULL REFERENCES events (id), account_id TEXT NOT NULL REFERENCES accounts (id),
      basis TEXT NOT NULL CHECK (basis IN ('registration','application')), number INTEGER NOT NULL, reference TEXT NOT NULL,
      state TEXT NOT NULL CHECK (state IN ('draft','submitted','withdrawn')), motivation TEXT NOT NULL,
      min_useful_minor INTEGER NOT NULL DEFAULT 0 CHECK (min_useful_minor >= 0), first_meeting TINYINT(1) NOT NULL DEFAULT 0, no_other_money TINYINT(1) NOT NULL DEFAULT 0,
      talk_id TEXT REFERENCES talks (id), stage TEXT, country TEXT, affiliation TEXT NOT NULL DEFAULT '',
      submitted_at DATETIME, decision TEXT CHECK (decision IN ('offered','not_awarded')), decided_at DATETIME, answer_by DATETIME,
      version INTEGER NOT NULL DEFAULT 0, created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL,
      UNIQUE (event_id, account_id), UNIQUE (event_id, number)
    )`,
    `CREATE TABLE grant_items (
      id TEXT PRIMARY KEY, application_id TEXT NOT NULL REFERENCES grant_applications (id), kind TEXT NOT NULL CHECK (kind IN ${KINDS}),
      amount_minor INTEGER NOT NULL CHECK (amount_minor >= 0), quantity INTEGER, note TEXT NOT NULL DEFAULT '',
      created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL, UNIQUE (application_id, kind)
    )`,
    `CREATE TABLE grant_evidence (
      id TEXT PRIMARY KEY, application_id TEXT NOT NULL REFERENCES grant_applications (id), kind TEXT NOT NULL CHECK (kind IN ${KINDS}),
      file_name TEXT NOT NULL, bytes INTEGER NOT NULL, sha256 TEXT NOT NULL, type TEXT NOT NULL, stored_name TEXT NOT NULL,
      created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX grant_evidence_by_application ON grant_evidence (application_id)`,
    `CREATE TABLE grant_reviews (
      id TEXT PRIMARY KEY, application_id TEXT NOT NULL REFERENCES grant_applications (id), reviewer_id TEXT NOT NULL REFERENCES accounts (id),
      score INTEGER CHECK (score BETWEEN 1 AND 10), comment TEXT NOT NULL DEFAULT '', conflict TINYINT(1) NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL,
      CHECK ((score IS NULL) = (conflict = 1)), UNIQUE (application_id, reviewer_id)
    )`,
    `CREATE TABLE awards (
      id TEXT PRIMARY KEY, fund_id TEXT NOT NULL REFERENCES funds (id), application_id TEXT NOT NULL REFERENCES grant_applications (id),
      state TEXT NOT NULL CHECK (state IN ('proposed','queried','approved','offered','accepted','returned')),
      proposed_by TEXT NOT NULL, decided_by TEXT, decided_at DATETIME, answered_at DATETIME,
      version INTEGER NOT NULL DEFAULT 0, created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL
    )`,
    `CREATE UNIQUE INDEX awards_once ON awards (fund_id, application_id) WHERE state <> 'returned'`,
    `CREATE INDEX awards_by_application ON awards (application_id)`,
    `CREATE TABLE award_lines (
      id TEXT PRIMARY KEY, award_id TEXT NOT NULL REFERENCES awards (id), application_id TEXT NOT NULL REFERENCES grant_applications (id),
      kind TEXT NOT NULL CHECK (kind IN ${KINDS}), amount_minor INTEGER NOT NULL CHECK (amount_minor > 0),
      paid_minor INTEGER NOT NULL DEFAULT 0 CHECK (paid_minor BETWEEN 0 AND amount_minor), returned TINYINT(1) NOT NULL DEFAULT 0,
      created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL
    )`,
    `CREATE UNIQUE INDEX award_lines_one_fund ON award_lines (application_id, kind) WHERE returned = 0`,
    `CREATE INDEX award_lines_by_award ON award_lines (award_id)`,
    ...within('INSERT'),
    ...within('UPDATE'),
    `CREATE TRIGGER funds_budget_holds AFTER UPDATE OF budget_minor ON funds
     BEGIN SELECT RAISE(ABORT, 'the budget would be below the awards')
       WHERE NEW.budget_minor < (SELECT ifnull(sum(l.amount_minor), 0) FROM award_lines l JOIN awards a ON a.id = l.award_id WHERE a.fund_id = NEW.id AND l.returned = 0); END`,
    `CREATE TABLE award_talks (
      id TEXT PRIMARY KEY, award_id TEXT NOT NULL REFERENCES awards (id), author_id TEXT NOT NULL, side TEXT NOT NULL CHECK (side IN ('funder','committee')),
      text TEXT NOT NULL, created_at DATETIME NOT NULL, updated_at DATETIME NOT NULL
    )`,
    `CREATE INDEX award_talks_by_award ON award_talks (award_id, id)`,
  ]);

export const down: Migration['down'] = ({ context }) =>
  statements(
    context,
    [
      'award_talks',
      'award_lines',
      'awards',
      'grant_reviews',
      'grant_evidence',
      'grant_items',
      'grant_applications',
      'funds',
    ].map((t) => `DROP TABLE ${t}`),
  );
