import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { PublicEventSummary } from '@shared/features/site/site.contract';
import { eventKindNames, eventStateNames } from '@shared/features/events/events.rules';
import { formatDateSpan } from '@shared/lib/time';
import { PageTitle } from '@/lib/page-title';
import { EmptyState, QueryView } from '@/components/states';
import { FigurePlate } from './figure-plate';
import { publicEventsQuery } from './site.queries';

/** The list of events: what runs and what comes, then what is over. */
export function Component() {
  const query = useQuery(publicEventsQuery);
  return (
    <div className="px-12 py-10 max-md:px-4 max-md:py-6">
      <PageTitle text="Events" />
      <QueryView query={query} what="the events">
        {({ items }) => (
          <>
            <Group title="Running and to come" items={items.filter((event) => !isOver(event))} />
            <Group title="Past events" items={items.filter(isOver)} />
            {items.length === 0 && (
              <EmptyState
                title="No event is announced yet"
                fact="Events stand here as soon as they are announced."
              />
            )}
          </>
        )}
      </QueryView>
    </div>
  );
}

const isOver = (event: PublicEventSummary): boolean =>
  event.state === 'finished' || event.state === 'archived';

function Group({ title, items }: { title: string; items: PublicEventSummary[] }) {
  if (items.length === 0) return null;
  return (
    <section className="mb-12">
      <h1 className="mb-4 border-b-[1.75px] border-ink pb-2 font-sans text-form font-semibold">{title}</h1>
      <ul className="m-0 list-none p-0">
        {items.map((event) => (
          <li
            key={event.slug}
            className="grid grid-cols-[220px_1fr] gap-8 border-b border-rule py-6 max-md:grid-cols-1 max-md:gap-3"
          >
            <FigurePlate title={event.title} className="h-[150px] [&_figcaption]:sr-only" />
            <div>
              <p className="m-0 text-form text-ink2">
                {eventKindNames[event.kind]}, {formatDateSpan(event.startsOn, event.endsOn)}, {event.town}
                {event.state === 'running' && (
                  <strong className="ml-3 font-semibold text-good">{eventStateNames.running}</strong>
                )}
              </p>
              <h2 className="my-1 font-serif text-page font-medium">
                <Link className="quiet" to={`/events/${event.slug}`}>
                  {event.title}
                </Link>
              </h2>
              <p className="m-0 max-w-[70ch] font-serif text-abstract">{event.lead}</p>
            </div>
          </li>
        ))}
      </ul>
    </section>
  );
}
