import { useEffect, useState } from 'react';
import { markGeometry } from '@shared/lib/sun';

/** Height -> stroke and disc radius (look-and-feel, section 2). */
const DRAWINGS = [
  { from: 150, stroke: 3.4, disc: 9 },
  { from: 74, stroke: 2.6, disc: 5 },
  { from: 48, stroke: 1.8, disc: 3.6 },
  { from: 32, stroke: 1.4, disc: 2.5 },
  { from: 24, stroke: 1.3, disc: 2.2 },
  { from: 0, stroke: 1.2, disc: 1.9 },
];

/** 12:00 UT of today; moves on at midnight. */
export function useToday(): Date {
  const noon = (): number => Math.floor(Date.now() / 864e5) * 864e5 + 432e5;
  const [today, setToday] = useState(noon);
  useEffect(() => {
    const timer = setInterval(() => setToday(noon()), 60_000);
    return () => clearInterval(timer);
  }, []);
  return new Date(today);
}

/** The sun's figure over a year, with a disc at today. */
export function Mark({ height = 26, moment }: { height?: number; moment?: Date }) {
  const today = useToday();
  const drawing = DRAWINGS.find((candidate) => height >= candidate.from) ?? DRAWINGS[5];
  const { stroke, disc } = drawing as (typeof DRAWINGS)[number];
  const geometry = markGeometry(height, disc + 0.6, moment ?? today);
  return (
    <svg
      width={geometry.width}
      height={height}
      viewBox={`0 0 ${geometry.width} ${height}`}
      aria-hidden="true"
      className="shrink-0"
    >
      <path
        d={geometry.path}
        fill="none"
        stroke="var(--color-ink)"
        strokeWidth={stroke}
        strokeLinejoin="round"
      />
      <circle cx={geometry.disc[0]} cy={geometry.disc[1]} r={disc} fill="var(--color-sun)" />
    </svg>
  );
}

/** Mark and word. */
export function Wordmark({ height = 26 }: { height?: number }) {
  const large = height > 30;
  return (
    <span className="inline-flex items-center gap-2.5">
      <Mark height={height} />
      <span
        className={`font-serif ${large ? 'text-[38px] leading-10 font-medium' : 'text-[16px] font-semibold'}`}
      >
        Analemma
      </span>
    </span>
  );
}
