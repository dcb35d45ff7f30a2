import type { FeeCategory, FeeTable, Price, PriceLine } from './finance.contract';
import { divideRounded, formatMoney } from '../../lib/money';
import { addDays, formatInstant, localToInstant } from '../../lib/time';

export interface PriceInput {
  categoryId: string;
  /** Extra -> quantity; zero is left out. */
  extras: readonly { extraId: string; quantity: number }[];
}

/**
 * The last moment of the early fee: a millisecond before the next day begins in the event's zone, so that a day whose
 * last hour comes twice counts to its real end.
 */
export const earlyUntil = (category: { earlyUntil: string | null }, zone: string): string | null =>
  category.earlyUntil === null
    ? null
    : new Date(Date.parse(localToInstant(addDays(category.earlyUntil, 1), '00:00', zone)) - 1).toISOString();

/** The early fee holds until the end of its last day in the event's zone. */
export function isEarly(category: { earlyUntil: string | null }, zone: string, now: Date): boolean {
  const until = earlyUntil(category, zone);
  return until !== null && now.toISOString() <= until;
}

/** Categories that a person may choose: those for the stage, and those for everybody. */
export const categoriesFor = (table: FeeTable, stage: string | null): FeeCategory[] =>
  table.categories.filter(
    (category) =>
      category.stages.length === 0 || (stage !== null && (category.stages as string[]).includes(stage)),
  );

/**
 * Price of a registration, line by line, with the reasons. Amounts in minor units of the table's currency. Net amounts
 * are whole per line; tax is worked out per rate on the sum of the lines and rounded once, half away from zero
 * (EN 16931: BR-CO-17, tax per category); the total is the sum of both (BR-CO-15).
 * @throws RangeError for a category or extra that the table does not have.
 */
export function price(input: PriceInput, table: FeeTable, now: Date): Price {
  const category = table.categories.find((candidate) => candidate.id === input.categoryId);
  if (!category) throw new RangeError('no such fee category');
  const reasons: string[] = [];
  const lines = [
    feeLine(category, table, now, reasons),
    ...input.extras.filter((wish) => wish.quantity > 0).map((wish) => extraLine(wish, table)),
  ];
  const taxes = taxesOf(lines);
  const netMinor = lines.reduce((sum, line) => sum + line.netMinor, 0);
  const taxMinor = taxes.reduce((sum, tax) => sum + tax.taxMinor, 0);
  if (taxMinor === 0 && table.taxNote) reasons.push(table.taxNote);
  return {
    currency: table.currency,
    lines,
    taxes,
    netMinor,
    taxMinor,
    totalMinor: netMinor + taxMinor,
    reasons,
  };
}

function feeLine(category: FeeCategory, table: FeeTable, now: Date, reasons: string[]): PriceLine {
  const early = category.earlyMinor !== null && isEarly(category, table.timeZone, now);
  const unitMinor = early ? (category.earlyMinor as number) : category.regularMinor;
  const until = earlyUntil(category, table.timeZone);
  let note = '';
  if (until && category.earlyMinor !== null) {
    note = early
      ? `${formatMoney(category.regularMinor, table.currency, false)} after ${formatInstant(until, table.timeZone)}`
      : `the early fee ended ${formatInstant(until, table.timeZone)}`;
    reasons.push(
      early
        ? `Early fee until ${formatInstant(until, table.timeZone)} (${table.timeZone}).`
        : `Regular fee: the early fee ended ${formatInstant(until, table.timeZone)} (${table.timeZone}).`,
    );
  }
  return {
    kind: 'fee',
    refId: category.id,
    label: `Fee, ${category.name}${early ? ', early' : ''}`,
    note,
    quantity: 1,
    unitMinor,
    netMinor: unitMinor,
    taxBasisPoints: category.taxBasisPoints,
  };
}

function extraLine(wish: { extraId: string; quantity: number }, table: FeeTable): PriceLine {
  const extra = table.extras.find((candidate) => candidate.id === wish.extraId);
  if (!extra) throw new RangeError('no such extra');
  const note =
    wish.quantity > 1 ? `${wish.quantity} × ${formatMoney(extra.priceMinor, table.currency, false)}` : '';
  return {
    kind: 'extra',
    refId: extra.id,
    label: extra.name,
    note,
    quantity: wish.quantity,
    unitMinor: extra.priceMinor,
    netMinor: extra.priceMinor * wish.quantity,
    taxBasisPoints: extra.taxBasisPoints,
  };
}

/** Tax per rate: basis points of the sum of the lines with that rate, rounded once. */
export function taxesOf(lines: readonly Pick<PriceLine, 'netMinor' | 'taxBasisPoints'>[]): Price['taxes'] {
  const rates = [...new Set(lines.map((line) => line.taxBasisPoints))].sort((a, b) => b - a);
  return rates.map((taxBasisPoints) => {
    const netMinor = lines
      .filter((line) => line.taxBasisPoints === taxBasisPoints)
      .reduce((sum, line) => sum + line.netMinor, 0);
    return { taxBasisPoints, netMinor, taxMinor: divideRounded(netMinor * taxBasisPoints, 10_000) };
  });
}

/** Field errors of a fee table, keyed by path. */
export function feeTableErrors(table: {
  categories: readonly Omit<FeeCategory, 'id'>[];
  extras: readonly { name: string }[];
}): Record<string, string> {
  const errors: Record<string, string> = {};
  table.categories.forEach((category, index) => {
    if ((category.earlyMinor === null) !== (category.earlyUntil === null))
      errors[`categories.${index}.earlyUntil`] =
        'An early fee needs its last day, and a last day an early fee.';
    if (category.earlyMinor !== null && category.earlyMinor > category.regularMinor)
      errors[`categories.${index}.earlyMinor`] = 'The early fee is above the regular one.';
    if (table.categories.findIndex((other) => other.name === category.name) < index)
      errors[`categories.${index}.name`] = 'Another category has this name.';
  });
  table.extras.forEach((extra, index) => {
    if (table.extras.findIndex((other) => other.name === extra.name) < index)
      errors[`extras.${index}.name`] = 'Another extra has this name.';
  });
  return errors;
}

export interface JournalLine {
  /** Account name: `receivable`, `card clearing`, `fee income:<event>`, `tax payable`. */
  account: string;
  debitMinor: number;
  creditMinor: number;
}

/** Entry for a placed order: what is owed to us against income and tax. */
export const orderEntry = (
  eventId: string,
  price: { netMinor: number; taxMinor: number; totalMinor: number },
): JournalLine[] =>
  withoutZero([
    { account: 'receivable', debitMinor: price.totalMinor, creditMinor: 0 },
    { account: `fee income:${eventId}`, debitMinor: 0, creditMinor: price.netMinor },
    { account: 'tax payable', debitMinor: 0, creditMinor: price.taxMinor },
  ]);

/** Entry for a card payment: the card company owes us, the person no longer. */
export const cardPaymentEntry = (amountMinor: number): JournalLine[] =>
  withoutZero([
    { account: 'card clearing', debitMinor: amountMinor, creditMinor: 0 },
    { account: 'receivable', debitMinor: 0, creditMinor: amountMinor },
  ]);

/** The same entry the other way round: corrections reverse, nothing is edited. */
export const reversed = (lines: readonly JournalLine[]): JournalLine[] =>
  lines.map((line) => ({
    account: line.account,
    debitMinor: line.creditMinor,
    creditMinor: line.debitMinor,
  }));

const withoutZero = (lines: JournalLine[]): JournalLine[] =>
  lines.filter((line) => line.debitMinor !== 0 || line.creditMinor !== 0);

/** What a Checkout Session means for its order (docs.stripe.com: status, payment_status). */
export function sessionOutcome(session: {
  status: string | null;
  paymentStatus: string;
}): 'paid' | 'waiting' | 'expired' | 'open' {
  if (session.status === 'complete') return session.paymentStatus === 'unpaid' ? 'waiting' : 'paid';
  if (session.status === 'expired') return 'expired';
  return 'open';
}
