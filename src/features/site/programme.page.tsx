import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import type { PublicEvent } from '@shared/features/site/site.contract';
import type { PublicProgramme } from '@shared/features/programme/programme.contract';
import { formatDate, formatInstant, instantToLocal } from '@shared/lib/time';
import { PageTitle } from '@/lib/page-title';
import { Segmented, Select } from '@/components/field';
import { EmptyState, QueryView } from '@/components/states';
import { programmeOf } from '@/features/programme/programme.queries';
import { ownZone } from '@/lib/format';
import { DayProgramme } from './day-programme';
import { PublicView } from './public-view';
import { publicEventQuery } from './site.queries';

/** The published programme by day and room, in the event's time or the reader's. */
export function Component() {
  const { event: slug = '' } = useParams();
  const event = useQuery(publicEventQuery(slug));
  const programme = useQuery(programmeOf(slug));
  return (
    <div className="px-12 py-8 max-md:px-4">
      <PublicView query={event} what="the event">
        {(shown) => (
          <QueryView query={programme} what="the programme">
            {(published) => <Programme event={shown} programme={published} />}
          </QueryView>
        )}
      </PublicView>
    </div>
  );
}

type Zone = 'event' | 'own';

function Programme({ event, programme }: { event: PublicEvent; programme: PublicProgramme }) {
  const [choice, setChoice] = useState<Zone>('event');
  const [room, setRoom] = useState('');
  const zone = choice === 'own' ? ownZone() : event.timeZone;
  const talks = programme.talks.filter((talk) => room === '' || talk.roomId === room);
  const dayIn = (startsAt: string): string => instantToLocal(startsAt, zone).date;
  const days = [...new Set(talks.map((talk) => dayIn(talk.startsAt)))].sort();
  return (
    <>
      <PageTitle text={`Programme: ${event.title}`} />
      <h1 className="m-0 font-serif text-page font-medium">{event.title}</h1>
      {programme.revision ? (
        <p className="mt-1 mb-5 text-form text-ink2">
          Programme, revision {programme.revision.number} of{' '}
          {formatInstant(programme.revision.publishedAt, event.timeZone)}.{' '}
          {choice === 'own' ? `Times in your zone, ${zone.replace(/_/g, ' ')}.` : `Times of ${event.town}.`}
        </p>
      ) : (
        <EmptyState title="The programme is not published yet" fact="It stands here as soon as it is." />
      )}
      {programme.revision && (
        <div className="no-print mb-6 flex flex-wrap items-end gap-5">
          {ownZone() !== event.timeZone && (
            <Segmented<Zone>
              label="Times"
              options={[
                { value: 'event', label: `${event.town} time` },
                { value: 'own', label: 'My time' },
              ]}
              value={choice}
              onChange={setChoice}
            />
          )}
          <Select
            label="Room"
            value={room}
            onChange={(change) => setRoom(change.target.value)}
            options={[
              { value: '', label: 'All rooms' },
              ...programme.rooms.map(({ id, name }) => ({ value: id, label: name })),
            ]}
          />
          <a href={`/calendars/events/${event.slug}${room ? `/rooms/${room}` : ''}.ics`}>
            Subscribe in your calendar
          </a>
        </div>
      )}
      {programme.revision && days.length === 0 && (
        <EmptyState title="Nothing is placed in this room" fact="Choose another room." />
      )}
      {days.map((day) => (
        <section key={day} id={day} className="mb-9 break-inside-avoid">
          <h2 className="m-0 mb-2 text-form font-semibold">{formatDate(day)}</h2>
          <DayProgramme
            slug={event.slug}
            talks={talks.filter((talk) => dayIn(talk.startsAt) === day)}
            zone={zone}
            label={`Programme of ${formatDate(day)}`}
          />
        </section>
      ))}
    </>
  );
}
