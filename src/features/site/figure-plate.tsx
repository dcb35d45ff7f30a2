import { useMemo } from 'react';
import {
  chordPath,
  figureOf,
  penrosePaths,
  torusKnotPath,
  visiblePoints,
  type Figure,
} from '@shared/features/site/figures.rules';

const CHALK = '#9DABA3';
const TINT = '#1D2B26';

const captions: Record<Figure, string> = {
  penrose: 'Penrose’s rhombs after six subdivisions',
  knot: 'The torus knot of type (3, 7)',
  lattice: 'Lattice points that are seen from the corner',
  chords: 'Each of 180 points, joined to its double',
};

/** The slate plate of a public page: a figure of the topic, computed, in thin chalk lines with one tint and a caption. */
export function FigurePlate({ title, className = '' }: { title: string; className?: string }) {
  const figure = figureOf(title);
  return (
    <figure className={`relative m-0 overflow-hidden bg-[#101A17] ${className}`}>
      <svg
        viewBox="-300 -226 600 452"
        preserveAspectRatio="xMidYMid slice"
        className="absolute inset-0 h-full w-full"
        role="img"
        aria-label={captions[figure]}
      >
        <Drawing figure={figure} />
      </svg>
      <figcaption className="absolute bottom-0 left-0 bg-[#101A17] px-3.5 py-1.5 font-serif text-[14px] text-[#C6D0C8] italic">
        {captions[figure]}
      </figcaption>
    </figure>
  );
}

function Drawing({ figure }: { figure: Figure }) {
  if (figure === 'penrose') return <Rhombs />;
  if (figure === 'lattice') return <Lattice />;
  return <Curve d={figure} />;
}

function Rhombs() {
  const { edges, thin } = useMemo(() => penrosePaths(560, 6), []);
  return (
    <g transform="rotate(9)">
      <path d={thin} fill={TINT} stroke={TINT} strokeWidth="0.6" />
      <path d={edges} fill="none" stroke={CHALK} strokeWidth="0.9" strokeLinecap="round" />
    </g>
  );
}

function Curve({ d }: { d: 'knot' | 'chords' }) {
  const path = useMemo(() => (d === 'knot' ? torusKnotPath(3, 7, 66) : chordPath(180, 2, 200)), [d]);
  return (
    <>
      {d === 'knot' ? (
        <circle r="198" fill="none" stroke={TINT} strokeWidth="40" />
      ) : (
        <circle r="200" fill={TINT} />
      )}
      <path
        d={path}
        fill="none"
        stroke={CHALK}
        strokeWidth={d === 'knot' ? 2.2 : 0.8}
        strokeLinecap="round"
        strokeLinejoin="round"
      />
    </>
  );
}

function Lattice() {
  const points = useMemo(() => visiblePoints(44), []);
  const size = 13.8;
  const [left, bottom] = [-292, 214];
  return (
    <>
      {points
        .filter(([x, y]) => x * y < 60)
        .map(([x, y]) => (
          <line
            key={`${x}/${y}`}
            x1={left}
            y1={bottom}
            x2={left + x * size}
            y2={bottom - y * size}
            stroke="#32433C"
            strokeWidth="0.8"
          />
        ))}
      {points.map(([x, y]) => (
        <circle key={`${x},${y}`} cx={left + x * size} cy={bottom - y * size} r="2" fill={CHALK} />
      ))}
    </>
  );
}
