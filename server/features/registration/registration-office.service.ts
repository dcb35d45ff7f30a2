import { stringify } from 'csv-stringify/sync';
import { Op } from 'sequelize';
import type {
  DeskRow,
  RegistrationRow as RegistrationListRow,
  RegistrationState,
  RegistrationView,
} from '@shared/features/registration/registration.contract';
import { holdsPlace } from '@shared/features/registration/registration.rules';
import { formatMoney } from '@shared/lib/money';
import { foldCase, neutralCell } from '@shared/lib/text';
import { conflict, notFound } from '@shared/http/problem';
import type { Page } from '@shared/http/page';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { fileResponse, type FileResponse } from '@server/http/uploads';
import { accountsById, recordAudit, type PersonView } from '@server/features/accounts/accounts.service';
import { eventById } from '@server/features/events/events.service';
import { feeTableOf, ordersOf } from '@server/features/finance/finance.service';
import { ApplicationRow, RegistrationRow } from './registration.model';
import { presentRegistration } from './registration.service';

type Orders = Awaited<ReturnType<typeof ordersOf>>;

function presentRow(
  row: RegistrationRow,
  person: PersonView | undefined,
  orders: Orders,
  categories: Map<string, string>,
): RegistrationListRow {
  const order = orders.get(row.id);
  return {
    id: row.id,
    accountId: row.accountId,
    code: row.code,
    state: row.state,
    printedName: person?.printedName ?? '',
    affiliation: person?.affiliation ?? '',
    country: person?.country ?? null,
    email: person?.email ?? '',
    category:
      order?.price.lines.find((line) => line.kind === 'fee')?.label.replace(/^Fee, /, '') ??
      categories.get(row.categoryId) ??
      '',
    arrivesOn: row.arrivesOn,
    leavesOn: row.leavesOn,
    diet: row.diet,
    orderState: order?.state ?? null,
    totalMinor: order?.totalMinor ?? 0,
    currency: order?.currency ?? 'EUR',
    oddity: order?.oddity ?? null,
    registeredAt: row.createdAt.toISOString(),
    checkedInAt: row.checkedInAt?.toISOString() ?? null,
  };
}

async function presentRows(eventId: string, rows: RegistrationRow[]): Promise<RegistrationListRow[]> {
  const [people, orders, fees] = await Promise.all([
    accountsById(rows.map((row) => row.accountId)),
    ordersOf(rows.map((row) => row.id)),
    feeTableOf(eventId),
  ]);
  const categories = new Map(fees.categories.map((category) => [category.id, category.name]));
  return rows.map((row) => presentRow(row, people.get(row.accountId), orders, categories));
}

/** Registrations, the latest first. */
export async function listRegistrations(
  eventId: string,
  query: { cursor?: string; limit: number; state?: RegistrationState; q?: string; unpaid?: 'true' },
): Promise<Page<RegistrationListRow>> {
  const named = query.q ? await accountsNamed(eventId, query.q) : undefined;
  const rows = await RegistrationRow.findAll({
    where: {
      eventId,
      ...(query.state && { state: query.state }),
      ...(query.unpaid && { state: 'reserved' }),
      ...(named && { accountId: named }),
      ...(query.cursor && { id: { [Op.lt]: query.cursor } }),
    },
    order: [['id', 'DESC']],
    limit: query.limit + 1,
  });
  const page = rows.slice(0, query.limit);
  return {
    items: await presentRows(eventId, page),
    next: rows.length > query.limit ? (page[page.length - 1]?.id ?? null) : null,
  };
}

async function accountsNamed(eventId: string, q: string): Promise<string[]> {
  const all = await RegistrationRow.findAll({ where: { eventId }, attributes: ['accountId'] });
  const people = await accountsById(all.map((row) => row.accountId));
  const wanted = foldCase(q);
  return [...people.values()]
    .filter(
      (person) =>
        person.sortName.includes(wanted) ||
        person.email.includes(wanted) ||
        foldCase(person.printedName).includes(wanted),
    )
    .map((person) => person.id);
}

export async function readRegistration(
  eventId: string,
  id: string,
): Promise<RegistrationView & { row: RegistrationListRow }> {
  const row = await RegistrationRow.findOne({ where: { id, eventId } });
  if (!row) throw notFound('This registration');
  const [listed] = await presentRows(eventId, [row]);
  return { ...(await presentRegistration(row)), row: listed as RegistrationListRow };
}

/** All registrations as CSV (RFC 4180); cells that a spreadsheet would take for a formula are neutralised. Recorded in the audit trail. */
export async function exportRegistrations(actor: Actor, eventId: string): Promise<FileResponse> {
  const event = await eventById(eventId);
  const rows = await presentRows(
    eventId,
    await RegistrationRow.findAll({ where: { eventId }, order: ['id'] }),
  );
  const head = [
    'Code',
    'Name',
    'Affiliation',
    'Country',
    'E-mail',
    'State',
    'Category',
    'Arrives',
    'Leaves',
    'Diet',
    'Total',
    'Currency',
    'Payment',
  ];
  const body = rows.map((row) => [
    row.code,
    row.printedName,
    row.affiliation,
    row.country ?? '',
    row.email,
    row.state,
    row.category,
    row.arrivesOn ?? '',
    row.leavesOn ?? '',
    row.diet,
    formatMoney(row.totalMinor, row.currency, false),
    row.currency,
    row.orderState ?? '',
  ]);
  const content = `\uFEFF${stringify([head, ...body.map((cells) => cells.map(neutralCell))], { record_delimiter: '\r\n' })}`;
  await transaction(() =>
    recordAudit({
      actor,
      action: 'registration.exported',
      subject: 'event',
      subjectId: eventId,
      eventId,
      after: { rows: rows.length },
    }),
  );
  return fileResponse({
    content,
    downloadName: `registrations-${event.slug}.csv`,
    type: 'text/csv; charset=utf-8',
  });
}

function presentDesk(row: RegistrationRow, person: PersonView | undefined): DeskRow {
  return {
    id: row.id,
    code: row.code,
    printedName: person?.printedName ?? '',
    badgeName: row.badgeName,
    affiliation: person?.affiliation ?? '',
    state: row.state,
    paid: row.state !== 'reserved',
    checkedInAt: row.checkedInAt?.toISOString() ?? null,
  };
}

/** People at the desk by name, badge name or code, in the order of names; at most 60. */
export async function searchDesk(eventId: string, q: string) {
  const rows = await RegistrationRow.findAll({ where: { eventId, state: [...holdsPlace] } });
  const people = await accountsById(rows.map((row) => row.accountId));
  const wanted = foldCase(q.trim());
  const items = rows
    .filter((row) => {
      const person = people.get(row.accountId);
      return (
        wanted === '' ||
        row.code.toLowerCase() === wanted ||
        foldCase(row.badgeName).includes(wanted) ||
        person?.sortName.includes(wanted) ||
        foldCase(person?.printedName ?? '').includes(wanted)
      );
    })
    .sort((a, b) =>
      (people.get(a.accountId)?.sortName ?? '').localeCompare(people.get(b.accountId)?.sortName ?? ''),
    )
    .slice(0, 60)
    .map((row) => presentDesk(row, people.get(row.accountId)));
  return { items, arrived: rows.filter((row) => row.checkedInAt !== null).length, expected: rows.length };
}

/** Checks in, or takes it back. Twice has no second effect. @throws 409 for who has not paid. */
export async function checkIn(
  actor: Actor,
  eventId: string,
  id: string,
  present: boolean,
  now: Date,
): Promise<DeskRow> {
  const row = await transaction(async () => {
    const found = await RegistrationRow.findOne({ where: { id, eventId } });
    if (!found) throw notFound('This registration');
    if (found.state === 'reserved' && present)
      throw conflict('registration.unpaid', 'The fee is not paid. The office decides.');
    if (found.state === 'cancelled') throw conflict('registration.step', 'The registration is cancelled.');
    if (present === (found.checkedInAt !== null)) return found;
    await found.update(
      present
        ? { checkedInAt: now, checkedInBy: actor.accountId, state: 'attended' }
        : { checkedInAt: null, checkedInBy: null, state: 'registered' },
    );
    await recordAudit({
      actor,
      action: present ? 'registration.checked_in' : 'registration.check_in_undone',
      subject: 'registration',
      subjectId: id,
      eventId,
    });
    return found;
  });
  const people = await accountsById([row.accountId]);
  return presentDesk(row, people.get(row.accountId));
}

/** After the end: whoever registered and was never checked in counts as absent. Returns how many. @throws 409 before. */
export async function markAbsent(actor: Actor, eventId: string): Promise<number> {
  const event = await eventById(eventId);
  if (event.state !== 'finished' && event.state !== 'archived')
    throw conflict('registration.step', 'The event is not over yet.');
  return transaction(async () => {
    const rows = await RegistrationRow.findAll({ where: { eventId, state: 'registered' } });
    for (const row of rows) {
      await row.update({ state: 'absent' });
      await recordAudit({
        actor,
        action: 'registration.absent',
        subject: 'registration',
        subjectId: row.id,
        eventId,
      });
    }
    return rows.length;
  });
}

/** Events for which a person has registered or applied. */
export async function registrationsOfPerson(accountId: string) {
  const rows = await RegistrationRow.findAll({ where: { accountId, state: { [Op.ne]: 'cancelled' } } });
  const applications = await ApplicationRow.findAll({
    where: { accountId, state: { [Op.ne]: 'withdrawn' } },
  });
  const open = applications.filter((application) => !rows.some((row) => row.eventId === application.eventId));
  return Promise.all(
    [...rows, ...open].map(async (row) => {
      const event = await eventById(row.eventId);
      return {
        eventSlug: event.slug,
        eventTitle: event.title,
        startsOn: event.startsOn,
        endsOn: event.endsOn,
        town: event.town,
        state: row.state as string,
      };
    }),
  );
}
