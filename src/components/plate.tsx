import { altitudeAzimuth } from '@shared/lib/sun';
import { formatDate } from '@shared/lib/time';
import { useToday } from './mark';

const LATITUDE = 57.3;
const HOURS = -2; // ten o'clock, mean time
const W = 860;
const H = 900;
const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
];

/** Where the sun stands over the institute at ten o'clock, mean time, through one year. Computed. */
export function Plate() {
  const today = useToday();
  const year = today.getUTCFullYear();
  const at = (moment: Date): [number, number] => {
    const { altitude, azimuth } = altitudeAzimuth(moment, LATITUDE, HOURS);
    return [60 + ((54 + azimuth) / 38) * 700, 740 - (altitude / 50) * 650];
  };
  const path = Array.from({ length: 147 }, (_, i) =>
    at(new Date(Date.UTC(year, 0, 1, 12) + (i / 146) * 365.2422 * 864e5)),
  )
    .map(([x, y], i) => `${i ? 'L' : 'M'}${x.toFixed(1)} ${y.toFixed(1)}`)
    .join('');
  const [sunX, sunY] = at(today);
  return (
    <svg
      viewBox={`0 0 ${W} ${H}`}
      className="h-full w-full"
      role="img"
      aria-label="Where the sun stands at ten o'clock, mean time, through one year, with today."
      preserveAspectRatio="xMidYMid meet"
    >
      {[10, 20, 30, 40, 50].map((altitude) => {
        const y = 740 - (altitude / 50) * 650;
        return (
          <g key={altitude}>
            <line x1="60" x2="800" y1={y} y2={y} stroke="#32433C" strokeWidth="1" />
            <text x="52" y={y + 5} textAnchor="end" fontSize="15" fill="#9DABA3">
              {altitude}°
            </text>
          </g>
        );
      })}
      <line x1="60" x2="800" y1="740" y2="740" stroke="#EEF3EB" strokeWidth="1.75" />
      {[50, 40, 30, 20].map((azimuth) => (
        <text
          key={azimuth}
          x={60 + ((54 - azimuth) / 38) * 700}
          y="766"
          textAnchor="middle"
          fontSize="15"
          fill="#9DABA3"
        >
          {azimuth}°{azimuth === 20 ? ' east of south' : ''}
        </text>
      ))}
      <path d={path} fill="none" stroke="#EEF3EB" strokeWidth="2" />
      {MONTHS.map((month, index) => {
        const [x, y] = at(new Date(Date.UTC(year, index, 1, 12)));
        if (Math.hypot(x - sunX, y - sunY) < 34) return null; // the sun tells the date itself
        const left = index < 3 || index === 3 || index === 6 || index === 7;
        return (
          <g key={month}>
            <circle cx={x} cy={y} r="4.5" fill="#101A17" stroke="#EEF3EB" strokeWidth="1.75" />
            <text
              x={x + (left ? -13 : 13)}
              y={y + 5}
              textAnchor={left ? 'end' : 'start'}
              fontSize="17"
              fontFamily="var(--font-serif)"
              fill="#C6D0C8"
            >
              {month}
            </text>
          </g>
        );
      })}
      <circle cx={sunX} cy={sunY} r="13" fill="#F5C84B" />
      <text
        x={sunX + 24}
        y={sunY + 6}
        fontSize="18"
        fontWeight="600"
        fontFamily="var(--font-serif)"
        fill="#F5C84B"
      >
        {formatDate(today.toISOString(), { weekday: false })}
      </text>
      <text x="60" y="828" fontSize="18" fontFamily="var(--font-serif)" fill="#C6D0C8">
        Where the sun stands over Tarnholt at ten o’clock, mean time,
      </text>
      <text x="60" y="852" fontSize="18" fontFamily="var(--font-serif)" fill="#C6D0C8">
        through one year. The disc is today.
      </text>
    </svg>
  );
}
