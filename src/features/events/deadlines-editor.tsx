import { useState } from 'react';
import type { DeadlineInput, EventDetail } from '@shared/features/events/events.contract';
import { deadlineNames, deadlineOrder } from '@shared/features/events/events.rules';
import { formatInstant, localToInstant } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { toast } from '@/components/toast';
import { ownZone } from '@/lib/format';
import { sentenceOf } from '@/lib/problem';
import { useReplaceDeadlines } from './events.queries';

/** Every deadline at a date and time of the event's zone; empty = none. */
export function DeadlinesEditor({ event }: { event: EventDetail }) {
  const [rows, setRows] = useState(() =>
    deadlineOrder
      .map(
        (kind) =>
          event.deadlines.find((deadline) => deadline.kind === kind) ?? { kind, date: '', time: '23:59' },
      )
      .map(({ kind, date, time }): DeadlineInput => ({ kind, date, time })),
  );
  const save = useReplaceDeadlines(event.slug);
  const put = (index: number, change: Partial<DeadlineInput>) =>
    setRows(rows.map((row, i) => (i === index ? { ...row, ...change } : row)));
  const submit = (e: React.FormEvent) => {
    e.preventDefault();
    save.mutate(
      { version: event.version, deadlines: rows.filter((row) => row.date !== '') },
      { onSuccess: () => toast('Deadlines saved.') },
    );
  };
  return (
    <form noValidate className="max-w-[820px]" onSubmit={submit}>
      <p className="mb-3 text-ink2">
        Times are in {event.timeZone}. They stand on the run-up line and on the public page.
      </p>
      {rows.map((row, index) => (
        <fieldset
          key={row.kind}
          className="grid grid-cols-[1fr_160px_110px_220px] items-center gap-3 border-t border-rule py-1.5 max-md:grid-cols-2"
        >
          <legend className="sr-only">{deadlineNames[row.kind]}</legend>
          <span className="font-semibold">{deadlineNames[row.kind]}</span>
          <Input
            dense
            hideLabel
            label={`${deadlineNames[row.kind]}: date`}
            type="date"
            value={row.date}
            onChange={(e) => put(index, { date: e.target.value })}
          />
          <Input
            dense
            hideLabel
            label={`${deadlineNames[row.kind]}: time`}
            type="time"
            value={row.time}
            onChange={(e) => put(index, { time: e.target.value })}
          />
          <span className="text-dense text-ink3">
            {row.date && row.time && ownZone() !== event.timeZone
              ? `for you ${formatInstant(localToInstant(row.date, row.time, event.timeZone), ownZone(), false)}`
              : ''}
          </span>
        </fieldset>
      ))}
      {save.error && (
        <p role="alert" className="mt-3 font-semibold text-alarm">
          {sentenceOf(save.error)}
        </p>
      )}
      <div className="mt-5">
        <Button type="submit" variant="primary" busy={save.isPending}>
          Save the deadlines
        </Button>
      </div>
    </form>
  );
}
