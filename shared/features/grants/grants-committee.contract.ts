import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { careerStageSchema } from '../accounts/accounts.contract';
import {
  awardLine,
  awardState,
  costKind,
  evidenceSchema,
  fundSchema,
  grantFlag,
  itemInput,
  talkLine,
} from './grants.contract';

const inEvent = z.object({ event: slug });
const positiveMinor = z.number().int().min(1, 'More than nothing is needed.').max(1_000_000_000);

export const boardAward = z.object({
  id,
  fundId: id,
  state: awardState,
  lines: z.array(awardLine),
  totalMinor: z.number().int(),
  version: z.number().int(),
  capped: z.boolean(),
});
export type BoardAward = z.infer<typeof boardAward>;
export const boardRow = z.object({
  id,
  reference: z.string(),
  /** Null for a conflict of interest: then nothing about the person is told. */
  person: z
    .object({
      printedName: z.string(),
      affiliation: z.string(),
      country: z.string().nullable(),
      stage: careerStageSchema,
    })
    .nullable(),
  conflict: z.enum(['declared', 'institution', 'own']).nullable(),
  rank: z.number().int().nullable(),
  /** Mean, one decimal; null before it may be seen or when there is none. */
  score: z.number().nullable(),
  scores: z.number().int(),
  myScore: z.number().int().nullable(),
  requested: z.array(awardLine),
  requestedMinor: z.number().int(),
  awards: z.array(boardAward),
  /** Letters of funds for which this person is not eligible. */
  notEligible: z.array(z.string()),
  /** Why no award is proposed, when it can be said truthfully. */
  reason: z.string().nullable(),
  decision: z.enum(['offered', 'not_awarded']).nullable(),
});
export type BoardRow = z.infer<typeof boardRow>;
export const grantBoard = z.object({
  currency: z.string(),
  timeZone: z.string(),
  dueAt: instant.nullable(),
  decidedAt: instant.nullable(),
  rows: z.array(boardRow),
  funds: z.array(fundSchema),
  counts: z.object({
    submitted: z.number().int(),
    drafts: z.number().int(),
    awarded: z.number().int(),
    notFunded: z.number().int(),
    queried: z.number().int(),
    toOffer: z.number().int(),
    toDecline: z.number().int(),
    waiting: z.number().int(),
  }),
  /** Why decision letters can't be sent now; null when they can. */
  notYet: z.string().nullable(),
  can: z.object({ score: z.boolean(), propose: z.boolean(), send: z.boolean(), addFund: z.boolean() }),
});
export type GrantBoard = z.infer<typeof grantBoard>;
export const readBoard = endpoint({
  id: 'grants.board',
  method: 'GET',
  path: '/api/events/:event/grant-applications',
  summary: 'Grant applications by rank, with funds and awards.',
  params: inEvent,
  response: grantBoard,
});

export const grantDetail = z.object({
  row: boardRow,
  motivation: z.string(),
  minUsefulMinor: z.number().int(),
  flags: z.array(grantFlag),
  talkTitle: z.string().nullable(),
  submittedAt: instant.nullable(),
  items: z.array(itemInput),
  evidence: z.array(evidenceSchema),
  myReview: z
    .object({ score: z.number().int().nullable(), comment: z.string(), conflict: z.boolean() })
    .nullable(),
  /** Other people's scores; null until one's own is given. */
  reviews: z
    .array(z.object({ reviewer: z.string(), score: z.number().int(), comment: z.string() }))
    .nullable(),
  talks: z.array(z.object({ awardId: id, lines: z.array(talkLine) })),
  can: z.object({ score: z.boolean(), propose: z.boolean() }),
});
export type GrantDetail = z.infer<typeof grantDetail>;
const ofApplication = z.object({ event: slug, application: id });
export const readGrant = endpoint({
  id: 'grants.read',
  method: 'GET',
  path: '/api/events/:event/grant-applications/:application',
  summary: 'One grant application for the committee.',
  params: ofApplication,
  response: grantDetail,
});
export const scoreGrant = endpoint({
  id: 'grants.score',
  method: 'PUT',
  path: '/api/events/:event/grant-applications/:application/score',
  summary: 'Give one’s own score, or declare a conflict of interest.',
  params: ofApplication,
  body: z.strictObject({
    /** 1 to 10, 10 is best; null with a conflict. */
    score: z.number().int().min(1, 'From 1 to 10.').max(10, 'From 1 to 10.').nullable(),
    comment: z.string().trim().max(2000),
    /** Hides the application from this reviewer. */
    conflict: z.boolean(),
  }),
  response: z.object({ saved: z.literal(true), conflict: z.boolean() }),
});
export const proposeAward = endpoint({
  id: 'grants.propose',
  method: 'PUT',
  path: '/api/events/:event/grant-applications/:application/awards/:fund',
  summary: 'Propose what a fund pays of the costs of one person; no lines take the proposal back.',
  params: z.object({ event: slug, application: id, fund: id }),
  body: z.strictObject({
    lines: z.array(z.strictObject({ kind: costKind, amountMinor: positiveMinor })).max(4),
    /** Version of the award that is changed; null when there is none yet. */
    version: z.number().int().nullable(),
  }),
  response: grantDetail,
});
export const answerQuery = endpoint({
  id: 'grants.answer_query',
  method: 'POST',
  path: '/api/events/:event/awards/:award/answer',
  summary: 'Answer a funder’s question; the award goes back to the funder.',
  params: z.object({ event: slug, award: id }),
  body: z.strictObject({ text: z.string().trim().min(2, 'Write an answer.').max(1000) }),
  response: grantDetail,
  versioned: true,
});
export const sendDecisions = endpoint({
  id: 'grants.send',
  method: 'POST',
  path: '/api/events/:event/grant-decisions',
  summary:
    'Send the decision letters: offers where all awards are approved, and regrets where there is none.',
  params: inEvent,
  body: z.strictObject({
    /** Last day for accepting, until 23:59 in the event’s zone. */
    answerBy: localDate,
  }),
  response: z.object({ offered: z.number().int(), notAwarded: z.number().int(), held: z.number().int() }),
});

export const grantsCommitteeEndpoints = [
  readBoard,
  readGrant,
  scoreGrant,
  proposeAward,
  answerQuery,
  sendDecisions,
];
