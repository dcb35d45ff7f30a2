import type {
  DeadlineKind,
  EventDetail,
  EventInput,
  RoomInput,
} from '@shared/features/events/events.contract';
import { addDays, datesBetween, instantToLocal } from '@shared/lib/time';
import { grantRole, systemActor } from '@server/features/accounts/accounts.service';
import {
  replaceDayFrames,
  replaceDeadlines,
  replaceRooms,
} from '@server/features/events/events-frame.service';
import { changeEventState, createEvent } from '@server/features/events/events.service';
import { replaceFeeTable, type FeeTableInput } from '@server/features/finance/finance.service';
import type { Cast } from './10-accounts';

export const ZONE = 'Europe/Copenhagen';
export interface DemoDates {
  today: string;
  /** First days. */
  school: string;
  conference: string;
  workshop: string;
}

/** Dates live relative to today: the conference is running, the school lies ahead, the workshop is over. */
export function demoDates(now: Date): DemoDates {
  const today = instantToLocal(now, ZONE).date;
  const ahead = addDays(today, 69);
  const monday = addDays(ahead, (8 - new Date(`${ahead}T00:00:00Z`).getUTCDay()) % 7);
  return { today, school: monday, conference: addDays(today, -1), workshop: addDays(today, -60) };
}

const rooms: RoomInput[] = [
  {
    name: 'Great Hall',
    shortName: 'G',
    capacity: 180,
    features: ['blackboard', 'projector', 'camera', 'recording', 'hearingLoop', 'stepFree'],
  },
  {
    name: 'Ivar',
    shortName: 'I',
    capacity: 56,
    features: ['blackboard', 'projector', 'hearingLoop', 'stepFree'],
  },
  { name: 'Vey', shortName: 'V', capacity: 40, features: ['projector', 'stepFree'] },
];

export const base = { timeZone: ZONE, currency: 'EUR', venue: 'Lindgard House', town: 'Tarnholt' };
export const texts = (lead: string): EventInput['texts'] => ({
  lead,
  practical:
    'The institute stands by the lake, ten minutes on foot from the station. Lunch is served in the winter garden; the coffee is free. Every room has blackboards, chalk and a step-free way to the desk.',
  travel:
    'Trains leave the main line for Tarnholt every hour. From the harbour a bus runs until 22:40. Bicycles can be borrowed at the desk.',
  safeguarding: '',
});

type Frame = [
  startsAt: string,
  endsAt: string,
  kind: 'session' | 'coffee' | 'lunch' | 'social',
  minimal: number | null,
];
const schoolDay: Frame[] = [
  ['09:00', '10:00', 'session', null],
  ['10:00', '10:20', 'coffee', 10],
  ['10:20', '12:30', 'session', null],
  ['12:30', '14:00', 'lunch', 60],
  ['14:00', '15:30', 'session', null],
  ['15:30', '16:00', 'coffee', 15],
  ['16:00', '18:15', 'session', null],
];
export const conferenceDay: Frame[] = [
  ['09:00', '10:00', 'session', null],
  ['10:00', '10:30', 'coffee', 15],
  ['10:30', '12:30', 'session', null],
  ['12:30', '14:00', 'lunch', 60],
  ['14:00', '16:00', 'session', null],
  ['16:00', '16:30', 'coffee', 15],
  ['16:30', '18:00', 'session', null],
];

export async function build(
  cast: Cast,
  slug: string,
  input: EventInput,
  frames: Frame[],
  days: string[],
  deadlines: [DeadlineKind, string][],
  fees: FeeTableInput,
): Promise<EventDetail> {
  let event = await createEvent(systemActor, { slug, ...input });
  event = await replaceRooms(systemActor, slug, event.version, rooms);
  const blocks = days.flatMap((day) =>
    frames.map(([startsAt, endsAt, kind, minimalMinutes]) => ({
      day,
      startsAt,
      endsAt,
      kind,
      title: '',
      minimalMinutes,
    })),
  );
  event = await replaceDayFrames(systemActor, slug, event.version, blocks);
  event = await replaceDeadlines(
    systemActor,
    slug,
    event.version,
    deadlines.map(([kind, date]) => ({ kind, date, time: '23:59' })),
  );
  await replaceFeeTable(systemActor, slug, fees);
  await grantRole({
    accountId: cast.by.organiser.id,
    role: 'organiser',
    scope: 'event',
    scopeId: event.id,
    by: systemActor,
  });
  await grantRole({
    accountId: cast.by.reviewer.id,
    role: 'reviewer',
    scope: 'event',
    scopeId: event.id,
    by: systemActor,
  });
  await grantRole({
    accountId: cast.by.desk.id,
    role: 'desk',
    scope: 'event',
    scopeId: event.id,
    by: systemActor,
  });
  return changeEventState(systemActor, slug, 'announced');
}

export const category = (
  name: string,
  stages: FeeTableInput['categories'][number]['stages'],
  earlyMinor: number,
  regularMinor: number,
  earlyUntil: string,
) => ({ name, stages, earlyMinor, earlyUntil, regularMinor, taxBasisPoints: 0 });
const extra = (name: string, priceMinor: number, capacity: number | null, hint: string) => ({
  name,
  priceMinor,
  capacity,
  until: null,
  taxBasisPoints: 0,
  hint,
});

export async function seedEvents(
  cast: Cast,
  dates: DemoDates,
  scale: number,
): Promise<{ school: EventDetail; conference: EventDetail; workshop: EventDetail }> {
  const schoolEnd = addDays(dates.school, 11);
  const weekdays = datesBetween(dates.school, schoolEnd).filter(
    (day) => ![0, 6].includes(new Date(`${day}T00:00:00Z`).getUTCDay()),
  );
  const before = (days: number): string => addDays(dates.school, -days);
  const school = await build(
    cast,
    'tilings-and-knots',
    {
      ...base,
      kind: 'summer_school',
      title: 'Summer School on Tilings, Knots and Discrete Geometry',
      shortTitle: 'Tilings, Knots, Discrete Geometry',
      startsOn: dates.school,
      endsOn: schoolEnd,
      capacity: 120 * scale,
      admission: 'application',
      contactEmail: 'school@tarnholt.example.org',
      admitsMinors: false,
      texts: texts(
        'Two weeks, eight lecture courses, exercises every afternoon. For doctoral students, postdocs and everyone who would like to know why a tile that cannot repeat and a knot that cannot be undone lead to the same algebra.',
      ),
    },
    schoolDay,
    weekdays,
    [
      ['registration_opens', before(217)],
      ['applications_due', before(90)],
      ['abstracts_due', before(40)],
      ['grants_due', before(77)],
      ['grants_decided', before(67)],
      ['programme_final', before(52)],
      ['registration_closes', before(24)],
      ['slides_due', before(7)],
      ['claims_due', addDays(schoolEnd, 60)],
    ],
    {
      taxNote: 'No tax: education.',
      categories: [
        category('student or doctoral', ['student', 'doctoral'], 15_000, 21_000, before(66)),
        category('postdoc', ['postdoc'], 24_000, 33_000, before(66)),
        category('others', [], 30_000, 42_000, before(66)),
      ],
      extras: [
        extra('Shared room, 11 nights', 41_800, 60, 'Lindgard House, breakfast included'),
        extra('Lunches, 10', 9_500, null, 'Mon to Fri, both weeks'),
        extra('Walk to the Varde lighthouse', 2_400, 80, 'Wednesday afternoon, with dinner'),
      ],
    },
  );
  const conferenceEnd = addDays(dates.conference, 4);
  const conference = await build(
    cast,
    'combinatorial-structures',
    {
      ...base,
      kind: 'conference',
      title: 'Conference on Combinatorial Structures',
      shortTitle: 'Combinatorial Structures',
      startsOn: dates.conference,
      endsOn: conferenceEnd,
      capacity: 90 * scale,
      admission: 'open',
      contactEmail: 'structures@tarnholt.example.org',
      admitsMinors: false,
      texts: texts(
        'Five days on graphs, posets, matroids and everything that can be counted. Invited talks in the mornings, contributed talks in the afternoons, one long walk.',
      ),
    },
    conferenceDay,
    datesBetween(dates.conference, conferenceEnd),
    [
      ['registration_opens', addDays(dates.conference, -150)],
      ['abstracts_due', addDays(dates.conference, -70)],
      ['programme_final', addDays(dates.conference, -20)],
      ['registration_closes', addDays(dates.conference, 2)],
      ['slides_due', addDays(dates.conference, -3)],
      ['claims_due', addDays(conferenceEnd, 45)],
    ],
    {
      taxNote: 'No tax: education.',
      categories: [
        category(
          'student or doctoral',
          ['student', 'doctoral'],
          8_000,
          12_000,
          addDays(dates.conference, -45),
        ),
        category('others', [], 16_000, 22_000, addDays(dates.conference, -45)),
      ],
      extras: [
        extra('Conference dinner', 6_500, 70, 'Thursday at the harbour'),
        extra('Lunches, 5', 4_750, null, ''),
      ],
    },
  );
  const workshopEnd = addDays(dates.workshop, 2);
  const workshop = await build(
    cast,
    'lattice-points',
    {
      ...base,
      kind: 'workshop',
      title: 'Workshop on Lattice Points',
      shortTitle: 'Lattice Points',
      startsOn: dates.workshop,
      endsOn: workshopEnd,
      capacity: 40 * scale,
      admission: 'open',
      contactEmail: 'lattice@tarnholt.example.org',
      admitsMinors: false,
      texts: texts('Three days for forty people who count points: in strips, on spheres, near helices.'),
    },
    conferenceDay,
    datesBetween(dates.workshop, workshopEnd),
    [
      ['registration_opens', addDays(dates.workshop, -120)],
      ['abstracts_due', addDays(dates.workshop, -50)],
      ['registration_closes', addDays(dates.workshop, -5)],
      ['claims_due', addDays(dates.today, 20)],
    ],
    {
      taxNote: 'No tax: education.',
      categories: [category('everybody', [], 5_000, 7_000, addDays(dates.workshop, -60))],
      extras: [extra('Dinner by the lake', 4_200, 40, '')],
    },
  );
  return { school, conference, workshop };
}
