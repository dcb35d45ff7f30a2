import type { EventDetail } from '@shared/features/events/events.contract';
import type { RegistrationInput } from '@shared/features/registration/registration.contract';
import { addDays } from '@shared/lib/time';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { systemActor, type PersonView } from '@server/features/accounts/accounts.service';
import { changeEventState } from '@server/features/events/events.service';
import { PaymentRow } from '@server/features/finance/finance.model';
import { bookCardPayment, feeTableOf, orderOf } from '@server/features/finance/finance.service';
import {
  applyForPlace,
  decideApplication,
  listApplications,
  withdrawApplication,
} from '@server/features/registration/registration-applications.service';
import { checkIn, markAbsent } from '@server/features/registration/registration-office.service';
import {
  cancelRegistration,
  register,
  registrationOf,
} from '@server/features/registration/registration.service';
import { as, type Cast } from './10-accounts';

const diets = [
  'any',
  'any',
  'vegetarian',
  'any',
  'vegan',
  'any',
  'halal',
  'vegetarian',
  'any',
  'gluten_free',
  'any',
  'kosher',
] as const;
const DAY = 86_400_000;

async function take(event: EventDetail, person: PersonView, n: number, now: Date): Promise<string> {
  const fees = await feeTableOf(event.id);
  const category =
    fees.categories.find((candidate) => (candidate.stages as string[]).includes(person.careerStage ?? '')) ??
    fees.categories[fees.categories.length - 1];
  const input: RegistrationInput = {
    categoryId: category?.id ?? '',
    extras: fees.extras
      .filter((extra, index) => (n + index) % 2 === 0 && (extra.left === null || extra.left > 0))
      .map((extra) => ({ extraId: extra.id, quantity: 1 })),
    arrivesOn: addDays(event.startsOn, n % 5 === 0 ? 0 : -1),
    leavesOn: event.endsOn,
    badgeName: person.printedName,
    diet: diets[n % diets.length] as (typeof diets)[number],
    allergies: n % 17 === 0 ? 'hazelnuts' : '',
    needs: n % 29 === 0 ? 'A step-free way to the desk' : '',
    invoice: {
      payer: n % 4 === 0 ? 'institute' : 'self',
      name: n % 4 === 0 ? person.affiliation : person.printedName,
      street: '',
      postcode: '',
      town: '',
      country: person.country,
      vatNumber: '',
      orderNumber: '',
    },
    consent: true,
  };
  return (await register(as(person), event.slug, input, now)).id;
}

/** Books the card payment of an order as the webhook does, on a past day. */
async function settle(registrationId: string, now: Date): Promise<void> {
  await transaction(async () => {
    const order = await orderOf(registrationId);
    if (!order || order.state !== 'placed' || order.totalMinor === 0) return;
    const payment = await PaymentRow.create({
      id: newId(),
      orderId: order.id,
      provider: 'stripe',
      providerId: `demo_${order.id}`,
      amountMinor: order.totalMinor,
      currency: order.currency,
      state: 'pending',
    });
    await bookCardPayment(order, payment, now);
  });
}

export async function seedRegistrations(
  cast: Cast,
  events: { school: EventDetail; conference: EventDetail; workshop: EventDetail },
  now: Date,
  scale: number,
  runJobs: () => Promise<void>,
): Promise<void> {
  const { crowd, by } = cast;
  const { school, conference, workshop } = events;
  for (const { slug } of [workshop, conference, school]) {
    await changeEventState(systemActor, slug, 'open');
  }
  const ago = (days: number): Date => new Date(now.getTime() - days * DAY);
  for (let n = 0; n < 30 * scale; n++)
    await settle(
      await take(workshop, crowd[(100 + n) % crowd.length] as PersonView, n, ago(170 - (n % 90))),
      ago(169 - (n % 90)),
    );
  for (let n = 0; n < 74 * scale; n++) {
    const unpaid = n % 12 === 5;
    const id = await take(
      conference,
      crowd[n] as PersonView,
      n,
      unpaid ? ago(1) : ago(140 - ((n * 7) % 120)),
    );
    if (!unpaid) await settle(id, ago(139 - ((n * 7) % 120)));
  }
  await settle(await take(conference, by.participant, 3, ago(50)), ago(50));
  await settle(await take(conference, by.chair, 4, ago(48)), ago(48));
  await take(conference, crowd[80 * scale] as PersonView, 2, ago(10));
  const leaver = as(crowd[80 * scale] as PersonView);
  const left = await registrationOf(conference.id, leaver.accountId);
  if (left) await cancelRegistration(leaver, conference.slug, left.version, ago(9));
  await seedApplications(cast, school, now, scale);
  await runJobs();
  await arrive(conference, now, crowd.slice(0, 40 * scale));
  await arrive(
    workshop,
    ago(60),
    Array.from({ length: 27 * scale }, (_, n) => crowd[(100 + n) % crowd.length] as PersonView),
  );
  await changeEventState(systemActor, conference.slug, 'running', undefined, now);
  await changeEventState(systemActor, workshop.slug, 'running', undefined, now);
  await changeEventState(systemActor, workshop.slug, 'finished', undefined, now);
  await markAbsent(systemActor, workshop.id);
  await fail(conference.id, crowd[5] as PersonView);
}

/** One card was declined: the order waits for another card. */
async function fail(eventId: string, person: PersonView): Promise<void> {
  await transaction(async () => {
    const registration = await registrationOf(eventId, person.id);
    const order = registration && (await orderOf(registration.id));
    if (!order || order.state !== 'placed') return;
    await PaymentRow.create({
      id: newId(),
      orderId: order.id,
      provider: 'stripe',
      providerId: `demo_declined_${order.id}`,
      amountMinor: order.totalMinor,
      currency: order.currency,
      state: 'failed',
    });
    await order.update({ lastFailure: 'The card has not enough money.' });
  });
}

async function seedApplications(cast: Cast, school: EventDetail, now: Date, scale: number): Promise<void> {
  const applicants = [cast.by.participant, ...cast.crowd.slice(50, 50 + 96 * scale)];
  for (const [n, person] of applicants.entries()) {
    await applyForPlace(
      as(person),
      school.slug,
      {
        motivation:
          'I work on a thesis about tilings and would like to learn how knots and quandles come into it. The courses A and B are what I miss.',
        background: ['Second year of a doctorate', 'Postdoc, first year', 'Master’s student', 'Lecturer'][
          n % 4
        ] as string,
      },
      now,
    );
  }
  const { items } = await listApplications(school.id, { limit: 200 });
  for (const [n, application] of items.entries()) {
    if (n % 9 === 7) continue; // still to be decided
    const decision = n % 11 === 5 ? 'declined' : n % 10 === 6 ? 'waiting' : 'offered';
    await decideApplication(
      systemActor,
      school.id,
      application.id,
      undefined,
      { decision, note: '', answerBy: null },
      now,
    );
  }
  for (const [n, person] of applicants.entries()) {
    const application = items.find((item) => item.accountId === person.id);
    const offered = application && n % 9 !== 7 && n % 11 !== 5 && n % 10 !== 6;
    if (!offered || n % 5 === 4) continue;
    const paid = n % 3 !== 1;
    const at = new Date(now.getTime() - (paid ? (n * 3) % 60 : 1) * DAY);
    const id = await take(school, person, n, at);
    if (paid) await settle(id, at);
  }
  const undecided = items.find((_item, n) => n % 9 === 7);
  const person = applicants.find((candidate) => candidate.id === undecided?.accountId);
  if (undecided && person) await withdrawApplication(as(person), school.slug, undecided.version);
}

async function arrive(event: EventDetail, now: Date, people: PersonView[]): Promise<void> {
  for (const person of people) {
    const row = await registrationOf(event.id, person.id);
    if (row?.state === 'registered') await checkIn(systemActor, event.id, row.id, true, now);
  }
}
