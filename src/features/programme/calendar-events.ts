import type { EventInput } from '@fullcalendar/core';
import type { Band } from '@shared/features/programme/programme.contract';
import { overlap } from '@shared/features/programme/timetable/check-two';
import { indexOf } from '@shared/features/programme/timetable/problem-index';
import type { Placement, Problem, Window } from '@shared/features/programme/timetable/problem';
import { daysBetween } from '@shared/lib/time';
import { columnIndex, spanAt, toStandIn, type Column } from './calendar-columns';
import type { Laid } from './use-composer';

/** The hours that the grid shows, from a half hour (so that the first full hour has room for its label) to a full one. */
export function hoursOf(problem: Problem, laid: readonly Placement[]): { from: number; to: number } {
  const starts = [...problem.blocks.map((block) => block.start), ...laid.map((p) => p.start)];
  const ends = [...problem.blocks.map((block) => block.end), ...laid.map((p) => p.start + p.minutes)];
  const from = Math.max(0, Math.floor((Math.min(540, ...starts) - 30) / 60) * 60 + 30);
  return { from, to: Math.min(1440, Math.ceil((Math.max(from + 480, ...ends) + 1) / 30) * 30) };
}

/** Talks as events of the grid, in the order of the rooms where they stand side by side. */
export function talkEvents(
  problem: Problem,
  columns: readonly Column[],
  laid: readonly Laid[],
  { chosen, target, editable }: { chosen: string | null; target: Placement | null; editable: boolean },
): EventInput[] {
  const position = new Map(problem.rooms.map((room, i) => [room.id, i]));
  return laid.flatMap((at) => {
    const span = toStandIn(columns, at);
    if (!span) return [];
    const wide = columns[columnIndex(columns, at)]?.room !== null;
    return [
      {
        id: at.item,
        ...span,
        editable: editable && !at.fixed,
        classNames: [
          ...(at.item === chosen ? ['is-chosen'] : []),
          ...(target && target.room === at.room && overlap(at, target) ? ['is-target-tile'] : []),
        ],
        extendedProps: { at, wide, room: position.get(at.room) ?? 0 },
      },
    ];
  });
}

const background = (column: number, start: number, end: number, kind: string, title = ''): EventInput => ({
  id: `${kind} ${column} ${start}`,
  ...spanAt(column, start, end),
  display: 'background',
  classNames: [kind],
  title,
});

/** Time outside the blocks, with the names of longer breaks in the first column. */
export function closedEvents(
  problem: Problem,
  columns: readonly Column[],
  bands: readonly Band[],
  hours: { from: number; to: number },
): EventInput[] {
  const { blocksOn } = indexOf(problem);
  return columns.flatMap(({ day }, column) => {
    const blocks = [...(blocksOn.get(day) ?? [])].sort((a, b) => a.start - b.start);
    const gaps: EventInput[] = [];
    let free = hours.from;
    for (const block of [...blocks, { start: hours.to, end: hours.to }]) {
      if (block.start > free) gaps.push(background(column, free, block.start, 'is-closed'));
      free = Math.max(free, block.end);
    }
    const named =
      column > 0 ? [] : bands.filter((band) => daysBetween(problem.startsOn ?? band.day, band.day) === day);
    const labels = named
      .filter((band) => band.endMinute - band.startMinute >= 30)
      .map((band) => background(column, band.startMinute, band.endMinute, 'is-band', band.title));
    return [...gaps, ...labels];
  });
}

/** Hatching where somebody whom the talk needs is away. */
export function awayEvents(
  problem: Problem,
  columns: readonly Column[],
  talkId: string | null,
): EventInput[] {
  const { item, person } = indexOf(problem);
  const needed = (talkId === null ? undefined : item.get(talkId))?.persons ?? [];
  return needed.flatMap((id) => {
    const who = person.get(id);
    if (!who) return [];
    return columns.flatMap(({ day }, column) =>
      awayOn(who, day).map(({ start, end }) =>
        background(column, start, end, 'is-away', `${who.shortName} away`),
      ),
    );
  });
}

function awayOn(who: Problem['persons'][number], day: number): Pick<Window, 'start' | 'end'>[] {
  const { arrival, departure, blocked } = who;
  const away = blocked.filter((window) => window.day === day).map(({ start, end }) => ({ start, end }));
  if (arrival && day <= arrival.day) away.push({ start: 0, end: day < arrival.day ? 1440 : arrival.minute });
  if (departure && day >= departure.day)
    away.push({ start: day > departure.day ? 0 : departure.minute, end: 1440 });
  return away.filter((window) => window.end > window.start);
}

/** Where a remedy would take a talk: a dashed frame, unless a tile stands there that wears it. */
export function targetEvents(
  columns: readonly Column[],
  laid: readonly Placement[],
  target: Placement | null,
  words: string,
): EventInput[] {
  const index = target ? columnIndex(columns, target) : -1;
  if (!target || index < 0 || laid.some((at) => at.room === target.room && overlap(at, target))) return [];
  return [background(index, target.start, target.start + target.minutes, 'is-target', words)];
}
