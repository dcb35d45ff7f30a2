import { DateTime, IANAZone } from 'luxon';
import { z } from 'zod';

/** A calendar date without time, `2026-07-06`. */
export const localDate = z
  .string()
  .regex(/^\d{4}-\d{2}-\d{2}$/, 'Write the date as 2026-07-06.')
  .refine((value) => DateTime.fromISO(value, { zone: 'utc' }).isValid, 'This date does not exist.');

/** A time of day in the event's zone, `09:05`. */
export const localTime = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'Write the time as 09:05.');

/** A date and time in the event's zone, without offset: `2026-07-06T09:05`. */
export const localDateTime = z
  .string()
  .regex(/^\d{4}-\d{2}-\d{2}T([01]\d|2[0-3]):[0-5]\d$/, 'Write date and time as 2026-07-06T09:05.')
  .refine((value) => DateTime.fromISO(value, { zone: 'utc' }).isValid, 'This date does not exist.');

/** An instant in UTC, `2026-07-06T07:05:00.000Z`. */
export const instant = z.iso.datetime();

/** An IANA time zone name, `Europe/Copenhagen`. */
export const timeZone = z
  .string()
  .max(60)
  .refine(
    (value) => IANAZone.isValidZone(value),
    'This time zone is not known (IANA name, e.g. Europe/Copenhagen).',
  );

/**
 * The instant of a local date and time in a zone, ISO in UTC. In the hour that a clock change skips, the time moves
 * forward by the gap; in the repeated hour the first one is meant (the rule of luxon, and of RFC 5545 section 3.3.5).
 */
export function localToInstant(date: string, time: string, zone: string): string {
  const local = DateTime.fromISO(`${date}T${time}`, { zone });
  if (!local.isValid) throw new RangeError(`not a time: ${date} ${time} ${zone}`);
  const first = local.getPossibleOffsets().sort((a, b) => a.toMillis() - b.toMillis())[0] ?? local;
  return first.toUTC().toISO({ suppressMilliseconds: false }) as string;
}

/** Local date, time and minute of the day of an instant in a zone. */
export function instantToLocal(
  at: string | Date,
  zone: string,
): { date: string; time: string; minute: number } {
  const local = (typeof at === 'string' ? DateTime.fromISO(at) : DateTime.fromJSDate(at)).setZone(zone);
  return {
    date: local.toFormat('yyyy-MM-dd'),
    time: local.toFormat('HH:mm'),
    minute: local.hour * 60 + local.minute,
  };
}

/** `HH:MM` -> minutes since midnight. */
export function minuteOf(time: string): number {
  return Number(time.slice(0, 2)) * 60 + Number(time.slice(3, 5));
}

/** Minutes since midnight -> `HH:MM`. */
export function timeOf(minute: number): string {
  return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;
}

/** Whole days from one local date to another (negative when `to` is earlier). */
export function daysBetween(from: string, to: string): number {
  return Math.round((Date.parse(`${to}T00:00:00Z`) - Date.parse(`${from}T00:00:00Z`)) / 86_400_000);
}

/** The date `days` later. */
export function addDays(date: string, days: number): string {
  return new Date(Date.parse(`${date}T00:00:00Z`) + days * 86_400_000).toISOString().slice(0, 10);
}

/** All dates from first to last, both included. */
export function datesBetween(first: string, last: string): string[] {
  const dates: string[] = [];
  for (let date = first; date <= last; date = addDays(date, 1)) dates.push(date);
  return dates;
}

const EN = { locale: 'en-GB' } as const;

/** `Thu 9 July` (with the year when asked). */
export function formatDate(
  date: string,
  options: { year?: boolean; short?: boolean; weekday?: boolean } = {},
): string {
  const { year = false, short = false, weekday = true } = options;
  const pattern = `${weekday ? 'ccc ' : ''}d ${short ? 'LLL' : 'LLLL'}${year ? ' yyyy' : ''}`;
  return DateTime.fromISO(date.slice(0, 10), { zone: 'utc' }).setLocale(EN.locale).toFormat(pattern);
}

/** `6–17 July 2026`, `30 June – 4 July 2026`, `28 December 2026 – 2 January 2027`. */
export function formatDateSpan(first: string, last: string, year = true): string {
  const tail = year ? ` ${last.slice(0, 4)}` : '';
  const plain = (date: string) => formatDate(date, { weekday: false });
  if (first === last) return `${plain(first)}${tail}`;
  if (first.slice(0, 7) === last.slice(0, 7)) return `${Number(first.slice(8))}–${plain(last)}${tail}`;
  const head = first.slice(0, 4) === last.slice(0, 4) ? '' : ` ${first.slice(0, 4)}`;
  return `${plain(first)}${head} – ${plain(last)}${tail || (head ? ` ${last.slice(0, 4)}` : '')}`;
}

/** `9:05` (hours without a leading zero, as the house sets them). */
export function formatTime(time: string): string {
  return time.replace(/^0/, '');
}

/** `Thu 9 July, 11:25–12:15` in the zone. */
export function formatSpan(startsAt: string, endsAt: string, zone: string): string {
  const start = instantToLocal(startsAt, zone);
  const end = instantToLocal(endsAt, zone);
  const tail =
    start.date === end.date ? formatTime(end.time) : `${formatDate(end.date)}, ${formatTime(end.time)}`;
  return `${formatDate(start.date)}, ${formatTime(start.time)}–${tail}`;
}

/** `Thu 30 April 2026, 23:59` in the zone. */
export function formatInstant(at: string, zone: string, year = true): string {
  const local = instantToLocal(at, zone);
  return `${formatDate(local.date, { year })}, ${formatTime(local.time)}`;
}

/** The zone's short name at an instant (`CEST`, or `UTC+7` where it has none). */
export function zoneName(at: string, zone: string): string {
  const local = DateTime.fromISO(at).setZone(zone).setLocale(EN.locale);
  const name = local.offsetNameShort ?? '';
  return name.replace(/^GMT/, 'UTC');
}
