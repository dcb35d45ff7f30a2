/** Figures of the plates on public pages: pure geometry, each returns SVG path data in its own box. */

export interface Point {
  x: number;
  y: number;
}
/** Half a rhomb: apex `a`, base from `b` to `c`. Thin halves come from the 36° rhomb, thick ones from the 72° rhomb. */
export interface HalfRhomb {
  thin: boolean;
  a: Point;
  b: Point;
  c: Point;
}

const GOLDEN = (1 + Math.sqrt(5)) / 2;
const towards = (from: Point, to: Point, share: number): Point => ({
  x: from.x + (to.x - from.x) * share,
  y: from.y + (to.y - from.y) * share,
});
const polar = (radius: number, angle: number): Point => ({
  x: radius * Math.cos(angle),
  y: radius * Math.sin(angle),
});

/** Ten thin halves around a point: a decagon of the given radius. */
export function decagon(radius: number): HalfRhomb[] {
  return Array.from({ length: 10 }, (_, i) => {
    const [b, c] = [polar(radius, ((2 * i - 1) * Math.PI) / 10), polar(radius, ((2 * i + 1) * Math.PI) / 10)];
    // Every second one is mirrored, so that halves meet in whole rhombs.
    return i % 2 === 0
      ? { thin: true, a: { x: 0, y: 0 }, b: c, c: b }
      : { thin: true, a: { x: 0, y: 0 }, b, c };
  });
}

/** One subdivision after Penrose: a thin half becomes two halves, a thick half three; lengths shrink by the golden ratio. */
export function subdivide(halves: readonly HalfRhomb[]): HalfRhomb[] {
  return halves.flatMap(({ thin, a, b, c }) => {
    if (thin) {
      const p = towards(a, b, 1 / GOLDEN);
      return [
        { thin: true, a: c, b: p, c: b },
        { thin: false, a: p, b: c, c: a },
      ];
    }
    const q = towards(b, a, 1 / GOLDEN);
    const r = towards(b, c, 1 / GOLDEN);
    return [
      { thin: false, a: r, b: c, c: a },
      { thin: false, a: q, b: r, c: b },
      { thin: true, a: r, b: q, c: a },
    ];
  });
}

const number = (value: number): string => value.toFixed(1).replace('-0.0', '0.0');
const at = ({ x, y }: Point): string => `${number(x)} ${number(y)}`;

/** Path data of a Penrose tiling by rhombs: the edges, and the thin rhombs to be tinted. */
export function penrosePaths(radius: number, subdivisions: number): { edges: string; thin: string } {
  let halves = decagon(radius);
  for (let n = 0; n < subdivisions; n++) halves = subdivide(halves);
  const edges = new Set<string>();
  let thin = '';
  for (const half of halves) {
    // The base b-c lies inside the rhomb and is not drawn; an edge belongs to two rhombs and is drawn once.
    for (const end of [half.b, half.c]) edges.add([at(half.a), at(end)].sort().join('L'));
    if (half.thin) thin += `M${at(half.a)}L${at(half.b)}L${at(half.c)}Z`;
  }
  return { edges: [...edges].map((edge) => `M${edge}`).join(''), thin };
}

/** The curve of a (p, q) torus knot, seen along the axis, as points with their height. */
export function torusKnot(p: number, q: number, steps: number): { x: number; y: number; z: number }[] {
  return Array.from({ length: steps }, (_, i) => {
    const t = (i / steps) * 2 * Math.PI;
    const r = 2 + Math.cos(q * t);
    return { x: r * Math.cos(p * t), y: r * Math.sin(p * t), z: -Math.sin(q * t) };
  });
}

/** Path data of a torus knot drawn as a diagram: strands broken where another passes above. */
export function torusKnotPath(p: number, q: number, scale: number, steps = 1440): string {
  const curve = torusKnot(p, q, steps);
  const hidden = curve.map((point, i) =>
    curve.some(
      (other, j) =>
        apart(i, j, steps) > steps / 40 &&
        other.z > point.z + 0.2 &&
        Math.hypot(other.x - point.x, other.y - point.y) < 0.14,
    ),
  );
  let path = '';
  for (let i = 0; i <= steps; i++) {
    const [now, before] = [i % steps, (i + steps - 1) % steps];
    const point = curve[now] as Point;
    if (hidden[now]) continue;
    path += `${i === 0 || hidden[before] ? 'M' : 'L'}${number(point.x * scale)} ${number(point.y * scale)}`;
  }
  return path;
}

const apart = (i: number, j: number, steps: number): number =>
  Math.min(Math.abs(i - j), steps - Math.abs(i - j));

const gcd = (a: number, b: number): number => (b === 0 ? a : gcd(b, a % b));

/** The lattice points of a square that are seen from the origin: no other lattice point stands in between. */
export function visiblePoints(size: number): [number, number][] {
  const points: [number, number][] = [];
  for (let x = 0; x <= size; x++) for (let y = 0; y <= size; y++) if (gcd(x, y) === 1) points.push([x, y]);
  return points;
}

/** Points on a circle, each joined to its multiple: the envelope is an epicycloid. Path data of the chords. */
export function chordPath(points: number, step: number, radius: number): string {
  const corner = (i: number): Point => polar(radius, (2 * Math.PI * (i % points)) / points - Math.PI / 2);
  let path = '';
  for (let i = 0; i < points; i++) path += `M${at(corner(i))}L${at(corner(i * step))}`;
  return path;
}

export const figures = ['penrose', 'knot', 'lattice', 'chords'] as const;
export type Figure = (typeof figures)[number];

/** The figure that suits an event, by the words of its title; always one. */
export function figureOf(title: string): Figure {
  const words = title.toLowerCase();
  if (/til|quasi|aperiodic/.test(words)) return 'penrose';
  if (/lattice|point|number|count/.test(words)) return 'lattice';
  if (/knot|braid|topolog|manifold|surface/.test(words)) return 'knot';
  return 'chords';
}
