import type { PublicEvent } from '@shared/features/site/site.contract';
import { deadlineNames } from '@shared/features/events/events.rules';
import { formatDate, instantToLocal } from '@shared/lib/time';

/** Deadlines in order, today with the sun's disc among them. */
export function EventDates({ event }: { event: PublicEvent }) {
  const today = instantToLocal(new Date(), event.timeZone).date;
  const rows = [
    ...event.dates.map((row) => ({ date: row.date, text: deadlineNames[row.kind], today: false })),
    { date: event.startsOn, text: 'First day', today: false },
    { date: event.endsOn, text: 'Last day', today: false },
    { date: today, text: formatDate(today, { year: true }), today: true },
  ].sort((a, b) => a.date.localeCompare(b.date) || Number(b.today) - Number(a.today));
  return (
    <table className="ruled text-[14px]" aria-label="Dates">
      <tbody>
        {rows.map((row) => (
          <tr key={row.text} className={row.today ? 'font-semibold' : row.date < today ? 'text-ink3' : ''}>
            <td className="w-24 whitespace-nowrap">
              {row.today ? (
                <>
                  <span
                    aria-hidden="true"
                    className="mr-1.5 inline-block h-[11px] w-[11px] rounded-full bg-sun"
                  />
                  Today
                </>
              ) : (
                <span className={row.date < today ? '' : 'font-semibold'}>
                  {formatDate(row.date, { short: true, weekday: false })}
                </span>
              )}
            </td>
            <td>{row.text}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
