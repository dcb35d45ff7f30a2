import { Link } from 'react-router-dom';
import { sun } from '@shared/lib/sun';
import { addDays, daysBetween, formatDate } from '@shared/lib/time';

export interface RunUpMark {
  /** Local date. */
  date: string;
  label: string;
  href: string;
  /** Belongs to the section that is open: in ink, with its label. */
  own: boolean;
}

interface Props {
  from: string;
  to: string;
  today: string;
  event: { startsOn: string; endsOn: string; label: string; href: string };
  marks: readonly RunUpMark[];
  /** Left on the label row: today in words and what is due. */
  sentence: string;
  /** Overview: all labels, in two lines. */
  tall?: boolean;
}

const WIDTH = 1392;

/** Sun's declination over the days from `from` to `to`: past in ink, future in grey, the event thick, today a disc. */
export function RunUpLine({ from, to, today, event, marks, sentence, tall = false }: Props) {
  const height = tall ? 72 : 54;
  const base = tall ? 44 : 30;
  const top = tall ? 24 : 8;
  const days = Math.max(1, daysBetween(from, to));
  const x = (date: string): number => Math.min(WIDTH, Math.max(0, (daysBetween(from, date) / days) * WIDTH));
  const declination = (date: string): number => sun(new Date(`${date}T12:00:00Z`)).declination;
  const samples = Array.from({ length: 97 }, (_, i) => addDays(from, Math.round((i * days) / 96)));
  const low = Math.min(...samples.map(declination));
  const span = Math.max(1, Math.max(...samples.map(declination)) - low);
  const y = (date: string): number => base - 4 - ((declination(date) - low) / span) * (base - 4 - top);
  const curve = (list: string[]): string =>
    list.map((date, i) => `${i ? 'L' : 'M'}${x(date).toFixed(1)} ${y(date).toFixed(1)}`).join('');
  const between = (a: string, b: string): string[] => [
    a,
    ...samples.filter((date) => date > a && date < b),
    b,
  ];
  const past = today > from ? curve(between(from, today < to ? today : to)) : '';
  const future = today < to ? curve(between(today > from ? today : from, to)) : '';
  const labels = placeLabels({ marks, event, today, x, tall, sentence });
  return (
    <nav
      aria-label="Run-up: what is due until the event"
      className="no-print border-b border-rule bg-paper px-6 max-md:hidden"
    >
      <svg
        viewBox={`0 0 ${WIDTH} ${height}`}
        width="100%"
        height={height}
        preserveAspectRatio="none"
        aria-hidden="true"
        className="block overflow-visible"
      >
        <line
          x1="0"
          x2={WIDTH}
          y1={base}
          y2={base}
          stroke="var(--color-rule)"
          vectorEffect="non-scaling-stroke"
        />
        <path
          d={past}
          fill="none"
          stroke="var(--color-ink)"
          strokeWidth="1.75"
          vectorEffect="non-scaling-stroke"
        />
        <path
          d={future}
          fill="none"
          stroke="var(--color-field)"
          strokeWidth="1.25"
          vectorEffect="non-scaling-stroke"
        />
        <path
          d={curve(between(event.startsOn, event.endsOn))}
          fill="none"
          stroke="var(--color-ink)"
          strokeWidth="5"
          vectorEffect="non-scaling-stroke"
        />
      </svg>
      <div className="relative" style={{ height: 0 }}>
        <Marks marks={marks} today={today} x={x} y={y} height={height} base={base} tall={tall} />
        {today >= from && today <= to && (
          <span
            aria-hidden="true"
            className="absolute"
            style={{ left: `${(x(today) / WIDTH) * 100}%`, top: y(today) - height }}
          >
            <span className="absolute -left-[5px] -top-[5px] size-[10px] rounded-full bg-sun" />
            <span
              className="absolute -left-[0.75px] top-[5px] w-[1.5px] bg-sun"
              style={{ height: Math.max(4, base - y(today) - 5) }}
            />
          </span>
        )}
        <p
          className="absolute left-0 text-dense font-semibold whitespace-nowrap"
          style={{ top: tall ? -height + 2 : -18 }}
        >
          {sentence}
        </p>
        {labels.map((label) => (
          <Link
            key={label.key}
            to={label.href}
            className="quiet absolute text-center text-tile whitespace-nowrap"
            style={{
              left: `${(label.x / WIDTH) * 100}%`,
              top: tall ? -28 : -18,
              transform: `translateX(${label.anchor})`,
            }}
          >
            <b className={label.past ? 'font-normal text-ink3' : 'font-semibold text-ink'}>
              {label.date}
              {label.past ? ' ✓' : ''}
            </b>
            {tall ? <br /> : ' '}
            <span className="text-ink3">{label.text}</span>
          </Link>
        ))}
      </div>
    </nav>
  );
}

interface MarksProps {
  marks: readonly RunUpMark[];
  today: string;
  x: (date: string) => number;
  y: (date: string) => number;
  height: number;
  base: number;
  tall: boolean;
}

function Marks({ marks, today, x, y, height, base, tall }: MarksProps) {
  return (
    <div role="list">
      {marks.map((mark) => {
        const ink = mark.own || tall ? 'bg-ink border-ink' : 'bg-field border-field';
        const away = daysBetween(today, mark.date);
        const when =
          away === 0
            ? 'today'
            : away > 0
              ? `in ${away} ${away === 1 ? 'day' : 'days'}`
              : `${-away} ${away === -1 ? 'day' : 'days'} ago`;
        return (
          <span role="listitem" key={`${mark.date}${mark.label}`}>
            <Link
              to={mark.href}
              aria-label={`${formatDate(mark.date, { weekday: false })}: ${mark.label}, ${when}`}
              className="group quiet absolute size-6 hover:z-20 focus-visible:z-20"
              style={{
                left: `calc(${(x(mark.date) / WIDTH) * 100}% - 12px)`,
                top: y(mark.date) - height - 12,
              }}
            >
              <span
                className={`absolute top-[9px] left-[9px] size-[6px] rounded-full border ${ink} ${mark.date < today ? '' : 'bg-paper!'}`}
              />
              <span
                className={`absolute top-[15px] left-[11.5px] w-px ${ink.split(' ')[0]}`}
                style={{ height: Math.max(2, base - y(mark.date) - 3) }}
              />
              <span
                aria-hidden="true"
                className={`absolute top-6 hidden border border-ink bg-sheet px-1.5 text-tile whitespace-nowrap text-ink group-hover:block group-focus-visible:block ${x(mark.date) > WIDTH / 2 ? 'right-0' : 'left-0'}`}
              >
                {formatDate(mark.date, { weekday: false, short: true })} {mark.label}, {when}
              </span>
            </Link>
          </span>
        );
      })}
    </div>
  );
}

interface PlacedLabel {
  key: string;
  x: number;
  date: string;
  text: string;
  href: string;
  past: boolean;
  anchor: string;
}

/** Labels that would collide: own beats other, earlier beats later; the loser shows on hover and on focus. */
function placeLabels({
  marks,
  event,
  today,
  x,
  tall,
  sentence,
}: Pick<Props, 'marks' | 'event' | 'today' | 'sentence'> & {
  x: (date: string) => number;
  tall: boolean;
}): PlacedLabel[] {
  const wanted = [
    ...marks.filter((mark) => tall || mark.own).map((mark) => ({ ...mark, priority: mark.own ? 0 : 2 })),
    { date: event.startsOn, label: event.label, href: event.href, own: true, priority: 1 },
    ...marks
      .slice(-1)
      .filter((mark) => !tall && !mark.own)
      .map((mark) => ({ ...mark, priority: 2 })),
  ].sort((a, b) => a.priority - b.priority || a.date.localeCompare(b.date));
  const taken: [number, number][] = tall ? [] : [[0, sentence.length * 6.6 + 16]];
  const placed: PlacedLabel[] = [];
  for (const mark of wanted) {
    const date = formatDate(mark.date, { weekday: false, short: true });
    const width = tall
      ? Math.max(date.length + 2, mark.label.length) * 5.9
      : (date.length + mark.label.length + 1) * 5.9;
    const centre = x(mark.date);
    const left = Math.min(Math.max(centre - width / 2, 0), WIDTH - width);
    if (taken.some(([a, b]) => left < b + 10 && a < left + width + 10)) continue;
    taken.push([left, left + width]);
    const anchor = left === 0 ? '0' : left === WIDTH - width ? '-100%' : '-50%';
    placed.push({
      key: `${mark.date}${mark.label}`,
      x: anchor === '0' ? 0 : anchor === '-100%' ? WIDTH : centre,
      date,
      text: mark.label,
      href: mark.href,
      past: mark.date < today,
      anchor,
    });
  }
  return placed;
}
