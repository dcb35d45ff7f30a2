import { describe, expect, it } from 'vitest';
import {
  chordPath,
  decagon,
  figureOf,
  penrosePaths,
  subdivide,
  torusKnot,
  torusKnotPath,
  visiblePoints,
  type HalfRhomb,
} from '../../../shared/features/site/figures.rules';

const GOLDEN = (1 + Math.sqrt(5)) / 2;
const length = (p: { x: number; y: number }, q: { x: number; y: number }): number =>
  Math.hypot(p.x - q.x, p.y - q.y);
const area = ({ a, b, c }: HalfRhomb): number =>
  Math.abs((b.x - a.x) * (c.y - a.y) - (c.x - a.x) * (b.y - a.y)) / 2;
const sum = (halves: HalfRhomb[]): number => halves.reduce((total, half) => total + area(half), 0);

describe('Penrose rhombs', () => {
  it('a subdivision covers exactly what was there, with edges shorter by the golden ratio', () => {
    let halves = decagon(100);
    for (let n = 1; n <= 5; n++) {
      const next = subdivide(halves);
      expect(sum(next)).toBeCloseTo(sum(halves), 6);
      for (const half of next) {
        expect(length(half.a, half.b)).toBeCloseTo(100 / GOLDEN ** n, 8);
        expect(length(half.a, half.c)).toBeCloseTo(100 / GOLDEN ** n, 8);
      }
      halves = next;
    }
  });

  it('numbers of halves grow as the substitution says: thin -> thin + thick, thick -> thin + 2 thick', () => {
    let [thin, thick] = [10, 0];
    let halves = decagon(1);
    for (let n = 0; n < 6; n++) {
      halves = subdivide(halves);
      [thin, thick] = [thin + thick, thin + 2 * thick];
      expect(halves.filter((half) => half.thin)).toHaveLength(thin);
      expect(halves).toHaveLength(thin + thick);
    }
    expect(thick / thin).toBeCloseTo(GOLDEN, 2);
  });

  it('angles are those of the 36 and 72 degree rhombs', () => {
    for (const half of subdivide(subdivide(decagon(1)))) {
      const base = length(half.b, half.c) / length(half.a, half.b);
      expect(base).toBeCloseTo(half.thin ? 1 / GOLDEN : GOLDEN, 8);
    }
  });

  it('draws every edge once', () => {
    const edges = penrosePaths(500, 3).edges.split('M').filter(Boolean);
    expect(edges.length).toBeGreaterThan(50);
    expect(new Set(edges).size).toBe(edges.length);
    const turned = edges.map((edge) => edge.split('L').reverse().join('L'));
    expect(
      edges.filter((edge) => turned.includes(edge) && edge.split('L')[0] !== edge.split('L')[1]),
    ).toEqual([]);
  });
});

describe('other figures', () => {
  it('the torus knot lies on the torus and closes', () => {
    const curve = torusKnot(3, 7, 700);
    for (const { x, y, z } of curve) expect((Math.hypot(x, y) - 2) ** 2 + z ** 2).toBeCloseTo(1, 9);
    expect(length(curve[0] as never, curve[699] as never)).toBeLessThan(0.1);
  });

  it('the diagram of the (3, 7) torus knot is broken once at each of its 14 crossings', () => {
    // One piece more than gaps: the drawing begins in the middle of a strand.
    expect(torusKnotPath(3, 7, 60).match(/M/g)).toHaveLength(14 + 1);
  });

  it('points are visible exactly when nothing stands in between', () => {
    const seen = new Set(visiblePoints(12).map(String));
    for (let x = 0; x <= 12; x++) {
      for (let y = 0; y <= 12; y++) {
        const hidden = Array.from({ length: 12 }, (_, k) => k + 2).some((k) => x % k === 0 && y % k === 0);
        expect(seen.has(`${x},${y}`), `${x},${y}`).toBe(!hidden && x + y > 0);
      }
    }
  });

  it('joins each of the points to its multiple', () => {
    expect(chordPath(180, 2, 200).match(/M/g)).toHaveLength(180);
    expect(chordPath(4, 2, 10)).toBe(
      'M0.0 -10.0L0.0 -10.0M10.0 0.0L0.0 10.0M0.0 10.0L0.0 -10.0M-10.0 0.0L0.0 10.0',
    );
  });

  it('finds a figure for every title', () => {
    expect(figureOf('Summer School on Tilings, Knots and Discrete Geometry')).toBe('penrose');
    expect(figureOf('Workshop on Lattice Points')).toBe('lattice');
    expect(figureOf('Workshop on Braids and Surfaces')).toBe('knot');
    expect(figureOf('Conference on Combinatorial Structures')).toBe('chords');
  });
});
