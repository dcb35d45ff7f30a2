import { describe, expect, it } from 'vitest';
import { altitudeAzimuth, markGeometry, sun } from '../../../shared/lib/sun';

// The house's identity page, section "The mark": extremes and one day of 2026, from the same almanac series.
describe('the sun in 2026', () => {
  it.each([
    ['2026-02-11', -14.2, undefined],
    ['2026-11-03', 16.4, undefined],
    ['2026-04-28', 2.5, 14.2],
  ])('%s', (day, minutes, degrees) => {
    const s = sun(new Date(`${day}T12:00:00Z`));
    expect(s.equationOfTime).toBeCloseTo(minutes, 1);
    if (degrees !== undefined) expect(s.declination).toBeCloseTo(degrees, 1);
  });
  it('stands at 23.4 degrees at the solstices', () => {
    expect(sun(new Date('2026-06-21T12:00:00Z')).declination).toBeCloseTo(23.44, 1);
    expect(sun(new Date('2026-12-21T12:00:00Z')).declination).toBeCloseTo(-23.44, 1);
  });
  it('is due south at local apparent noon, at the altitude 90 - latitude + declination', () => {
    const moment = new Date('2026-04-28T12:00:00Z');
    const { declination, equationOfTime } = sun(moment);
    const noon = altitudeAzimuth(moment, 57.3, -equationOfTime / 60);
    expect(noon.azimuth).toBeCloseTo(0, 6);
    expect(noon.altitude).toBeCloseTo(90 - 57.3 + declination, 6);
  });
});

it('the mark is 0.56 times as wide as high, closed, with the disc on the curve', () => {
  const mark = markGeometry(150, 9.6, new Date('2026-07-06T12:00:00Z'));
  expect((mark.width - 19.2) / (150 - 19.2)).toBeCloseTo(0.56, 6);
  expect(mark.path.startsWith('M') && mark.path.endsWith('Z')).toBe(true);
  const points = [...mark.path.matchAll(/[ML]([\d.]+) ([\d.]+)/g)].map(
    (match) => [Number(match[1]), Number(match[2])] as const,
  );
  expect(points).toHaveLength(146);
  const nearest = Math.min(...points.map(([x, y]) => Math.hypot(x - mark.disc[0], y - mark.disc[1])));
  expect(nearest).toBeLessThan(2);
});
