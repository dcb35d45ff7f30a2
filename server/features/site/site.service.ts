import type {
  PublicEvent,
  PublicEventSummary,
  PublicPeople,
  PublicRegistration,
  PublicTalkPage,
} from '@shared/features/site/site.contract';
import { bySeason, feeRule, feesOn } from '@shared/features/site/site.rules';
import { closedBecause } from '@shared/features/registration/registration.rules';
import { notFound } from '@shared/http/problem';
import { foldCase } from '@shared/lib/text';
import { localToInstant } from '@shared/lib/time';
import { accountsById } from '@server/features/accounts/accounts.service';
import { deadlinesOf, publicEvents, requireEvent, todayAt } from '@server/features/events/events.service';
import { feeTableOf } from '@server/features/finance/finance.service';
import { fundsOf } from '@server/features/grants/grants-cases.service';
import { publishedProgramme } from '@server/features/programme/programme.service';
import { placesOf } from '@server/features/registration/registration.service';
import { readCall } from '@server/features/talks/talks-abstract.service';
import { coursesOf, requireTalk, talksForProgramme } from '@server/features/talks/talks.service';

type EventRow = Awaited<ReturnType<typeof requireEvent>>;
type Deadlines = PublicEvent['dates'];
type Part = PublicPeople['items'][number]['talks'][number]['part'];

/** Names and affiliations are public with the published programme; nothing else of a person is. */
const printed = (person: { printedName: string; affiliation: string } | undefined) => ({
  printedName: person?.printedName ?? 'Unknown',
  affiliation: person?.affiliation ?? '',
});

const summaryOf = (row: EventRow): PublicEventSummary => ({
  slug: row.slug,
  kind: row.kind,
  title: row.title,
  startsOn: row.startsOn,
  endsOn: row.endsOn,
  timeZone: row.timeZone,
  venue: row.venue,
  town: row.town,
  state: row.state,
  lead: row.texts.lead,
});

/** @throws 404 for a draft as for an address that does not exist. */
async function announced(slug: string): Promise<EventRow> {
  const event = await requireEvent(slug);
  if (event.state === 'draft') throw notFound('This event');
  return event;
}

/** All announced events, the running and coming ones first. */
export async function listPublicEvents(): Promise<PublicEventSummary[]> {
  return (await publicEvents()).map(summaryOf).sort(bySeason);
}

async function datesOf(event: EventRow): Promise<Deadlines> {
  const rows = (await deadlinesOf(event.id)).map(({ kind, date, time }) => ({
    kind,
    date,
    time,
    at: localToInstant(date, time, event.timeZone),
  }));
  return rows.sort((a, b) => a.at.localeCompare(b.at));
}

async function registrationFor(event: EventRow, dates: Deadlines, now: Date): Promise<PublicRegistration> {
  const [fees, places] = await Promise.all([feeTableOf(event.id), placesOf(event.id, now)]);
  const today = todayAt(event, now);
  const at = (kind: string): string | null => dates.find((row) => row.kind === kind)?.at ?? null;
  const facts = {
    eventState: event.state,
    timeZone: event.timeZone,
    opensAt: at('registration_opens'),
    closesAt: at('registration_closes'),
    feeCategories: fees.categories.length,
    application: null,
  };
  // Whoever applies is let in by the office later: the public door asks only whether anything is taken now.
  const closed =
    closedBecause({ ...facts, admission: 'open' }, now) ??
    applicationsClosed(event, at('applications_due'), now);
  const amounts = feesOn(fees.categories, today);
  return {
    open: closed === null,
    admission: event.admission,
    closedBecause: closed,
    feeRule: isOver(event)
      ? []
      : feeRule({
          categories: fees.categories,
          currency: fees.currency,
          town: event.town,
          today,
          capacity: places.capacity,
          free: places.free,
        }),
    currency: fees.currency,
    feeNow: amounts.length > 0 ? { leastMinor: Math.min(...amounts), mostMinor: Math.max(...amounts) } : null,
    capacity: places.capacity,
    free: places.free,
  };
}

const isOver = (event: EventRow): boolean => event.state === 'finished' || event.state === 'archived';

const applicationsClosed = (event: EventRow, dueAt: string | null, now: Date): string | null =>
  event.admission === 'application' && dueAt !== null && now.toISOString() > dueAt
    ? 'Applications are closed. Whoever has an offer can register.'
    : null;

async function coursesFor(eventId: string): Promise<PublicEvent['courses']> {
  const [courses, talks] = await Promise.all([coursesOf(eventId), talksForProgramme(eventId)]);
  const lectures = talks.filter((talk) => talk.kind === 'course_lecture' && talk.state === 'accepted');
  const speakers = (courseId: string): string[] => [
    ...new Set(
      lectures
        .filter((talk) => talk.courseId === courseId)
        .flatMap((talk) => talk.people.filter((one) => one.part === 'speaker').map((one) => one.accountId)),
    ),
  ];
  const people = await accountsById(courses.flatMap((course) => speakers(course.id)));
  return courses.map((course) => ({
    letter: course.letter,
    title: course.title,
    lecturers: speakers(course.id).map((id) => printed(people.get(id))),
  }));
}

/** The public page of an event. @throws 404. */
export async function readPublicEvent(slug: string, now: Date): Promise<PublicEvent> {
  const event = await announced(slug);
  const dates = await datesOf(event);
  const [registration, courses, call, funds, programme] = await Promise.all([
    registrationFor(event, dates, now),
    coursesFor(event.id),
    readCall(slug, now),
    fundsOf(event.id),
    publishedProgramme(event.id),
  ]);
  const grantsDue = dates.find((row) => row.kind === 'grants_due')?.at ?? null;
  const asks = funds.length > 0 && grantsDue !== null && now.toISOString() <= grantsDue;
  return {
    ...summaryOf(event),
    shortTitle: event.shortTitle,
    practical: event.texts.practical,
    travel: event.texts.travel,
    safeguarding: event.texts.safeguarding,
    contactEmail: event.contactEmail,
    courses,
    dates,
    registration,
    callUntil: call.open ? call.until : null,
    grantsUntil: asks ? grantsDue : null,
    revision: programme?.number ?? null,
    people: new Set(
      programme?.placements.flatMap((placement) => placement.people.map((one) => one.accountId)),
    ).size,
  };
}

/** A talk as it was published, with its abstract once that is handed in. @throws 404 for what is not in the programme. */
export async function readPublicTalk(slug: string, talkId: string): Promise<PublicTalkPage> {
  const event = await announced(slug);
  const placement = (await publishedProgramme(event.id))?.placements.find((one) => one.talkId === talkId);
  if (!placement) throw notFound('This talk');
  const { talk } = await requireTalk(event.id, talkId);
  const people = await accountsById(placement.people.map((one) => one.accountId));
  const handedIn = talk.abstractAt !== null;
  return {
    id: talkId,
    event: summaryOf(event),
    kind: talk.kind,
    word: placement.word,
    title: placement.title,
    people: placement.people.map(({ accountId, part }) => ({
      ...printed(people.get(accountId)),
      part: part as Part,
    })),
    coAuthors: handedIn ? talk.coAuthors : [],
    abstract: handedIn ? talk.abstract : '',
    msc: handedIn ? talk.msc : [],
    references: handedIn ? talk.references : [],
    placement: { startsAt: placement.startsAt, endsAt: placement.endsAt, roomName: placement.roomName },
  };
}

/** Everybody with a part in the published programme, by printed family name. @throws 404. */
export async function listPublicPeople(slug: string): Promise<PublicPeople> {
  const event = await announced(slug);
  const placements = (await publishedProgramme(event.id))?.placements ?? [];
  const talks = new Map<string, PublicPeople['items'][number]['talks']>();
  for (const { talkId, word, title, people } of placements) {
    for (const { accountId, part } of people) {
      const own = talks.get(accountId) ?? [];
      own.push({ id: talkId, word, title, part: part as Part });
      talks.set(accountId, own);
    }
  }
  const people = [...(await accountsById([...talks.keys()])).values()].sort(
    (a, b) =>
      foldCase(a.familyName).localeCompare(foldCase(b.familyName)) ||
      foldCase(a.givenName).localeCompare(foldCase(b.givenName)),
  );
  return {
    event: summaryOf(event),
    items: people.map((person) => ({ ...printed(person), talks: talks.get(person.id) ?? [] })),
  };
}
