import { formatMoney } from '../../lib/money';
import { count } from '../../lib/text';
import { addDays, formatDate, formatTime } from '../../lib/time';
import type { FeeTable } from '../finance/finance.contract';
import type { PublicEventSummary } from './site.contract';

type Category = Pick<FeeTable['categories'][number], 'earlyMinor' | 'earlyUntil' | 'regularMinor'>;

const range = (amounts: number[], currency: string): string => {
  const [least, most] = [Math.min(...amounts), Math.max(...amounts)];
  if (most === 0) return 'no fee';
  return least === most
    ? formatMoney(least, currency)
    : `${formatMoney(least, currency, false)} to ${formatMoney(most, currency)}`;
};

/** The early date that still counts on a day: the next one of the table. */
export const earlyUntil = (categories: readonly Category[], today: string): string | null =>
  categories
    .flatMap((row) =>
      row.earlyMinor !== null && row.earlyUntil && row.earlyUntil >= today ? [row.earlyUntil] : [],
    )
    .sort()[0] ?? null;

/** Fees of the categories as they are on a day. */
export const feesOn = (categories: readonly Category[], day: string): number[] =>
  categories.map((row) =>
    row.earlyMinor !== null && row.earlyUntil && row.earlyUntil >= day ? row.earlyMinor : row.regularMinor,
  );

/**
 * The fee rule beside the button: until when the early fee is, what it is now and afterwards, and how many places are
 * left when few are.
 */
export function feeRule(input: {
  categories: readonly Category[];
  currency: string;
  town: string;
  today: string;
  capacity: number;
  free: number;
}): string[] {
  const { categories, currency, town, today, capacity, free } = input;
  const lines: string[] = [];
  if (categories.length > 0) {
    const until = earlyUntil(categories, today);
    const now = range(feesOn(categories, today), currency);
    if (until) {
      lines.push(`Early fee until ${formatDate(until)}, ${formatTime('23:59')} ${town} time`);
      lines.push(
        `${now}; from ${formatDate(addDays(until, 1), { weekday: false })} ${range(feesOn(categories, addDays(until, 1)), currency)}.`,
      );
    } else lines.push(now === 'no fee' ? 'There is no fee' : `Fee ${now}`);
  }
  if (free === 0) lines.push(`All ${capacity} places are taken.`);
  else if (free * 4 <= capacity) lines.push(`${count(free, 'place')} of ${capacity} left.`);
  else lines.push(`${capacity} places.`);
  return lines;
}

const order: Record<string, number> = { running: 0, open: 1, announced: 1, finished: 2, archived: 3 };

/** Running first, then what comes by date, then what is over, the latest first. */
export function bySeason(a: PublicEventSummary, b: PublicEventSummary): number {
  const turn = (order[a.state] ?? 9) - (order[b.state] ?? 9);
  if (turn !== 0) return turn;
  return a.state === 'finished' || a.state === 'archived'
    ? b.startsOn.localeCompare(a.startsOn)
    : a.startsOn.localeCompare(b.startsOn);
}

/** A day of the programme to show: today when there is something today, else the fullest day that is not over, else the fullest. */
export function dayToShow(talks: readonly { day: string }[], today: string): string | null {
  if (talks.some((talk) => talk.day === today)) return today;
  const numbers = new Map<string, number>();
  for (const talk of talks) numbers.set(talk.day, (numbers.get(talk.day) ?? 0) + 1);
  const days = [...numbers].sort(([a, n], [b, m]) => m - n || a.localeCompare(b));
  return (days.find(([day]) => day >= today) ?? days[0])?.[0] ?? null;
}
