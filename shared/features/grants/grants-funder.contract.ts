import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { careerStageSchema } from '../accounts/accounts.contract';
import { awardLine, awardState, talkLine } from './grants.contract';

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
export const readFund = endpoint({
  id: 'grants.fund',
  method: 'GET',
  path: '/api/funds/:fund',
  summary: 'The awards proposed to one fund, for its funder: reference, stage and region, no names.',
  params: inFundPath,
  response: funderView,
});
export const decideAward = endpoint({
  id: 'grants.decide',
  method: 'POST',
  path: '/api/funds/:fund/awards/:award/decision',
  summary: 'Approve an award, query it with a question, or undo that.',
  params: z.object({ fund: id, award: id }),
  body: z.strictObject({
    decision: z.enum(['approved', 'queried', 'proposed']),
    question: z.string().trim().max(1000).default(''),
  }),
  response: funderAward,
  versioned: true,
});
export const approveAwards = endpoint({
  id: 'grants.approve_all',
  method: 'POST',
  path: '/api/funds/:fund/approvals',
  summary: 'Approve several awards as they were read; none when one has changed.',
  params: inFundPath,
  body: z.strictObject({
    awards: z
      .array(z.strictObject({ id, version: z.number().int() }))
      .min(1)
      .max(500),
  }),
  response: funderView,
});

export const grantsFunderEndpoints = [readFund, decideAward, approveAwards];
