import { useLocation } from 'react-router-dom';
import type { DeadlineKind, EventDetail } from '@shared/features/events/events.contract';
import { deadlineNames, eventKindNames } from '@shared/features/events/events.rules';
import { count } from '@shared/lib/text';
import {
  addDays,
  daysBetween,
  formatDate,
  formatDateSpan,
  formatTime,
  instantToLocal,
} from '@shared/lib/time';
import { RunUpLine } from '@/components/run-up-line';

/** Section of the workspace that a deadline belongs to. */
const SECTION: Record<DeadlineKind, string> = {
  registration_opens: 'registrations',
  applications_due: 'registrations',
  abstracts_due: 'talks',
  grants_due: 'grants',
  grants_decided: 'grants',
  programme_final: 'programme',
  registration_closes: 'registrations',
  slides_due: 'talks',
  claims_due: 'grants',
};

/** The run-up line of an event's workspace: from a week before the first date to a week after the last. */
export function RunUp({ event }: { event: EventDetail }) {
  const section = useLocation().pathname.split('/')[3] ?? '';
  const now = instantToLocal(new Date(), event.timeZone);
  const dates = [event.startsOn, event.endsOn, ...event.deadlines.map((deadline) => deadline.date)].sort();
  const marks = event.deadlines.map((deadline) => ({
    date: deadline.date,
    label: deadlineNames[deadline.kind],
    href: `/organise/${event.slug}/${SECTION[deadline.kind]}`,
    own: section === SECTION[deadline.kind],
  }));
  return (
    <>
      <section
        aria-label="Next date"
        className="no-print border-b border-rule bg-paper px-4 py-1.5 text-dense md:hidden"
      >
        {nextDate(event, now.date)}
      </section>
      <RunUpLine
        from={addDays(dates[0] as string, -7)}
        to={addDays(dates[dates.length - 1] as string, 7)}
        today={now.date}
        tall={section === ''}
        marks={marks}
        event={{
          startsOn: event.startsOn,
          endsOn: event.endsOn,
          label: `${eventKindNames[event.kind]}, ${formatDateSpan(event.startsOn, event.endsOn, false)}`,
          href: `/organise/${event.slug}`,
        }}
        sentence={sentence(event, now, section)}
      />
    </>
  );
}

/** The phone has no line: what is due next, and when. */
function nextDate(event: EventDetail, today: string): string {
  const starts = { date: event.startsOn, label: eventKindNames[event.kind] };
  const next = [
    ...event.deadlines.map((deadline) => ({ date: deadline.date, label: deadlineNames[deadline.kind] })),
    starts,
  ]
    .filter((item) => item.date >= today)
    .sort((a, b) => a.date.localeCompare(b.date))[0];
  if (!next) return 'Nothing more is due.';
  const away = daysBetween(today, next.date);
  return `${formatDate(next.date, { short: true })}: ${next.label}, ${away === 0 ? 'today' : `in ${count(away, 'day')}`}.`;
}

function sentence(event: EventDetail, now: { date: string; time: string }, section: string): string {
  const days = daysBetween(now.date, event.startsOn);
  const next = event.deadlines
    .filter((deadline) => deadline.date >= now.date && (section === '' || SECTION[deadline.kind] === section))
    .sort((a, b) => a.at.localeCompare(b.at))[0];
  const due =
    next && section !== ''
      ? `${deadlineNames[next.kind]} in ${count(daysBetween(now.date, next.date), 'day')}`
      : undefined;
  const begins =
    now.date > event.endsOn
      ? 'The event is over'
      : days > 0
        ? `${count(days, 'day')} to the event`
        : `Day ${1 - days} of the event`;
  return `${formatDate(now.date)}, ${formatTime(now.time)}${section === '' ? ` in ${event.town}` : ''}. ${due ? `${due}. ` : ''}${begins}.`;
}
