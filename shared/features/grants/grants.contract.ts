import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { careerStageSchema, countryCode } from '../accounts/accounts.contract';

export const costKinds = ['travel', 'accommodation', 'subsistence', 'fee'] as const;
export const costKind = z.enum(costKinds);
export type CostKind = z.infer<typeof costKind>;

/** What a person says about the application, besides the career stage. `gives_talk` follows from the talk. */
export const grantFlags = ['first_meeting', 'no_other_money', 'gives_talk'] as const;
export const grantFlag = z.enum(grantFlags);
export type GrantFlag = z.infer<typeof grantFlag>;

export const grantStates = ['draft', 'submitted', 'withdrawn'] as const;
export const grantState = z.enum(grantStates);
export type GrantState = z.infer<typeof grantState>;

export const awardStates = ['proposed', 'queried', 'approved', 'offered', 'accepted', 'returned'] as const;
export const awardState = z.enum(awardStates);
export type AwardState = z.infer<typeof awardState>;

/** Minor units of the event's currency, 0 to ten million whole units. */
const minor = z.number().int().min(0).max(1_000_000_000);
const positiveMinor = z.number().int().min(1, 'More than nothing is needed.').max(1_000_000_000);

export const MAX_EVIDENCE = 10_000_000;
export const MAX_EVIDENCE_FILES = 12;

export const itemInput = z.strictObject({
  kind: costKind,
  /** Minor units of the event's currency. */
  amountMinor: minor,
  /** Nights for accommodation, days for subsistence; null for the other kinds. */
  quantity: z.number().int().min(1).max(120).nullable(),
  /** How the sum comes about: a train ticket, a room at the price of the house. */
  note: z.string().trim().max(300),
});
export type ItemInput = z.infer<typeof itemInput>;

export const grantInput = z.strictObject({
  /** Why this event, and why a grant. Plain text. */
  motivation: z.string().trim().max(4000, 'At most 4,000 characters.'),
  items: z.array(itemInput).max(4),
  /** The least sum with which the person can come, minor units; 0 when anything helps. */
  minUsefulMinor: minor,
  firstMeeting: z.boolean(),
  noOtherMoney: z.boolean(),
  /** A talk of one's own at this event, or null. */
  talkId: id.nullable(),
});
export type GrantInput = z.infer<typeof grantInput>;

export const evidenceSchema = z.object({ id, kind: costKind, fileName: z.string(), bytes: z.number().int(), type: z.string(), uploadedAt: instant });
export type Evidence = z.infer<typeof evidenceSchema>;

export const awardLine = z.object({ kind: costKind, amountMinor: z.number().int() });
export type AwardLine = z.infer<typeof awardLine>;
export const talkLine = z.object({
  /** The funder, or the committee of the event. No names. */
  from: z.enum(['funder', 'committee']),
  text: z.string(),
  at: instant,
});

const inEvent = z.object({ event: slug });

export const myGrant = z.object({
  eventTitle: z.string(),
  eventSlug: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  currency: z.string(),
  timeZone: z.string(),
  /** Last instant for handing in; null when no date is set. */
  dueAt: instant.nullable(),
  /** Why nothing can be handed in now; null when it can. */
  closedBecause: z.string().nullable(),
  /** What the grant application is tied to. */
  basis: z.enum(['registration', 'application']).nullable(),
  /** Kinds that at least one fund of the event covers. */
  coveredKinds: z.array(costKind),
  talks: z.array(z.object({ id, title: z.string() })),
  /** From the profile; needed for handing in. */
  profile: z.object({ printedName: z.string(), affiliation: z.string(), country: z.string().nullable(), careerStage: careerStageSchema.nullable() }),
  application: z
    .object({ reference: z.string(), state: grantState, input: grantInput, evidence: z.array(evidenceSchema), submittedAt: instant.nullable(), savedAt: instant })
    .nullable(),
  /** Null until the decision letters have been sent. */
  decision: z
    .object({
      outcome: z.enum(['offered', 'accepted', 'returned', 'not_awarded']),
      totalMinor: z.number().int(),
      lines: z.array(awardLine.extend({ fund: z.string() })),
      /** Last instant for accepting. */
      answerBy: instant.nullable(),
    })
    .nullable(),
  can: z.object({ edit: z.boolean(), submit: z.boolean(), withdraw: z.boolean(), accept: z.boolean(), return: z.boolean() }),
  /** 0 before the first save. */
  version: z.number().int(),
});
export type MyGrant = z.infer<typeof myGrant>;

export const readMyGrant = endpoint({ id: 'grants.mine', method: 'GET', path: '/api/events/:event/my-grant', summary: 'One’s own grant application and its decision.', params: inEvent, response: myGrant });
export const saveMyGrant = endpoint({ id: 'grants.save', method: 'PUT', path: '/api/events/:event/my-grant', summary: 'Save the draft of one’s own grant application (version 0 for the first).', params: inEvent, body: grantInput, response: myGrant, versioned: true });
export const submitMyGrant = endpoint({ id: 'grants.submit', method: 'POST', path: '/api/events/:event/my-grant/submission', summary: 'Hand in one’s own grant application as saved.', params: inEvent, body: z.strictObject({}), response: myGrant, versioned: true });
export const withdrawMyGrant = endpoint({ id: 'grants.withdraw', method: 'POST', path: '/api/events/:event/my-grant/withdrawal', summary: 'Withdraw one’s own grant application before a decision.', params: inEvent, body: z.strictObject({}), response: myGrant, versioned: true });
export const addEvidence = endpoint({
  id: 'grants.add_evidence',
  method: 'POST',
  path: '/api/events/:event/my-grant/evidence',
  summary: 'Add a document for a cost kind: PDF, PNG or JPEG, at most 10 MB.',
  params: inEvent,
  body: z.strictObject({ kind: costKind }),
  response: myGrant,
  upload: { field: 'file', maxBytes: MAX_EVIDENCE },
});
export const removeEvidence = endpoint({ id: 'grants.remove_evidence', method: 'DELETE', path: '/api/events/:event/my-grant/evidence/:evidence', summary: 'Remove a document from a draft.', params: z.object({ event: slug, evidence: id }), response: myGrant });
export const answerAward = endpoint({ id: 'grants.answer', method: 'POST', path: '/api/events/:event/my-grant/answer', summary: 'Accept the offered grant, or give it back.', params: inEvent, body: z.strictObject({ answer: z.enum(['accepted', 'returned']) }), response: myGrant, versioned: true });
export const downloadEvidence = endpoint({ id: 'grants.evidence', method: 'GET', path: '/api/events/:event/grant-evidence/:evidence', summary: 'A document: for its owner and the committee.', params: z.object({ event: slug, evidence: id }), response: 'file' });

export const eligibility = z.strictObject({
  /** Empty lists allow everybody. */
  stages: z.array(careerStageSchema).max(6),
  /** ISO 3166-1 alpha-2 of the affiliation; only these. */
  countries: z.array(countryCode).max(250),
  notCountries: z.array(countryCode).max(250),
  /** Any one of these is enough. */
  flagsAny: z.array(grantFlag).max(3),
  /** Mean score of the committee, 1 to 10; null for none. */
  minScore: z.number().min(1).max(10).multipleOf(0.1).nullable(),
});
export type Eligibility = z.infer<typeof eligibility>;
export const floorShare = z.strictObject({
  /** A career stage counts as a group, too. */
  group: z.union([grantFlag, careerStageSchema]),
  percent: z.number().int().min(1).max(100),
  of: z.enum(['budget', 'awarded']),
});
export type FloorShare = z.infer<typeof floorShare>;

export const fundInput = z.strictObject({
  name: z.string().trim().min(2, 'Give the fund a name.').max(80),
  /** The body that gives the money. */
  funder: z.string().trim().min(2, 'Name the body that gives the money.').max(120),
  /** Minor units. */
  budgetMinor: positiveMinor,
  /** ISO 4217; for now that of the event. */
  currency: z.string().regex(/^[A-Z]{3}$/, 'Three letters, like EUR.'),
  covers: z.array(costKind).min(1, 'Choose at least one cost kind.').max(4),
  eligibility,
  /** Minor units; null without a cap. */
  capPerPersonMinor: positiveMinor.nullable(),
  floors: z.array(floorShare).max(6),
  /** The funder sees the committee's mean scores. */
  showScores: z.boolean(),
});
export type FundInput = z.infer<typeof fundInput>;
export const fundSchema = fundInput.extend({
  id,
  /** A, B, C in the order of entry. */
  letter: z.string(),
  awards: z.number().int(),
  /** Everything awarded and not returned, minor units. */
  awardedMinor: z.number().int(),
  leftMinor: z.number().int(),
  version: z.number().int(),
  funders: z.array(z.string()),
  can: z.object({ edit: z.boolean(), inviteFunder: z.boolean() }),
});
export type Fund = z.infer<typeof fundSchema>;

export const createFund = endpoint({ id: 'grants.create_fund', method: 'POST', path: '/api/events/:event/funds', summary: 'Add a fund.', params: inEvent, body: fundInput, response: fundSchema });
export const updateFund = endpoint({ id: 'grants.update_fund', method: 'PUT', path: '/api/events/:event/funds/:fund', summary: 'Change a fund; never below what is awarded.', params: z.object({ event: slug, fund: id }), body: fundInput, response: fundSchema, versioned: true });

export const boardAward = z.object({ id, fundId: id, state: awardState, lines: z.array(awardLine), totalMinor: z.number().int(), version: z.number().int(), capped: z.boolean() });
export type BoardAward = z.infer<typeof boardAward>;
export const boardRow = z.object({
  id,
  reference: z.string(),
  /** Null for a conflict of interest: then nothing about the person is told. */
  person: z.object({ printedName: z.string(), affiliation: z.string(), country: z.string().nullable(), stage: careerStageSchema }).nullable(),
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
  counts: z.object({ submitted: z.number().int(), drafts: z.number().int(), awarded: z.number().int(), notFunded: z.number().int(), queried: z.number().int(), toOffer: z.number().int(), toDecline: z.number().int(), waiting: z.number().int() }),
  /** Why decision letters can't be sent now; null when they can. */
  notYet: z.string().nullable(),
  can: z.object({ score: z.boolean(), propose: z.boolean(), send: z.boolean(), addFund: z.boolean() }),
});
export type GrantBoard = z.infer<typeof grantBoard>;
export const readBoard = endpoint({ id: 'grants.board', method: 'GET', path: '/api/events/:event/grant-applications', summary: 'Grant applications by rank, with funds and awards.', params: inEvent, response: grantBoard });

export const grantDetail = z.object({
  row: boardRow,
  motivation: z.string(),
  minUsefulMinor: z.number().int(),
  flags: z.array(grantFlag),
  talkTitle: z.string().nullable(),
  submittedAt: instant.nullable(),
  items: z.array(itemInput),
  evidence: z.array(evidenceSchema),
  myReview: z.object({ score: z.number().int().nullable(), comment: z.string(), conflict: z.boolean() }).nullable(),
  /** Other people's scores; null until one's own is given. */
  reviews: z.array(z.object({ reviewer: z.string(), score: z.number().int(), comment: z.string() })).nullable(),
  talks: z.array(z.object({ awardId: id, lines: z.array(talkLine) })),
  can: z.object({ score: z.boolean(), propose: z.boolean() }),
});
export type GrantDetail = z.infer<typeof grantDetail>;
const ofApplication = z.object({ event: slug, application: id });
export const readGrant = endpoint({ id: 'grants.read', method: 'GET', path: '/api/events/:event/grant-applications/:application', summary: 'One grant application for the committee.', params: ofApplication, response: grantDetail });
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
export const answerQuery = endpoint({ id: 'grants.answer_query', method: 'POST', path: '/api/events/:event/awards/:award/answer', summary: 'Answer a funder’s question; the award goes back to the funder.', params: z.object({ event: slug, award: id }), body: z.strictObject({ text: z.string().trim().min(2, 'Write an answer.').max(1000) }), response: grantDetail, versioned: true });
export const sendDecisions = endpoint({
  id: 'grants.send',
  method: 'POST',
  path: '/api/events/:event/grant-decisions',
  summary: 'Send the decision letters: offers where all awards are approved, and regrets where there is none.',
  params: inEvent,
  body: z.strictObject({
    /** Last day for accepting, until 23:59 in the event’s zone. */
    answerBy: localDate,
  }),
  response: z.object({ offered: z.number().int(), notAwarded: z.number().int(), held: z.number().int() }),
});

export const funderAward = z.object({
  id,
  reference: z.string(),
  stage: careerStageSchema,
  /** UN M49 region of the affiliation. */
  region: z.string(),
  /** Null where the committee keeps scores closed. */
  score: z.number().nullable(),
  requested: z.array(awardLine),
  requestedMinor: z.number().int(),
  lines: z.array(awardLine),
  awardMinor: z.number().int(),
  state: awardState,
  talk: z.array(talkLine),
  can: z.object({ approve: z.boolean(), query: z.boolean(), undo: z.boolean() }),
  version: z.number().int(),
});
export type FunderAward = z.infer<typeof funderAward>;
export const condition = z.object({ text: z.string(), met: z.boolean(), fact: z.string().nullable() });
export type Condition = z.infer<typeof condition>;
export const funderView = z.object({
  id,
  name: z.string(),
  funder: z.string(),
  instituteName: z.string(),
  eventTitle: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  timeZone: z.string(),
  town: z.string(),
  contactEmail: z.string(),
  currency: z.string(),
  budgetMinor: z.number().int(),
  awardedMinor: z.number().int(),
  /** Until when the committee asks for decisions. */
  decideBy: instant.nullable(),
  showScores: z.boolean(),
  conditions: z.array(condition),
  awards: z.array(funderAward),
});
export type FunderView = z.infer<typeof funderView>;
const inFundPath = z.object({ fund: id });
export const readFund = endpoint({ id: 'grants.fund', method: 'GET', path: '/api/funds/:fund', summary: 'The awards proposed to one fund, for its funder: reference, stage and region, no names.', params: inFundPath, response: funderView });
export const decideAward = endpoint({
  id: 'grants.decide',
  method: 'POST',
  path: '/api/funds/:fund/awards/:award/decision',
  summary: 'Approve an award, query it with a question, or undo that.',
  params: z.object({ fund: id, award: id }),
  body: z.strictObject({ decision: z.enum(['approved', 'queried', 'proposed']), question: z.string().trim().max(1000).default('') }),
  response: funderAward,
  versioned: true,
});
export const approveAwards = endpoint({
  id: 'grants.approve_all',
  method: 'POST',
  path: '/api/funds/:fund/approvals',
  summary: 'Approve several awards as they were read; none when one has changed.',
  params: inFundPath,
  body: z.strictObject({ awards: z.array(z.strictObject({ id, version: z.number().int() })).min(1).max(500) }),
  response: funderView,
});

export const grantsEndpoints = [
  readMyGrant, saveMyGrant, submitMyGrant, withdrawMyGrant, addEvidence, removeEvidence, answerAward, downloadEvidence,
  createFund, updateFund, readBoard, readGrant, scoreGrant, proposeAward, answerQuery, sendDecisions, readFund, decideAward, approveAwards,
];
