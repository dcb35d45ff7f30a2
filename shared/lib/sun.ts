/**
 * Sun's declination (degrees) and equation of time (minutes) at a moment: low-precision almanac series (Astronomical
 * Almanac, section C, "low precision formulas for the Sun"), good to about 0.01 degree and 0.1 minute, 1950 to 2050.
 */
const RAD = Math.PI / 180;

export function sun(moment: Date): { declination: number; equationOfTime: number } {
  const n = (moment.getTime() - Date.UTC(2000, 0, 1, 12)) / 864e5; // days from J2000.0
  const L = 280.46 + 0.9856474 * n; // mean longitude
  const g = (357.528 + 0.9856003 * n) * RAD; // mean anomaly
  const lambda = (L + 1.915 * Math.sin(g) + 0.02 * Math.sin(2 * g)) * RAD;
  const epsilon = (23.439 - 4e-7 * n) * RAD;
  const rightAscension = Math.atan2(Math.cos(epsilon) * Math.sin(lambda), Math.cos(lambda)) / RAD;
  const declination = Math.asin(Math.sin(epsilon) * Math.sin(lambda)) / RAD;
  const difference = ((((L - rightAscension) % 360) + 540) % 360) - 180;
  return { declination, equationOfTime: 4 * difference };
}

const TROPICAL_YEAR = 365.2422;
const STEPS = 146;

export interface MarkGeometry {
  width: number;
  height: number;
  /** SVG path data of the closed curve. */
  path: string;
  /** Where the sun's disc stands at `moment`. */
  disc: [x: number, y: number];
}

/**
 * The mark: x to the right = sun ahead of the clock (facing south), y up = declination; stretched sideways so that
 * width : height = 0.56. `pad` is the disc's radius + 0.6.
 */
export function markGeometry(height: number, pad: number, moment: Date): MarkGeometry {
  const inner = height - 2 * pad;
  const sy = inner / 46.88;
  const sx = (0.56 * inner) / 30.7;
  const point = (at: Date): [number, number] => {
    const s = sun(at);
    return [pad + (s.equationOfTime + 14.25) * sx, pad + (23.44 - s.declination) * sy];
  };
  const start = Date.UTC(moment.getUTCFullYear(), 0, 1, 12);
  let path = '';
  for (let i = 0; i < STEPS; i++) {
    const [x, y] = point(new Date(start + ((i * TROPICAL_YEAR) / STEPS) * 864e5));
    path += `${i ? 'L' : 'M'}${x.toFixed(2)} ${y.toFixed(2)}`;
  }
  return { width: 0.56 * inner + 2 * pad, height, path: `${path}Z`, disc: point(moment) };
}

/** Altitude above the horizon and azimuth from south (west positive), in degrees, `hours` from local mean noon. */
export function altitudeAzimuth(
  moment: Date,
  latitude: number,
  hours: number,
): { altitude: number; azimuth: number } {
  const s = sun(moment);
  const hour = (hours * 15 + s.equationOfTime / 4) * RAD;
  const phi = latitude * RAD;
  const delta = s.declination * RAD;
  return {
    altitude:
      Math.asin(Math.sin(phi) * Math.sin(delta) + Math.cos(phi) * Math.cos(delta) * Math.cos(hour)) / RAD,
    azimuth:
      Math.atan2(Math.sin(hour), Math.cos(hour) * Math.sin(phi) - Math.tan(delta) * Math.cos(phi)) / RAD,
  };
}
