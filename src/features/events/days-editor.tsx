import { useMemo, useState } from 'react';
import {
  blockKinds,
  type BlockInput,
  type BlockKind,
  type EventDetail,
} from '@shared/features/events/events.contract';
import { blockErrors, blockKindNames, copyDay } from '@shared/features/events/events.rules';
import { datesBetween, formatDate } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Input, Select } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { useReplaceDayFrames } from './events.queries';

const kinds = blockKinds.map((value) => ({ value, label: blockKindNames[value] }));
const usual: [string, string, BlockKind, number | null][] = [
  ['09:00', '10:30', 'session', null],
  ['10:30', '11:00', 'coffee', 15],
  ['11:00', '12:30', 'session', null],
  ['12:30', '14:00', 'lunch', 60],
  ['14:00', '15:30', 'session', null],
  ['15:30', '16:00', 'coffee', 15],
  ['16:00', '17:30', 'session', null],
];

/** The frame of each day: session blocks, coffee, lunch, social; copied over days. */
export function DaysEditor({ event }: { event: EventDetail }) {
  const days = datesBetween(event.startsOn, event.endsOn);
  const [day, setDay] = useState(days[0] ?? event.startsOn);
  const [blocks, setBlocks] = useState<BlockInput[]>(() =>
    event.blocks.map(({ id, ...fields }) => ({ id, ...fields })),
  );
  const save = useReplaceDayFrames(event.slug);
  const errors = useMemo(
    () => ({ ...fieldErrors(save.error), ...blockErrors(blocks, event) }),
    [blocks, event, save.error],
  );
  const put = (index: number, change: Partial<BlockInput>) =>
    setBlocks(blocks.map((block, i) => (i === index ? { ...block, ...change } : block)));
  const own = blocks
    .map((block, index) => ({ block, index }))
    .filter(({ block }) => block.day === day)
    .sort((a, b) => a.block.startsAt.localeCompare(b.block.startsAt));
  const add = () =>
    setBlocks([
      ...blocks,
      {
        day,
        startsAt: own.at(-1)?.block.endsAt ?? '09:00',
        endsAt: '18:00',
        kind: 'session',
        title: '',
        minimalMinutes: null,
      },
    ]);
  const addUsual = () =>
    setBlocks([
      ...blocks,
      ...usual.map(([startsAt, endsAt, kind, minimalMinutes]) => ({
        day,
        startsAt,
        endsAt,
        kind,
        title: '',
        minimalMinutes,
      })),
    ]);
  const copy = () => {
    setBlocks(copyDay(blocks, day, days));
    toast(`${formatDate(day)} copied to all days. Save to keep it.`);
  };
  return (
    <form
      noValidate
      className="grid max-w-[980px] gap-6 md:grid-cols-[180px_1fr]"
      onSubmit={(e) => {
        e.preventDefault();
        save.mutate(
          { version: event.version, blocks },
          {
            onSuccess: (saved) => {
              setBlocks(saved.blocks.map(({ id, ...fields }) => ({ id, ...fields })));
              toast('Days saved.');
            },
          },
        );
      }}
    >
      <ul className="border-y-[1.75px] border-ink">
        {days.map((date) => (
          <li key={date} className="border-b border-rule last:border-b-0">
            <button
              type="button"
              aria-current={date === day}
              onClick={() => setDay(date)}
              className={`flex min-h-[32px] w-full items-center justify-between px-2 text-left ${date === day ? 'bg-actwash font-semibold' : 'hover:bg-wash'}`}
            >
              {formatDate(date, { short: true })}
              <span className="text-dense font-normal text-ink3">
                {blocks.filter((block) => block.day === date && block.kind === 'session').length} blocks
              </span>
            </button>
          </li>
        ))}
      </ul>
      <div>
        <h2 className="mb-3 font-serif text-[20px]">{formatDate(day, { year: true })}</h2>
        {own.length === 0 && (
          <p className="mb-4">
            This day has no frame yet.{' '}
            <Button variant="link" onClick={addUsual}>
              Begin with a usual day
            </Button>
          </p>
        )}
        {own.map(({ block, index }) => (
          <fieldset
            key={block.id ?? `new${index}`}
            className="grid grid-cols-[110px_110px_130px_1fr_110px_auto] items-start gap-2 border-t border-rule py-2 max-md:grid-cols-2"
          >
            <legend className="sr-only">
              {blockKindNames[block.kind]} {block.startsAt}
            </legend>
            <Input
              dense
              label="From"
              type="time"
              step={300}
              value={block.startsAt}
              onChange={(e) => put(index, { startsAt: e.target.value })}
              error={errors[`blocks.${index}.startsAt`]}
            />
            <Input
              dense
              label="To"
              type="time"
              step={300}
              value={block.endsAt}
              onChange={(e) => put(index, { endsAt: e.target.value })}
              error={errors[`blocks.${index}.endsAt`]}
            />
            <Select
              dense
              label="Kind"
              options={kinds}
              value={block.kind}
              onChange={(e) => put(index, { kind: e.target.value as BlockKind })}
            />
            <Input
              dense
              label="Title"
              optional
              value={block.title}
              onChange={(e) => put(index, { title: e.target.value })}
            />
            {block.kind !== 'session' ? (
              <Input
                dense
                label="At least, min"
                optional
                type="number"
                min={0}
                value={block.minimalMinutes ?? ''}
                onChange={(e) =>
                  put(index, { minimalMinutes: e.target.value === '' ? null : Number(e.target.value) })
                }
                error={errors[`blocks.${index}.minimalMinutes`]}
              />
            ) : (
              <span />
            )}
            <Button
              variant="link"
              className="mt-6"
              onClick={() => setBlocks(blocks.filter((_b, i) => i !== index))}
            >
              Remove
            </Button>
            {errors[`blocks.${index}.day`] && (
              <p className="col-span-full text-dense font-semibold text-alarm">
                {errors[`blocks.${index}.day`]}
              </p>
            )}
          </fieldset>
        ))}
        {save.error && (
          <p role="alert" className="mt-3 font-semibold text-alarm">
            {sentenceOf(save.error)}
          </p>
        )}
        <div className="mt-5 flex flex-wrap gap-2">
          <Button type="submit" variant="primary" busy={save.isPending}>
            Save the days
          </Button>
          <Button onClick={add}>Add a block</Button>
          {own.length > 0 && days.length > 1 && <Button onClick={copy}>Copy this day to all days</Button>}
        </div>
      </div>
    </form>
  );
}
