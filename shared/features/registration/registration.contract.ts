import { z } from 'zod';
import { endpoint } from '../../http/endpoint';
import { pageOf, pageQuery } from '../../http/page';
import { id, slug } from '../../lib/ids';
import { instant, localDate } from '../../lib/time';
import { countryCode } from '../accounts/accounts.contract';
import { feeTable, orderSchema, priceSchema } from '../finance/finance.contract';

export const registrationStates = ['reserved', 'registered', 'attended', 'absent', 'cancelled'] as const;
export const registrationState = z.enum(registrationStates);
export type RegistrationState = z.infer<typeof registrationState>;
export const applicationStates = ['received', 'offered', 'waiting', 'declined', 'withdrawn'] as const;
export const applicationState = z.enum(applicationStates);
export type ApplicationState = z.infer<typeof applicationState>;
export const diets = ['any', 'vegetarian', 'vegan', 'halal', 'kosher', 'gluten_free'] as const;
export const diet = z.enum(diets);
export type Diet = z.infer<typeof diet>;

const line = (max: number) =>
  z
    .string()
    .trim()
    .max(max, `At most ${max} characters.`)
    .regex(/^[^\p{Cc}]*$/u, 'No line breaks here.');

export const invoiceInput = z.strictObject({
  payer: z.enum(['self', 'institute', 'grant']),
  name: line(160).min(1, 'This is needed.'),
  street: line(160),
  postcode: line(20),
  town: line(80),
  country: countryCode.nullable(),
  vatNumber: line(30),
  orderNumber: line(60),
});

export const registrationInput = z.strictObject({
  categoryId: id,
  extras: z.array(z.strictObject({ extraId: id, quantity: z.number().int().min(0).max(200) })).max(30),
  arrivesOn: localDate.nullable(),
  leavesOn: localDate.nullable(),
  badgeName: line(80).min(1, 'This is needed.'),
  diet,
  /** Health data: for the kitchen and the event office only, deleted after the event. */
  allergies: line(300),
  /** Access and other needs; for the event office only. */
  needs: line(500),
  invoice: invoiceInput,
  /** Agrees to the purposes stated on the page. */
  consent: z.literal(true, 'Please agree, so that we may keep these data for the event.'),
});
export type RegistrationInput = z.infer<typeof registrationInput>;

export const applicationInput = z.strictObject({
  motivation: z.string().trim().min(20, 'At least 20 characters.').max(4000),
  /** Present studies or position, in a line. */
  background: line(300).min(1, 'This is needed.'),
});

export const registrationView = z.object({
  id,
  code: z.string(),
  state: registrationState,
  categoryId: id,
  arrivesOn: localDate.nullable(),
  leavesOn: localDate.nullable(),
  badgeName: z.string(),
  diet,
  allergies: z.string(),
  needs: z.string(),
  checkedInAt: instant.nullable(),
  order: orderSchema.nullable(),
  version: z.number().int(),
});
export type RegistrationView = z.infer<typeof registrationView>;
export const applicationView = z.object({
  id,
  state: applicationState,
  motivation: z.string(),
  background: z.string(),
  answerBy: instant.nullable(),
  note: z.string(),
  version: z.number().int(),
});

const inEvent = z.object({ event: slug });

export const doorView = z.object({
  eventTitle: z.string(),
  eventSlug: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  timeZone: z.string(),
  town: z.string(),
  admission: z.enum(['open', 'application']),
  /** Registration is possible now, for this person. */
  open: z.boolean(),
  /** Why not, in a sentence. */
  closedBecause: z.string().nullable(),
  opensAt: instant.nullable(),
  closesAt: instant.nullable(),
  capacity: z.number().int(),
  placesLeft: z.number().int(),
  fees: feeTable,
  registration: registrationView.nullable(),
  application: applicationView.nullable(),
});
export type DoorView = z.infer<typeof doorView>;

export const readDoor = endpoint({
  id: 'registration.mine',
  method: 'GET',
  path: '/api/events/:event/my-registration',
  summary: 'Whether and how one can register, and one’s own registration and application.',
  params: inEvent,
  response: doorView,
});
export const quote = endpoint({
  id: 'registration.quote',
  method: 'POST',
  path: '/api/events/:event/quotes',
  summary: 'The price of a choice, line by line, now. Changes nothing.',
  params: inEvent,
  body: registrationInput.pick({ categoryId: true, extras: true }),
  response: priceSchema,
});
export const register = endpoint({
  id: 'registration.register',
  method: 'POST',
  path: '/api/events/:event/registrations',
  summary:
    'Take a place: it is kept until the order is paid or runs out. 409 registration.full when there is none.',
  params: inEvent,
  body: registrationInput,
  response: registrationView,
});
export const changeRegistration = endpoint({
  id: 'registration.change',
  method: 'PUT',
  path: '/api/events/:event/my-registration',
  summary: 'Change one’s stay, diet and needs.',
  params: inEvent,
  body: registrationInput.pick({
    arrivesOn: true,
    leavesOn: true,
    badgeName: true,
    diet: true,
    allergies: true,
    needs: true,
  }),
  response: registrationView,
  versioned: true,
});
export const cancelRegistration = endpoint({
  id: 'registration.cancel',
  method: 'POST',
  path: '/api/events/:event/my-registration/cancellation',
  summary: 'Give one’s place back.',
  params: inEvent,
  body: z.strictObject({}),
  response: registrationView,
  versioned: true,
});
export const pay = endpoint({
  id: 'registration.pay',
  method: 'POST',
  path: '/api/events/:event/my-registration/payment',
  summary: 'Open the payment page of one’s order.',
  params: inEvent,
  body: z.strictObject({}),
  response: z.object({ url: z.string() }),
});
export const refreshPayment = endpoint({
  id: 'registration.refresh',
  method: 'POST',
  path: '/api/events/:event/my-registration/refresh',
  summary: 'Ask the card service about one’s order now, after coming back from the payment page.',
  params: inEvent,
  body: z.strictObject({}),
  response: registrationView,
});
export const applyForPlace = endpoint({
  id: 'registration.apply',
  method: 'POST',
  path: '/api/events/:event/applications',
  summary: 'Apply for a place, or ask for one on the waiting list of an open event.',
  params: inEvent,
  body: applicationInput,
  response: applicationView,
});
export const withdrawApplication = endpoint({
  id: 'registration.withdraw_application',
  method: 'POST',
  path: '/api/events/:event/my-application/withdrawal',
  summary: 'Withdraw one’s application.',
  params: inEvent,
  body: z.strictObject({}),
  response: applicationView,
  versioned: true,
});

export const applicationRow = applicationView.extend({
  accountId: id,
  printedName: z.string(),
  affiliation: z.string(),
  country: z.string().nullable(),
  careerStage: z.string().nullable(),
  appliedAt: instant,
  registered: z.boolean(),
});
export type ApplicationRow = z.infer<typeof applicationRow>;
export const listApplications = endpoint({
  id: 'registration.applications',
  method: 'GET',
  path: '/api/events/:event/applications',
  summary: 'Applications in order of arrival (organisers, reviewers).',
  params: inEvent,
  query: pageQuery.extend({ state: applicationState.optional() }),
  response: pageOf(applicationRow),
});
export const decideApplication = endpoint({
  id: 'registration.decide',
  method: 'POST',
  path: '/api/events/:event/applications/:application/decision',
  summary: 'Offer a place, put on the waiting list, or decline; told by letter.',
  params: z.object({ event: slug, application: id }),
  body: z.strictObject({
    decision: z.enum(['offered', 'waiting', 'declined']),
    note: z.string().trim().max(2000).default(''),
    answerBy: localDate.nullable().default(null),
  }),
  response: applicationRow,
  versioned: true,
});

export const registrationRow = z.object({
  id,
  accountId: id,
  code: z.string(),
  state: registrationState,
  printedName: z.string(),
  affiliation: z.string(),
  country: z.string().nullable(),
  email: z.string(),
  category: z.string(),
  arrivesOn: localDate.nullable(),
  leavesOn: localDate.nullable(),
  diet: diet,
  orderState: z.string().nullable(),
  totalMinor: z.number().int(),
  currency: z.string(),
  oddity: z.string().nullable(),
  registeredAt: instant,
  checkedInAt: instant.nullable(),
});
export type RegistrationRow = z.infer<typeof registrationRow>;
export const listRegistrations = endpoint({
  id: 'registration.list',
  method: 'GET',
  path: '/api/events/:event/registrations',
  summary: 'Registrations, the latest first.',
  params: inEvent,
  query: pageQuery.extend({
    state: registrationState.optional(),
    q: z.string().max(100).optional(),
    unpaid: z.enum(['true']).optional(),
  }),
  response: pageOf(registrationRow),
});
export const readRegistration = endpoint({
  id: 'registration.read',
  method: 'GET',
  path: '/api/events/:event/registrations/:registration',
  summary: 'One registration with its order.',
  params: z.object({ event: slug, registration: id }),
  response: registrationView.extend({ row: registrationRow }),
});
export const exportRegistrations = endpoint({
  id: 'registration.export',
  method: 'GET',
  path: '/api/events/:event/registrations.csv',
  summary: 'All registrations as CSV, safe for spreadsheets.',
  params: inEvent,
  response: 'file',
});
export const placesSchema = z.object({
  capacity: z.number().int(),
  paid: z.number().int(),
  reserved: z.number().int(),
  offered: z.number().int(),
  free: z.number().int(),
  waiting: z.number().int(),
});
export type Places = z.infer<typeof placesSchema>;
export const readPlaces = endpoint({
  id: 'registration.places',
  method: 'GET',
  path: '/api/events/:event/places',
  summary: 'Places taken, kept and free.',
  params: inEvent,
  response: placesSchema,
});

export const deskRow = z.object({
  id,
  code: z.string(),
  printedName: z.string(),
  badgeName: z.string(),
  affiliation: z.string(),
  state: registrationState,
  paid: z.boolean(),
  checkedInAt: instant.nullable(),
});
export type DeskRow = z.infer<typeof deskRow>;
export const searchDesk = endpoint({
  id: 'registration.desk',
  method: 'GET',
  path: '/api/events/:event/desk',
  summary: 'People at the desk by name or code.',
  params: inEvent,
  query: z.strictObject({ q: z.string().trim().max(80).default('') }),
  response: z.object({ items: z.array(deskRow), arrived: z.number().int(), expected: z.number().int() }),
});
export const checkIn = endpoint({
  id: 'registration.check_in',
  method: 'POST',
  path: '/api/events/:event/desk/:registration',
  summary: 'Check a person in, or take it back.',
  params: z.object({ event: slug, registration: id }),
  body: z.strictObject({ present: z.boolean() }),
  response: deskRow,
});
export const myRegistration = z.object({
  eventSlug: z.string(),
  eventTitle: z.string(),
  startsOn: localDate,
  endsOn: localDate,
  town: z.string(),
  state: z.string(),
});
export const listMyRegistrations = endpoint({
  id: 'registration.all_mine',
  method: 'GET',
  path: '/api/my/registrations',
  summary: 'Events for which one has registered or applied.',
  response: z.object({ items: z.array(myRegistration) }),
});

export const registrationEndpoints = [
  readDoor,
  quote,
  register,
  changeRegistration,
  cancelRegistration,
  pay,
  refreshPayment,
  applyForPlace,
  withdrawApplication,
  listApplications,
  decideApplication,
  listRegistrations,
  readRegistration,
  exportRegistrations,
  readPlaces,
  searchDesk,
  checkIn,
  listMyRegistrations,
];
