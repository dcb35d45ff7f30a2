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

export const evidenceSchema = z.object({
  id,
  kind: costKind,
  fileName: z.string(),
  bytes: z.number().int(),
  type: z.string(),
  uploadedAt: instant,
});
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
  profile: z.object({
    printedName: z.string(),
    affiliation: z.string(),
    country: z.string().nullable(),
    careerStage: careerStageSchema.nullable(),
  }),
  application: z
    .object({
      reference: z.string(),
      state: grantState,
      input: grantInput,
      evidence: z.array(evidenceSchema),
      submittedAt: instant.nullable(),
      savedAt: instant,
    })
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
  can: z.object({
    edit: z.boolean(),
    submit: z.boolean(),
    withdraw: z.boolean(),
    accept: z.boolean(),
    return: z.boolean(),
  }),
  /** 0 before the first save. */
  version: z.number().int(),
});
export type MyGrant = z.infer<typeof myGrant>;

export const readMyGrant = endpoint({
  id: 'grants.mine',
  method: 'GET',
  path: '/api/events/:event/my-grant',
  summary: 'One’s own grant application and its decision.',
  params: inEvent,
  response: myGrant,
});
export const saveMyGrant = endpoint({
  id: 'grants.save',
  method: 'PUT',
  path: '/api/events/:event/my-grant',
  summary: 'Save the draft of one’s own grant application (version 0 for the first).',
  params: inEvent,
  body: grantInput,
  response: myGrant,
  versioned: true,
});
export const submitMyGrant = endpoint({
  id: 'grants.submit',
  method: 'POST',
  path: '/api/events/:event/my-grant/submission',
  summary: 'Hand in one’s own grant application as saved.',
  params: inEvent,
  body: z.strictObject({}),
  response: myGrant,
  versioned: true,
});
export const withdrawMyGrant = endpoint({
  id: 'grants.withdraw',
  method: 'POST',
  path: '/api/events/:event/my-grant/withdrawal',
  summary: 'Withdraw one’s own grant application before a decision.',
  params: inEvent,
  body: z.strictObject({}),
  response: myGrant,
  versioned: true,
});
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
export const removeEvidence = endpoint({
  id: 'grants.remove_evidence',
  method: 'DELETE',
  path: '/api/events/:event/my-grant/evidence/:evidence',
  summary: 'Remove a document from a draft.',
  params: z.object({ event: slug, evidence: id }),
  response: myGrant,
});
export const answerAward = endpoint({
  id: 'grants.answer',
  method: 'POST',
  path: '/api/events/:event/my-grant/answer',
  summary: 'Accept the offered grant, or give it back.',
  params: inEvent,
  body: z.strictObject({ answer: z.enum(['accepted', 'returned']) }),
  response: myGrant,
  versioned: true,
});
export const downloadEvidence = endpoint({
  id: 'grants.evidence',
  method: 'GET',
  path: '/api/events/:event/grant-evidence/:evidence',
  summary: 'A document: for its owner and the committee.',
  params: z.object({ event: slug, evidence: id }),
  response: 'file',
});

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

export const createFund = endpoint({
  id: 'grants.create_fund',
  method: 'POST',
  path: '/api/events/:event/funds',
  summary: 'Add a fund.',
  params: inEvent,
  body: fundInput,
  response: fundSchema,
});
export const updateFund = endpoint({
  id: 'grants.update_fund',
  method: 'PUT',
  path: '/api/events/:event/funds/:fund',
  summary: 'Change a fund; never below what is awarded.',
  params: z.object({ event: slug, fund: id }),
  body: fundInput,
  response: fundSchema,
  versioned: true,
});

export const grantsEndpoints = [
  readMyGrant,
  saveMyGrant,
  submitMyGrant,
  withdrawMyGrant,
  addEvidence,
  removeEvidence,
  answerAward,
  downloadEvidence,
  createFund,
  updateFund,
];
