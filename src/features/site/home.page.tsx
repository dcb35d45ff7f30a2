import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { eventKindNames, eventStateNames } from '@shared/features/events/events.rules';
import { formatDateSpan } from '@shared/lib/time';
import { PageTitle } from '@/lib/page-title';
import { EmptyState, QueryView } from '@/components/states';
import { MathLine } from '@/components/math-text';
import { LinkButton } from '@/components/button';
import { holds, useAccount } from '@/features/accounts/accounts.queries';
import { myEventsQuery } from '@/features/events/events.queries';
import { myRegistrationsQuery } from '@/features/registration/registration.queries';
import { myTalksQuery } from '@/features/talks/talks.queries';

/** What is one's own: events to work on, talks, registrations, funds. */
export function Component() {
  const account = useAccount();
  const office = holds(account, 'administrator');
  const funds = account?.grants.filter((grant) => grant.role === 'funder' && grant.scopeId) ?? [];
  return (
    <div className="mx-auto max-w-[960px] px-6 py-8 max-md:px-4">
      <PageTitle text="Home" />
      <div className="mb-6 flex flex-wrap items-center gap-4">
        <h1 className="m-0 font-serif text-page font-medium">{account?.printedName}</h1>
        <div className="ml-auto flex flex-wrap gap-4 text-form">
          <Link to="/my-calendar">My calendar</Link>
          <Link to="/">All events</Link>
          {office && <Link to="/office/accounts">Event office</Link>}
          {office && <LinkButton to="/organise/new">Create event</LinkButton>}
        </div>
      </div>
      <Work />
      {funds.length > 0 && (
        <Section title="Funds">
          {funds.map((grant) => (
            <li key={grant.scopeId} className="border-b border-rule py-2.5">
              <Link className="font-serif text-[17px]" to={`/funds/${grant.scopeId}`}>
                {grant.scopeTitle ?? 'A fund'}
              </Link>
            </li>
          ))}
        </Section>
      )}
      <Talks />
      <Registrations />
    </div>
  );
}

function Section({ title, children }: { title: string; children: React.ReactNode }) {
  return (
    <section className="mb-9">
      <h2 className="m-0 border-b-[1.75px] border-ink pb-1.5 text-form font-semibold">{title}</h2>
      <ul className="m-0 list-none p-0">{children}</ul>
    </section>
  );
}

const facts = 'ml-auto text-form text-ink2 max-sm:ml-0 max-sm:w-full';
const row = 'flex flex-wrap items-baseline gap-x-4 border-b border-rule py-2.5';

/** The desk helper starts at the desk, the reviewer at the grants, everybody else at the overview. */
function startOf(slug: string, roles: string[]): string {
  if (roles.some((role) => ['administrator', 'organiser', 'finance'].includes(role)))
    return `/organise/${slug}`;
  return `/organise/${slug}/${roles.includes('reviewer') ? 'grants' : 'desk'}`;
}

function Work() {
  const query = useQuery(myEventsQuery);
  return (
    <QueryView query={query} what="your events">
      {({ items }) =>
        items.length > 0 && (
          <Section title="Events I work on">
            {items.map((event) => (
              <li key={event.id} className={row}>
                <Link className="font-serif text-[17px]" to={startOf(event.slug, event.roles)}>
                  {event.title}
                </Link>
                <span className={facts}>
                  {eventKindNames[event.kind]}, {formatDateSpan(event.startsOn, event.endsOn)},{' '}
                  {eventStateNames[event.state].toLowerCase()}
                </span>
              </li>
            ))}
          </Section>
        )
      }
    </QueryView>
  );
}

function Talks() {
  const query = useQuery(myTalksQuery);
  return (
    <QueryView query={query} what="your talks">
      {({ items }) =>
        items.length > 0 && (
          <Section title="My talks">
            {items.map((talk) => (
              <li key={talk.id + talk.part} className={row}>
                <span className="text-form text-ink2">{talk.label}</span>
                <Link className="font-serif text-[17px]" to={`/events/${talk.eventSlug}/my-talks/${talk.id}`}>
                  {talk.title ? <MathLine source={talk.title} /> : 'Without a title'}
                </Link>
                <span className={facts}>
                  {talk.eventTitle}, {talk.state}
                  {talk.part === 'speaker' && talk.state !== 'withdrawn' && !talk.abstractAt && (
                    <strong className="ml-2 font-semibold text-alarm">abstract missing</strong>
                  )}
                </span>
              </li>
            ))}
          </Section>
        )
      }
    </QueryView>
  );
}

function Registrations() {
  const query = useQuery(myRegistrationsQuery);
  return (
    <QueryView query={query} what="your registrations">
      {({ items }) => (
        <Section title="My registrations">
          {items.length === 0 && (
            <li className="py-3">
              <EmptyState title="No registration yet" fact="Choose an event and register there." />
            </li>
          )}
          {items.map((item) => (
            <li key={item.eventSlug} className={row}>
              <Link className="font-serif text-[17px]" to={`/events/${item.eventSlug}/registration`}>
                {item.eventTitle}
              </Link>
              <span className={facts}>
                {formatDateSpan(item.startsOn, item.endsOn)}, {item.town}, {item.state}
              </span>
            </li>
          ))}
        </Section>
      )}
    </QueryView>
  );
}
