import { useLocation } from 'react-router-dom';
import type { DeadlineKind, EventDetail } from '@shared/features/events/events.contract';
import { deadlineNames } from '@shared/features/events/events.rules';
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
    <RunUpLine
      from={addDays(dates[0] as string, -7)}
      to={addDays(dates[dates.length - 1] as string, 7)}
      today={now.date}
      tall={section === ''}
      marks={marks}
      event={{
        startsOn: event.startsOn,
        endsOn: event.endsOn,
        label: `${event.shortTitle.slice(0, 24)}, ${formatDateSpan(event.startsOn, event.endsOn, false)}`,
        href: `/organise/${event.slug}`,
      }}
      sentence={sentence(event, now, section)}
    />
  );
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
