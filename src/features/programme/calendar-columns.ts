import type { Placement, Problem } from '@shared/features/programme/timetable/problem';
import { addDays, daysBetween } from '@shared/lib/time';

/**
 * The week's grid has columns of (day, room): the lens day one per room, every other day a single one for all rooms.
 * The calendar knows only dates, so each column borrows one of consecutive stand-in dates, in UTC.
 */
export interface Column {
  /** Day number of the event. */
  day: number;
  /** Null: all rooms. */
  room: string | null;
  /** First and last column of the lens day. */
  first: boolean;
  last: boolean;
}

export const standInStart = '2001-01-01';

/** The days of one calendar week (Monday first) of an event; weekend days only where something can stand. */
export function weeksOf(problem: Problem, used: ReadonlySet<number>): number[][] {
  const weeks = new Map<number, number[]>();
  for (let day = 0; day < problem.days; day++) {
    const monday = mondayOf(problem, day);
    weeks.set(monday, [...(weeks.get(monday) ?? []), day]);
  }
  return [...weeks.values()].map((days) => {
    const open = days.filter((day) => !isWeekend(problem, day) || used.has(day));
    return open.length > 0 ? open : days;
  });
}

const weekdayOf = (problem: Problem, day: number): number =>
  new Date(`${addDays(problem.startsOn ?? standInStart, day)}T00:00:00Z`).getUTCDay();
const mondayOf = (problem: Problem, day: number): number => day - ((weekdayOf(problem, day) + 6) % 7);
const isWeekend = (problem: Problem, day: number): boolean => [0, 6].includes(weekdayOf(problem, day));

/** Columns of some days with a lens on one. */
export function columnsOf(problem: Problem, days: readonly number[], lens: number): Column[] {
  return days.flatMap((day): Column[] => {
    if (day !== lens) return [{ day, room: null, first: true, last: true }];
    return problem.rooms.map((room, i) => ({
      day,
      room: room.id,
      first: i === 0,
      last: i === problem.rooms.length - 1,
    }));
  });
}

export const standInDate = (index: number): string => addDays(standInStart, index);

/** The column at a stand-in date, with its number. */
export function columnAt(columns: readonly Column[], date: string): Column | undefined {
  return columns[daysBetween(standInStart, date.slice(0, 10))];
}

export const columnIndex = (columns: readonly Column[], at: { day: number; room: string }): number =>
  columns.findIndex((column) => column.day === at.day && (column.room === null || column.room === at.room));

/** Start and end of a placement as the calendar is told, in UTC; undefined when its day is not shown. */
export function toStandIn(
  columns: readonly Column[],
  at: Placement,
): { start: string; end: string } | undefined {
  const index = columnIndex(columns, at);
  return index < 0 ? undefined : spanAt(index, at.start, at.start + at.minutes);
}

export function spanAt(index: number, start: number, end: number): { start: string; end: string } {
  const base = Date.parse(`${standInDate(index)}T00:00:00Z`);
  const iso = (minute: number): string => new Date(base + minute * 60_000).toISOString();
  return { start: iso(start), end: iso(end) };
}

/** Where a drop landed: column and minute of the day. */
export function fromStandIn(
  columns: readonly Column[],
  date: Date,
): { column: Column; start: number } | undefined {
  const column = columnAt(columns, date.toISOString());
  return column && { column, start: date.getUTCHours() * 60 + date.getUTCMinutes() };
}
