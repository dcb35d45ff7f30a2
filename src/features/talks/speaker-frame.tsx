import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { NavLink } from 'react-router-dom';
import { deadlineNames } from '@shared/features/events/events.rules';
import type { Stage } from '@shared/features/talks/talks-stay.contract';
import { plainLatex } from '@shared/lib/latex';
import { count, excerpt } from '@shared/lib/text';
import { addDays, daysBetween, formatDate, formatDateSpan, instantToLocal } from '@shared/lib/time';
import { RunUpLine } from '@/components/run-up-line';
import { QueryView } from '@/components/states';
import { myTalksQuery, stageQuery } from './talks.queries';

const tab = ({ isActive }: { isActive: boolean }): string =>
  `quiet flex min-h-10 items-center border-b-[3px] px-1 whitespace-nowrap ${isActive ? 'border-ink font-semibold text-ink' : 'border-transparent text-ink2'}`;

/** The event's name, the speaker's own pages and the run-up line above them. */
export function SpeakerFrame({ event, children }: { event: string; children: (stage: Stage) => ReactNode }) {
  const stage = useQuery(stageQuery(event));
  const mine =
    useQuery(myTalksQuery).data?.items.filter(
      (talk) =>
        talk.eventSlug === event &&
        talk.part === 'speaker' &&
        !['declined', 'withdrawn'].includes(talk.state),
    ) ?? [];
  const sameLabel = (label: string): boolean => mine.filter((talk) => talk.label === label).length > 1;
  return (
    <QueryView query={stage} what="the event">
      {(data) => (
        <>
          <div className="flex flex-wrap items-center gap-x-6 border-b border-rule bg-sheet px-6 max-sm:px-4">
            <span className="py-1 font-serif text-[16px]">{data.title}</span>
            <nav aria-label="Your part" className="flex max-w-full gap-4 overflow-x-auto">
              {mine.slice(0, 8).map((talk) => (
                <NavLink key={talk.id} className={tab} to={`/events/${event}/my-talks/${talk.id}`}>
                  {mine.length === 1
                    ? 'My talk'
                    : sameLabel(talk.label)
                      ? excerpt(plainLatex(talk.title), 26)
                      : talk.label}
                </NavLink>
              ))}
              <NavLink className={tab} to={`/events/${event}/my-travel`}>
                My travel
              </NavLink>
              <NavLink className={tab} to={`/events/${event}/programme`}>
                Programme
              </NavLink>
            </nav>
          </div>
          <Line stage={data} talk={mine[0]?.id} />
          {children(data)}
        </>
      )}
    </QueryView>
  );
}

/** Deadlines that concern a speaker. */
function Line({ stage, talk }: { stage: Stage; talk: string | undefined }) {
  const today = instantToLocal(new Date(), stage.timeZone).date;
  const own = stage.deadlines.filter((deadline) =>
    ['abstracts_due', 'slides_due', 'programme_final'].includes(deadline.kind),
  );
  const dates = [today, stage.startsOn, stage.endsOn, ...own.map((deadline) => deadline.date)].sort();
  const next = own.filter((deadline) => deadline.date >= today).sort((a, b) => a.at.localeCompare(b.at))[0];
  const to = talk ? `/events/${stage.slug}/my-talks/${talk}` : `/events/${stage.slug}/my-travel`;
  return (
    <RunUpLine
      from={addDays(dates[0] as string, -7)}
      to={addDays(dates[dates.length - 1] as string, 7)}
      today={today}
      marks={own.map((deadline) => ({
        date: deadline.date,
        label: deadlineNames[deadline.kind],
        href: to,
        own: true,
      }))}
      event={{
        startsOn: stage.startsOn,
        endsOn: stage.endsOn,
        label: formatDateSpan(stage.startsOn, stage.endsOn, false),
        href: to,
      }}
      sentence={`${formatDate(today)}.${next ? ` ${deadlineNames[next.kind]} in ${count(daysBetween(today, next.date), 'day')}.` : ''}`}
    />
  );
}
