import type { PresenceInput } from '@shared/features/talks/talks-stay.contract';
import { addDays, datesBetween, daysBetween, formatDate, minuteOf } from '@shared/lib/time';

type Window = Pick<PresenceInput, 'arrivesAt' | 'leavesAt' | 'blocked'>;

/** A stay over the days of an event, with a day before and after; times away are hatched. The fields beside it say the same in words. */
export function StayBar({ startsOn, endsOn, stay }: { startsOn: string; endsOn: string; stay: Window }) {
  const first = addDays(startsOn, -1);
  const days = datesBetween(first, addDays(endsOn, 1));
  const at = (local: string): number => {
    const share =
      (daysBetween(first, local.slice(0, 10)) + minuteOf(local.slice(11, 16)) / 1440) / days.length;
    return Math.min(100, Math.max(0, share * 100));
  };
  const from = stay.arrivesAt ? at(stay.arrivesAt) : 0;
  const to = stay.leavesAt ? at(stay.leavesAt) : 100;
  const known = Boolean(stay.arrivesAt ?? stay.leavesAt);
  const every = Math.ceil(days.length / 14);
  return (
    <div role="img" aria-label={sentence(stay)}>
      <div className="flex text-tile text-ink3" aria-hidden="true">
        {days.map((day, index) => (
          <span key={day} className="grow basis-0 text-center">
            {index % every === 0 ? Number(day.slice(8)) : ''}
          </span>
        ))}
      </div>
      <div className="relative flex h-[18px] border border-rule bg-sheet">
        {days.map((day) => (
          <span
            key={day}
            className={`grow basis-0 border-r border-rule last:border-r-0 ${day < startsOn || day > endsOn ? 'bg-wash' : ''}`}
          />
        ))}
        <span
          className={`absolute inset-y-[3px] ${known ? 'bg-ink2' : 'hatch border border-field'}`}
          style={{ left: `${from}%`, width: `${Math.max(0.5, to - from)}%` }}
        />
        {stay.blocked.map((away) => (
          <span
            key={away.from}
            className="hatch absolute inset-y-0 border border-alarm bg-sheet"
            style={{ left: `${at(away.from)}%`, width: `${Math.max(1, at(away.to) - at(away.from))}%` }}
          />
        ))}
      </div>
      <div className="flex justify-between text-tile text-ink3" aria-hidden="true">
        <span>{formatDate(days[0] as string)}</span>
        <span>{formatDate(days[days.length - 1] as string)}</span>
      </div>
    </div>
  );
}

const words = (local: string): string =>
  `${formatDate(local.slice(0, 10))}, ${local.slice(11, 16).replace(/^0/, '')}`;

function sentence(stay: Window): string {
  const arrives = stay.arrivesAt ? `Arrives ${words(stay.arrivesAt)}.` : 'Arrival not known.';
  const leaves = stay.leavesAt ? ` Leaves ${words(stay.leavesAt)}.` : ' Departure not known.';
  return (
    arrives +
    leaves +
    stay.blocked.map((away) => ` Away from ${words(away.from)} to ${words(away.to)}.`).join('')
  );
}
