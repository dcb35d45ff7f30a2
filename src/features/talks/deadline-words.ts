import type { DeadlineKind } from '@shared/features/events/events.contract';
import type { Stage } from '@shared/features/talks/talks-stay.contract';
import { formatDate, formatInstant, formatTime } from '@shared/lib/time';
import { ownTime, ownZone } from '@/lib/format';

/** `wanted by Mon 29 June`, or undefined where the event has no such date. */
export function wantedBy(stage: Pick<Stage, 'deadlines'>, kind: DeadlineKind): string | undefined {
  const deadline = stage.deadlines.find((entry) => entry.kind === kind);
  return deadline && `wanted by ${formatDate(deadline.date)}, ${formatTime(deadline.time)}`;
}

/** Day, date, time and the institute's zone, then the reader's own time where it differs. */
export function deadlineWords(at: string, zone: string): string {
  const there = `${formatInstant(at, zone)} (${zone.replaceAll('_', ' ')})`;
  return ownZone() === zone ? there : `${there}, your time ${ownTime(at)}`;
}
