import { useQuery } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import type { PublicEvent } from '@shared/features/site/site.contract';
import { dayToShow } from '@shared/features/site/site.rules';
import { eventKindNames } from '@shared/features/events/events.rules';
import { formatDate, formatDateSpan, formatInstant, instantToLocal } from '@shared/lib/time';
import { PageTitle } from '@/lib/page-title';
import { LinkButton } from '@/components/button';
import { EmptyState, QueryView } from '@/components/states';
import { programmeOf } from '@/features/programme/programme.queries';
import { DayProgramme } from './day-programme';
import { EventDates } from './event-dates';
import { FigurePlate } from './figure-plate';
import { Paragraphs } from './paragraphs';
import { PublicView } from './public-view';
import { publicEventQuery } from './site.queries';

/** The public page of an event. */
export function Component() {
  const { event: slug = '' } = useParams();
  const query = useQuery(publicEventQuery(slug));
  return (
    <PublicView query={query} what="the event">
      {(event) => (
        <>
          <PageTitle text={event.title} />
          <Cover event={event} />
          <div className="grid grid-cols-[312px_1fr_260px] gap-11 px-12 py-7 max-xl:grid-cols-[1fr_260px] max-md:grid-cols-1 max-md:gap-8 max-md:px-4">
            <Courses event={event} />
            <OneDay event={event} />
            <section>
              <h2 className="m-0 mb-2 text-form font-semibold">Dates</h2>
              <EventDates event={event} />
            </section>
          </div>
          <Practical event={event} />
        </>
      )}
    </PublicView>
  );
}

function Cover({ event }: { event: PublicEvent }) {
  return (
    <div className="grid grid-cols-[1fr_42%] max-lg:grid-cols-1">
      <div className="px-12 py-12 max-md:px-4 max-md:py-6">
        <p className="m-0 mb-2 text-[17px] leading-6 text-ink2">
          {eventKindNames[event.kind]}, {formatDateSpan(event.startsOn, event.endsOn)}, {event.town}
        </p>
        <h1 className="m-0 max-w-[15em] font-serif text-cover font-medium tracking-[-0.01em] max-md:text-[36px] max-md:leading-[40px]">
          {event.title}
        </h1>
        <Paragraphs text={event.lead} className="my-6 max-w-[40em] font-serif text-[19px] leading-7" />
        <RegisterAction event={event} />
      </div>
      <FigurePlate title={event.title} className="min-h-[452px] max-lg:min-h-[220px]" />
    </div>
  );
}

function RegisterAction({ event }: { event: PublicEvent }) {
  const { open, admission, closedBecause, feeRule } = event.registration;
  const [first, ...rest] = feeRule;
  return (
    <div className="flex flex-wrap items-center gap-x-6 gap-y-3">
      {open && (
        <LinkButton variant="primary" sizing="large" to={`/events/${event.slug}/register`}>
          {admission === 'application' ? 'Apply' : 'Register'}
        </LinkButton>
      )}
      {!open && admission === 'application' && event.state === 'open' && (
        <LinkButton sizing="large" to={`/events/${event.slug}/register`}>
          Register with an offer
        </LinkButton>
      )}
      <div className="text-[15px] leading-5">
        {closedBecause && <p className="m-0 font-semibold">{closedBecause}</p>}
        <p className="m-0 font-semibold">{first}</p>
        <p className="m-0 text-ink2">{rest.join(' ')}</p>
      </div>
    </div>
  );
}

function Courses({ event }: { event: PublicEvent }) {
  if (event.courses.length === 0)
    return (
      <section className="max-xl:col-span-full">
        <AboutPlace event={event} />
      </section>
    );
  return (
    <section className="max-xl:col-span-full">
      <h2 className="m-0 mb-2 text-form font-semibold">Lecture courses</h2>
      <table className="ruled" aria-label="Lecture courses">
        <tbody>
          {event.courses.map((course) => (
            <tr key={course.letter}>
              <td className="w-6 pr-2 font-serif text-[18px] text-ecourse">{course.letter}</td>
              <td className="pr-0">
                <div className="font-serif text-[17px] leading-6 font-medium">{course.title}</div>
                <div className="text-ui text-ink2">
                  {course.lecturers
                    .map((person) => `${person.printedName}, ${person.affiliation}`)
                    .join('; ')}
                </div>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
}

function AboutPlace({ event }: { event: PublicEvent }) {
  return (
    <>
      <h2 className="m-0 mb-2 border-b-[1.75px] border-ink pb-2 text-form font-semibold">Place</h2>
      <p className="my-2 font-serif text-abstract">
        {event.venue}, {event.town}
      </p>
      <Paragraphs text={event.travel} className="my-2 font-serif text-abstract" />
    </>
  );
}

function OneDay({ event }: { event: PublicEvent }) {
  const programme = useQuery(programmeOf(event.slug));
  const today = instantToLocal(new Date(), event.timeZone).date;
  return (
    <section className="min-w-0">
      <QueryView query={programme} what="the programme">
        {({ talks, revision }) => {
          const day = dayToShow(talks, today);
          if (!day || !revision)
            return (
              <EmptyState
                title="The programme is not published yet"
                fact="It stands here as soon as it is."
              />
            );
          const shown = talks.filter((talk) => talk.day === day);
          return (
            <>
              <div className="mb-2 flex flex-wrap items-baseline gap-x-4">
                <h2 className="m-0 text-form font-semibold">{formatDate(day)}</h2>
                <span className="text-[14px] text-ink2">
                  revision {revision.number}, of{' '}
                  {formatDate(instantToLocal(revision.publishedAt, event.timeZone).date, { weekday: false })}
                </span>
                <Link className="ml-auto text-[14px]" to={`/events/${event.slug}/programme`}>
                  Whole programme
                </Link>
              </div>
              <DayProgramme
                slug={event.slug}
                talks={shown}
                zone={event.timeZone}
                label={`Programme of ${formatDate(day)}`}
              />
            </>
          );
        }}
      </QueryView>
    </section>
  );
}

function Practical({ event }: { event: PublicEvent }) {
  const items: [string, string][] = [
    ['Practical matters', event.practical],
    ['Getting here', event.courses.length > 0 ? event.travel : ''],
    ['Safeguarding', event.safeguarding],
  ];
  return (
    <div
      id="practical"
      className="grid grid-cols-3 gap-11 border-t border-rule px-12 py-7 max-lg:grid-cols-1 max-md:px-4"
    >
      {items
        .filter(([, text]) => text.trim() !== '')
        .map(([title, text]) => (
          <section key={title}>
            <h2 className="m-0 mb-1 text-form font-semibold">{title}</h2>
            <Paragraphs text={text} className="my-2 max-w-[60ch] font-serif text-abstract" />
          </section>
        ))}
      <section>
        <h2 className="m-0 mb-1 text-form font-semibold">Take part</h2>
        <ul className="m-0 list-none p-0 text-form leading-7">
          {event.callUntil && (
            <li>
              <Link to={`/events/${event.slug}/submit`}>Submit an abstract</Link> until{' '}
              {formatInstant(event.callUntil, event.timeZone)}
            </li>
          )}
          {event.grantsUntil && (
            <li>
              <Link to={`/events/${event.slug}/grant`}>Ask for a travel grant</Link> until{' '}
              {formatInstant(event.grantsUntil, event.timeZone)}
            </li>
          )}
          {event.revision !== null && (
            <li>
              <a href={`/calendars/events/${event.slug}.ics`}>Subscribe to the programme</a> in your calendar
            </li>
          )}
          <li>
            Questions: <a href={`mailto:${event.contactEmail}`}>{event.contactEmail}</a>
          </li>
        </ul>
      </section>
    </div>
  );
}
