import { Op } from 'sequelize';
import type { FeeTable, Order, Price } from '@shared/features/finance/finance.contract';
import {
  cardPaymentEntry,
  categoriesFor,
  feeTableErrors,
  orderEntry,
  price,
  reversed,
  type PriceInput,
} from '@shared/features/finance/finance.rules';
import { formatMoney, stripeAmount } from '@shared/lib/money';
import { instantToLocal } from '@shared/lib/time';
import { conflict, forbidden, invalid } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { holds, type Actor } from '@server/http/authorize';
import { announce } from '@server/jobs/job';
import { accountById, recordAudit } from '@server/features/accounts/accounts.service';
import { eventById, requireEvent } from '@server/features/events/events.service';
import { postJournalEntry } from './finance-ledger.service';
import { orderExpired, orderPaid } from './finance.jobs';
import { ExtraRow, FeeCategoryRow, OrderLineRow, OrderRow, type PaymentRow } from './finance.model';

/** Fee categories and extras as they are offered now. */
export async function feeTableOf(eventId: string): Promise<FeeTable> {
  const event = await eventById(eventId);
  const [categories, extras] = await Promise.all([
    FeeCategoryRow.findAll({ where: { eventId, removedAt: null }, order: ['position'] }),
    ExtraRow.findAll({ where: { eventId, removedAt: null }, order: ['position'] }),
  ]);
  const taken = await piecesTaken(extras.map((extra) => extra.id));
  return {
    currency: event.currency,
    timeZone: event.timeZone,
    taxNote: String((event.settings as { taxNote?: string }).taxNote ?? ''),
    categories: categories.map(
      ({ id, name, stages, earlyMinor, earlyUntil, regularMinor, taxBasisPoints }) => ({
        id,
        name,
        stages,
        earlyMinor,
        earlyUntil,
        regularMinor,
        taxBasisPoints,
      }),
    ),
    extras: extras.map(({ id, name, priceMinor, capacity, until, taxBasisPoints, hint }) => ({
      id,
      name,
      priceMinor,
      capacity,
      until,
      taxBasisPoints,
      hint,
      left: capacity === null ? null : Math.max(0, capacity - (taken.get(id) ?? 0)),
    })),
  };
}

/** Pieces of extras in orders that are placed or paid. */
async function piecesTaken(extraIds: string[]): Promise<Map<string, number>> {
  if (extraIds.length === 0) return new Map();
  const lines = await OrderLineRow.findAll({ where: { refId: extraIds, kind: 'extra' } });
  const live = await OrderRow.findAll({
    where: { id: [...new Set(lines.map((line) => line.orderId))], state: ['placed', 'paid'] },
    attributes: ['id'],
  });
  const ids = new Set(live.map((order) => order.id));
  const taken = new Map<string, number>();
  for (const line of lines)
    if (ids.has(line.orderId)) taken.set(line.refId, (taken.get(line.refId) ?? 0) + line.quantity);
  return taken;
}

export const countFeeCategories = (eventId: string): Promise<number> =>
  FeeCategoryRow.count({ where: { eventId, removedAt: null } });

type Editable<T> = Omit<T, 'id' | 'left'> & { id?: string };
export interface FeeTableInput {
  taxNote: string;
  categories: Editable<FeeTable['categories'][number]>[];
  extras: Editable<FeeTable['extras'][number]>[];
}

/** Saves the table. Rows that are left out stay for what was ordered, and are offered no more. */
export async function replaceFeeTable(actor: Actor, slug: string, input: FeeTableInput): Promise<FeeTable> {
  const errors = feeTableErrors(input);
  if (Object.keys(errors).length > 0) throw invalid(errors);
  const eventId = await transaction(async () => {
    const event = await requireEvent(slug);
    if (!holds(actor, 'organiser', event.id)) throw forbidden();
    await replaceRows(FeeCategoryRow, event.id, input.categories);
    await replaceRows(ExtraRow, event.id, input.extras);
    await event.update({ settings: { ...event.settings, taxNote: input.taxNote } });
    await recordAudit({
      actor,
      action: 'finance.fees_saved',
      subject: 'event',
      subjectId: event.id,
      eventId: event.id,
      after: { categories: input.categories.map((row) => `${row.name} ${row.regularMinor}`) },
    });
    return event.id;
  });
  return feeTableOf(eventId);
}

async function replaceRows(
  Rows: typeof FeeCategoryRow | typeof ExtraRow,
  eventId: string,
  wanted: { id?: string }[],
): Promise<void> {
  const present: (FeeCategoryRow | ExtraRow)[] = await (Rows as typeof ExtraRow).findAll({
    where: { eventId, removedAt: null },
  });
  for (const row of present)
    if (!wanted.some((entry) => entry.id === row.id)) await row.update({ removedAt: new Date() });
  for (const [position, { id, ...fields }] of wanted.entries()) {
    const row = present.find((candidate) => candidate.id === id);
    if (row) await row.update({ ...fields, position });
    else await (Rows as typeof ExtraRow).create({ id: newId(), eventId, ...fields, position });
  }
}

/** Price of a wish, now. @throws 422 for what is not offered, 409 for an extra that is gone. */
export async function priceOf(eventId: string, input: PriceInput, now: Date): Promise<Price> {
  const table = await feeTableOf(eventId);
  const today = instantToLocal(now, table.timeZone).date;
  if (!table.categories.some((category) => category.id === input.categoryId))
    throw invalid({ categoryId: 'Choose a fee category.' });
  for (const [index, wish] of input.extras.entries()) {
    const extra = table.extras.find((candidate) => candidate.id === wish.extraId);
    if (!extra) throw invalid({ [`extras.${index}.extraId`]: 'This is not offered.' });
    if (input.extras.findIndex((other) => other.extraId === wish.extraId) < index)
      throw invalid({ [`extras.${index}.extraId`]: 'This is named twice.' });
    if (wish.quantity > 0 && extra.until && extra.until < today)
      throw conflict('finance.extra_closed', `${extra.name} could be taken until ${extra.until}.`);
    if (extra.left !== null && wish.quantity > extra.left)
      throw conflict(
        'finance.extra_gone',
        extra.left === 0 ? `${extra.name} is taken.` : `Only ${extra.left} of ${extra.name} are left.`,
      );
  }
  return price(input, table, now);
}

/** Places an order for a registration, in the ambient transaction: priced, numbered, and booked as receivable. */
export async function placeOrder(input: {
  registrationId: string;
  eventId: string;
  accountId: string;
  wish: PriceInput;
  reservedUntil: Date;
  now: Date;
}): Promise<OrderRow> {
  return transaction(async () => {
    const { registrationId, eventId, accountId, reservedUntil, now } = input;
    const stage = (await accountById(accountId))?.careerStage ?? null;
    if (!categoriesFor(await feeTableOf(eventId), stage).some(({ id }) => id === input.wish.categoryId))
      throw invalid({ categoryId: 'This fee is for another career stage. Your profile says yours.' });
    const priced = await priceOf(eventId, input.wish, now);
    refuseUnchargeable(priced);
    const order = await OrderRow.create({
      id: newId(),
      number: await nextNumber(now),
      eventId,
      registrationId,
      accountId,
      state: 'placed',
      currency: priced.currency,
      totalMinor: priced.totalMinor,
      price: priced,
      reservedUntil,
    });
    for (const line of priced.lines) {
      await OrderLineRow.create({
        id: newId(),
        orderId: order.id,
        kind: line.kind,
        refId: line.refId,
        quantity: line.quantity,
        netMinor: line.netMinor,
      });
    }
    await postJournalEntry({
      voucher: `order:${order.id}`,
      memo: `Order ${order.number}`,
      currency: priced.currency,
      lines: orderEntry(eventId, priced),
      at: now,
    });
    if (priced.totalMinor === 0) await markPaid(order, now);
    return order;
  });
}

/** An order that no card can pay is not placed (three-decimal currencies end in 0). @throws 409. */
function refuseUnchargeable({ totalMinor, currency }: Price): void {
  try {
    stripeAmount(totalMinor, currency);
  } catch {
    throw conflict(
      'finance.not_chargeable',
      `${formatMoney(totalMinor, currency)} can’t be paid by card. Write to the event’s office.`,
    );
  }
}

async function nextNumber(now: Date): Promise<string> {
  const year = now.getUTCFullYear();
  const n = await OrderRow.count({ where: { number: { [Op.startsWith]: `${year}-` } } });
  return `${year}-${String(n + 1).padStart(5, '0')}`;
}

/** The order becomes paid, once. */
export async function markPaid(order: OrderRow, now: Date): Promise<void> {
  await order.update({ state: 'paid', paidAt: now, lastFailure: null });
  await announce(orderPaid, { orderId: order.id, registrationId: order.registrationId });
}

/** Books a card payment that has really come in; the same payment twice has no second effect. In the ambient transaction. */
export async function bookCardPayment(
  order: OrderRow,
  payment: PaymentRow,
  now: Date,
): Promise<'booked' | 'known' | 'odd'> {
  if (payment.state === 'paid') return 'known';
  await payment.update({ state: 'paid' });
  await postJournalEntry({
    voucher: `payment:${payment.id}`,
    memo: `Card payment of order ${order.number}`,
    currency: payment.currency,
    lines: cardPaymentEntry(payment.amountMinor),
    at: now,
  });
  if (order.state === 'placed') {
    await markPaid(order, now);
    return 'booked';
  }
  const why = order.state === 'paid' ? 'Paid twice.' : `Paid after the order was ${order.state}.`;
  await order.update({ oddity: `${why} A person decides: refund or seat again.` });
  await recordAudit({
    actor: null,
    action: 'finance.oddity',
    subject: 'order',
    subjectId: order.id,
    eventId: order.eventId,
    after: { why },
  });
  return 'odd';
}

/** Takes back an order that was not paid: reversed in the ledger. In the ambient transaction. */
export async function closeUnpaidOrder(
  order: OrderRow,
  state: 'expired' | 'cancelled',
  now: Date,
): Promise<void> {
  if (order.state !== 'placed') return;
  await order.update({ state });
  await postJournalEntry({
    voucher: `order-closed:${order.id}`,
    memo: `Order ${order.number} ${state}`,
    currency: order.currency,
    lines: reversed(orderEntry(order.eventId, order.price)),
    at: now,
  });
}

/** Orders whose place was kept long enough: they expire, one transaction each. */
export async function expireOrders(now: Date): Promise<number> {
  const due = await OrderRow.findAll({
    where: { state: 'placed', reservedUntil: { [Op.lt]: now } },
    limit: 200,
  });
  for (const { id } of due) {
    await transaction(async () => {
      const order = (await OrderRow.findByPk(id)) as OrderRow;
      if (order.state !== 'placed') return;
      await closeUnpaidOrder(order, 'expired', now);
      await announce(orderExpired, { orderId: order.id, registrationId: order.registrationId });
    });
  }
  return due.length;
}

/** The order that counts for a registration: paid or placed, else the latest. */
export async function orderOf(registrationId: string): Promise<OrderRow | null> {
  const rows = await OrderRow.findAll({ where: { registrationId }, order: [['id', 'DESC']] });
  return (
    rows.find((row) => row.state === 'paid') ?? rows.find((row) => row.state === 'placed') ?? rows[0] ?? null
  );
}

export async function ordersOf(registrationIds: string[]): Promise<Map<string, OrderRow>> {
  const rows = await OrderRow.findAll({ where: { registrationId: registrationIds }, order: ['id'] });
  const rank = { paid: 3, placed: 2, expired: 1, cancelled: 0 };
  const best = new Map<string, OrderRow>();
  for (const row of rows) {
    const present = best.get(row.registrationId);
    if (!present || rank[row.state] >= rank[present.state]) best.set(row.registrationId, row);
  }
  return best;
}

export const presentOrder = (row: OrderRow): Order => ({
  id: row.id,
  number: row.number,
  state: row.state,
  price: row.price,
  reservedUntil: row.reservedUntil?.toISOString() ?? null,
  paidAt: row.paidAt?.toISOString() ?? null,
  lastFailure: row.lastFailure,
  oddity: row.oddity,
});

export interface MoneyIn {
  currency: string;
  receivedMinor: number;
  openMinor: number;
  /** Payments in order of time. */
  steps: { at: string; amountMinor: number }[];
}

/** What has come in for an event, payment by payment, and what is still open. */
export async function moneyIn(eventId: string): Promise<MoneyIn> {
  const [event, orders] = await Promise.all([
    eventById(eventId),
    OrderRow.findAll({ where: { eventId, state: ['placed', 'paid'] } }),
  ]);
  const paid = orders.filter((order) => order.state === 'paid' && order.paidAt && order.totalMinor > 0);
  return {
    currency: event.currency,
    receivedMinor: paid.reduce((sum, order) => sum + order.totalMinor, 0),
    openMinor: orders
      .filter((order) => order.state === 'placed')
      .reduce((sum, order) => sum + order.totalMinor, 0),
    steps: paid
      .map((order) => ({ at: (order.paidAt as Date).toISOString(), amountMinor: order.totalMinor }))
      .sort((a, b) => a.at.localeCompare(b.at)),
  };
}

/** Orders of an event that a person must look at. */
export const odditiesOf = (eventId: string): Promise<number> =>
  OrderRow.count({ where: { eventId, oddity: { [Op.ne]: null } } });
