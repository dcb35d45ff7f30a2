import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { id, slug } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { careerStageSchema } from '../accounts/accounts.contract';

const minor = z.number().int().min(0, 'Not below zero.').max(100_000_000);
const taxBasisPoints = z.number().int().min(0).max(5000);
const label = z
  .string()
  .trim()
  .min(1, 'This is needed.')
  .max(80)
  .regex(/^[^\p{Cc}]*$/u);

const categoryFields = {
  name: label,
  /** Career stages that pay this fee; empty = anybody may choose it. */
  stages: z.array(careerStageSchema).max(6),
  /** Minor units; null without an early fee. */
  earlyMinor: minor.nullable(),
  /** Last day of the early fee, in the event's zone. */
  earlyUntil: localDate.nullable(),
  /** Minor units. */
  regularMinor: minor,
  /** 1900 = 19 %. */
  taxBasisPoints,
};
const extraFields = {
  name: label,
  /** Minor units each. */
  priceMinor: minor,
  /** Pieces in all; null = no limit. */
  capacity: z.number().int().min(1).max(100_000).nullable(),
  /** Last day on which it can be taken; null = until registration closes. */
  until: localDate.nullable(),
  taxBasisPoints,
  /** A hint under the name. */
  hint: z.string().trim().max(200).default(''),
};
export const feeCategory = z.object({ id, ...categoryFields });
export type FeeCategory = z.infer<typeof feeCategory>;
export const extraSchema = z.object({
  id,
  ...extraFields,
  /** Pieces left; null = no limit. */ left: z.number().int().nullable(),
});
export type Extra = z.infer<typeof extraSchema>;

export const feeTable = z.object({
  currency: z.string(),
  timeZone: z.string(),
  /** Printed where no tax is charged, e.g. why it is exempt. */
  taxNote: z.string(),
  categories: z.array(feeCategory),
  extras: z.array(extraSchema),
});
export type FeeTable = z.infer<typeof feeTable>;

export const priceLine = z.object({
  kind: z.enum(['fee', 'extra']),
  refId: id,
  label: z.string(),
  note: z.string(),
  quantity: z.number().int(),
  unitMinor: z.number().int(),
  netMinor: z.number().int(),
  taxBasisPoints: z.number().int(),
});
export type PriceLine = z.infer<typeof priceLine>;
export const priceSchema = z.object({
  currency: z.string(),
  lines: z.array(priceLine),
  taxes: z.array(
    z.object({ taxBasisPoints: z.number().int(), netMinor: z.number().int(), taxMinor: z.number().int() }),
  ),
  netMinor: z.number().int(),
  taxMinor: z.number().int(),
  totalMinor: z.number().int(),
  reasons: z.array(z.string()),
});
export type Price = z.infer<typeof priceSchema>;

export const orderStates = ['placed', 'paid', 'expired', 'cancelled'] as const;
export const orderSchema = z.object({
  id,
  /** Shown to people and on receipts. */
  number: z.string(),
  state: z.enum(orderStates),
  price: priceSchema,
  reservedUntil: instant.nullable(),
  paidAt: instant.nullable(),
  /** Why the last card payment failed, in a sentence. */
  lastFailure: z.string().nullable(),
  /** Something a person must look at: paid after the place was given away, another amount. */
  oddity: z.string().nullable(),
});
export type Order = z.infer<typeof orderSchema>;

const inEvent = z.object({ event: slug });
export const readFeeTable = endpoint({
  id: 'finance.fees',
  method: 'GET',
  path: '/api/events/:event/fees',
  summary: 'Fee categories and extras of an event.',
  params: inEvent,
  response: feeTable,
});
export const replaceFeeTable = endpoint({
  id: 'finance.replace_fees',
  method: 'PUT',
  path: '/api/events/:event/fees',
  summary: 'Save fee categories and extras. What has been ordered keeps its price.',
  params: inEvent,
  body: z.strictObject({
    taxNote: z.string().trim().max(300),
    categories: z.array(z.strictObject({ id: id.optional(), ...categoryFields })).max(20),
    extras: z.array(z.strictObject({ id: id.optional(), ...extraFields })).max(30),
  }),
  response: feeTable,
});
export const ledgerRow = z.object({
  account: z.string(),
  debitMinor: z.number().int(),
  creditMinor: z.number().int(),
  currency: z.string(),
});
export const readTrialBalance = endpoint({
  id: 'finance.trial_balance',
  method: 'GET',
  path: '/api/ledger/trial-balance',
  summary: 'Sum of every ledger account by currency; debits and credits are equal.',
  response: z.object({ rows: z.array(ledgerRow) }),
});

export const financeEndpoints = [readFeeTable, replaceFeeTable, readTrialBalance];
