import { instantToLocal, formatDate, formatTime } from '@shared/lib/time';

/** The reader's own zone. */
export const ownZone = (): string => Intl.DateTimeFormat().resolvedOptions().timeZone || 'UTC';

/** `Thu 30 April, 23:59` in the reader's zone. */
export function ownTime(instant: string): string {
  const local = instantToLocal(instant, ownZone());
  return `${formatDate(local.date, { short: true })}, ${formatTime(local.time)}`;
}

/** Amount in minor units as the house writes it: `1,240.00 EUR`. */
export function formatMinor(amountMinor: number, currency: string): string {
  const digits =
    new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions().maximumFractionDigits ?? 2;
  const number = new Intl.NumberFormat('en-GB', {
    minimumFractionDigits: digits,
    maximumFractionDigits: digits,
  }).format(amountMinor / 10 ** digits);
  return `${number} ${currency}`;
}

export function formatBytes(bytes: number): string {
  if (bytes < 1000) return `${bytes} B`;
  if (bytes < 1_000_000) return `${Math.round(bytes / 1000)} kB`;
  return `${(bytes / 1_000_000).toFixed(1)} MB`;
}
