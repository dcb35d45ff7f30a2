import { dayName } from '@shared/features/programme/timetable/words';
import { count } from '@shared/lib/text';
import { addDays, instantToLocal } from '@shared/lib/time';
import { Sign } from '@/components/sign';
import type { Column } from './calendar-columns';
import type { Composer } from './use-composer';

/** Head of a column: the day moves the lens; below it the room of the lane, or all rooms in their order. */
export function DayHead({
  composer,
  column,
  lens,
  onLens,
}: {
  composer: Composer;
  column: Column;
  lens: boolean;
  onLens: (day: number) => void;
}) {
  const { problem, clashes, at } = composer;
  const [weekday = '', number = '', month = ''] = dayName(problem, column.day).split(' ');
  const here = clashes.filter((clash) => clash.items.some((item) => at.get(item)?.day === column.day)).length;
  const { startsOn, timeZone } = composer.draft.event;
  const isToday = addDays(startsOn, column.day) === instantToLocal(new Date(), timeZone).date;
  const room = problem.rooms.find((one) => one.id === column.room);
  return (
    <div className="day-head">
      {column.first ? (
        <button type="button" className="day-name" aria-pressed={lens} onClick={() => onLens(column.day)}>
          <strong>
            {weekday} {number}
          </strong>
          {lens && ` ${month}`}
          {isToday && <span className="sun-dot" role="img" aria-label="today" />}
          {here > 0 && (
            <span className="day-clashes">
              <Sign kind="must" label={count(here, 'clash', 'clashes')} /> {here}
            </span>
          )}
        </button>
      ) : (
        <span className="day-name" />
      )}
      <span className="day-rooms">
        {room ? (
          <>
            {room.name} <span className="text-ink3">{room.capacity}</span>
          </>
        ) : (
          problem.rooms.map((one) => <span key={one.id}>{one.shortName}</span>)
        )}
      </span>
    </div>
  );
}
