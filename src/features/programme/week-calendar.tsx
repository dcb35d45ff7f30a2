import type { EventContentArg, EventDropArg } from '@fullcalendar/core';
import interactionPlugin, { type DropArg, type EventResizeDoneArg } from '@fullcalendar/interaction';
import FullCalendar from '@fullcalendar/react';
import timeGridPlugin from '@fullcalendar/timegrid';
import { useMemo, useRef } from 'react';
import { moveChecker } from '@shared/features/programme/timetable/check';
import type { Clash } from '@shared/features/programme/timetable/clash';
import type { Placement } from '@shared/features/programme/timetable/problem';
import { clock, whenOf } from '@shared/features/programme/timetable/words';
import { addDays, daysBetween, formatDate, instantToLocal, timeOf, zoneName } from '@shared/lib/time';
import { awayEvents, closedEvents, hoursOf, talkEvents, targetEvents } from './calendar-events';
import { columnsOf, fromStandIn, spanAt, standInDate, standInStart, type Column } from './calendar-columns';
import { DayHead } from './day-head';
import { showHint } from './drag-hint';
import { plainTitle } from './plain-title';
import { Tile } from './tile';
import { placeInWords, roomOf, type Composer, type Laid } from './use-composer';
import './calendar.css';

interface Props {
  composer: Composer;
  /** Day numbers shown. */
  days: readonly number[];
  lens: number;
  onLens: (day: number) => void;
  target: { at: Placement; words: string } | null;
}

/** A week with a lens day: one lane per room there, one column for every other day. Drag, drop from the tray, resize. */
export function WeekCalendar({ composer, days, lens, onLens, target }: Props) {
  const { problem, laid, chosen, draft } = composer;
  const columns = useMemo(() => columnsOf(problem, days, lens), [problem, days, lens]);
  const hours = useMemo(() => hoursOf(problem, laid), [problem, laid]);
  const events = useMemo(
    () => [
      ...closedEvents(problem, columns, draft.bands, hours),
      ...awayEvents(problem, columns, chosen),
      ...targetEvents(columns, laid, target?.at ?? null, target?.words ?? ''),
      ...talkEvents(problem, columns, laid, {
        chosen,
        target: target?.at ?? null,
        editable: draft.can.change,
      }),
    ],
    [problem, columns, hours, laid, chosen, target, draft.bands, draft.can.change],
  );
  const drag = useDragging(composer, columns);
  const inClash = useMemo(
    () => new Set(composer.clashes.flatMap((clash) => clash.items)),
    [composer.clashes],
  );

  return (
    <div className="week-calendar" style={{ '--lanes': problem.rooms.length } as React.CSSProperties}>
      <style>{widthRules(columns)}</style>
      <span className="zone-name">{zoneName(`${draft.event.startsOn}T12:00:00Z`, draft.event.timeZone)}</span>
      <FullCalendar
        key={`${days.join()} ${columns.length}`}
        plugins={[timeGridPlugin, interactionPlugin]}
        initialView="timeGrid"
        timeZone="UTC"
        initialDate={standInStart}
        visibleRange={{ start: standInStart, end: standInDate(columns.length) }}
        headerToolbar={false}
        allDaySlot={false}
        slotEventOverlap={false}
        eventOrder="room,start,id"
        eventOrderStrict
        slotMinTime={`${timeOf(hours.from)}:00`}
        slotMaxTime={`${timeOf(hours.to)}:00`}
        // Rows as fine as the snap: FullCalendar aims with the middle of the row that was gripped, and with rows of
        // half an hour every drag by the upper edge would end a quarter of an hour late.
        slotDuration="00:05:00"
        slotLabelInterval="00:30"
        slotLabelContent={({ date }) => (date.getUTCMinutes() === 0 ? clock(date.getUTCHours() * 60) : '')}
        slotLaneClassNames={({ date }) => (date && date.getUTCMinutes() === 0 ? 'is-hour' : '')}
        snapDuration="00:05:00"
        height="100%"
        expandRows
        editable={draft.can.change}
        droppable={draft.can.change}
        eventInteractive
        nowIndicator
        now={() => nowIn(columns, draft.event)}
        dragScroll
        events={events}
        dayHeaderContent={({ date }) => {
          const column = fromStandIn(columns, date)?.column;
          return (
            column && (
              <DayHead composer={composer} column={column} lens={column.day === lens} onLens={onLens} />
            )
          );
        }}
        dayHeaderClassNames={({ date }) => columnClass(fromStandIn(columns, date)?.column, lens)}
        dayCellClassNames={({ date }) => columnClass(fromStandIn(columns, date)?.column, lens)}
        eventDidMount={({ el, event }) => {
          if (event.display !== 'background') el.dataset.talk = event.id;
        }}
        eventContent={(arg) => <Content arg={arg} composer={composer} inClash={inClash} />}
        eventClick={({ event }) => composer.choose(event.id)}
        eventDragStart={({ event }) => drag.begin(event.id)}
        eventDragStop={drag.end}
        eventResizeStart={({ event }) => composer.choose(event.id)}
        eventAllow={(span, event) => {
          drag.over(span.start, event?.id);
          return true;
        }}
        selectAllow={(span) => {
          drag.over(span.start, undefined); // this is asked for what comes from the tray
          return true;
        }}
        eventDrop={drag.dropped}
        eventResize={drag.resized}
        drop={drag.dropFromTray}
        eventDragMinDistance={4}
      />
    </div>
  );
}

function Content({
  arg,
  composer,
  inClash,
}: {
  arg: EventContentArg;
  composer: Composer;
  inClash: ReadonlySet<string>;
}) {
  const card = composer.cards.get(arg.event.id);
  const { at, wide } = arg.event.extendedProps as { at?: Laid; wide?: boolean };
  if (!card || !at) return <span className="band-label">{arg.event.title}</span>;
  const clash = inClash.has(at.item);
  const who = card.people.map((person) => person.printedName).join(', ');
  const state = `${at.fixed ? ', fixed' : ''}${clash ? ', clashes' : ''}`;
  const label = `${card.word}, ${plainTitle(card.title)}, ${who}, ${whenOf(composer.problem, at)}, ${roomOf(composer.problem, at.room)}${state}`;
  return <Tile card={card} at={at} wide={wide ?? false} clash={clash} fixed={at.fixed} label={label} />;
}

const columnClass = (column: Column | undefined, lens: number): string[] => {
  if (!column) return [];
  return [...(column.day === lens ? ['is-lens'] : []), ...(column.first ? ['is-first'] : [])];
};

/** The lens takes 44 % of the width, its lanes in equal parts; hit-testing follows unequal columns. */
function widthRules(columns: readonly Column[]): string {
  const lanes = columns.filter((column) => column.room !== null).length;
  if (lanes === 0 || lanes === columns.length) return '';
  const wide = Math.min(72, Math.max(44, lanes * 14));
  return columns
    .map(({ room }, i) =>
      room === null ? '' : `.week-calendar [data-date="${standInDate(i)}"]{width:${wide / lanes}%}`,
    )
    .join('');
}

/** What a drag asks and does. The others are laid out for checking once, when it begins. */
function useDragging(composer: Composer, columns: readonly Column[]) {
  const { problem, laid, at } = composer;
  const checker = useRef<{ item: string; check: (to: Placement) => Clash[] } | null>(null);

  const begin = (item: string): void => {
    composer.choose(item);
    checker.current = { item, check: moveChecker(problem, laid, item) };
  };
  const checkerOf = (item: string) => {
    if (checker.current?.item !== item) checker.current = { item, check: moveChecker(problem, laid, item) };
    return checker.current.check;
  };
  const minutesOf = (item: string): number =>
    at.get(item)?.minutes ?? problem.items.find((one) => one.id === item)?.minutes ?? 60;

  /** In a lane the room is the lane's. Elsewhere the present room, or the first that fits; undefined: ask. */
  const placementAt = (item: string, date: Date): { to: Placement; sure: boolean } | undefined => {
    const found = fromStandIn(columns, date);
    if (!found) return undefined;
    const base = { item, day: found.column.day, start: found.start, minutes: minutesOf(item) };
    if (found.column.room !== null) return { to: { ...base, room: found.column.room }, sure: true };
    const own = at.get(item)?.room;
    const rooms = [...(own ? [own] : []), ...problem.rooms.map((room) => room.id).filter((id) => id !== own)];
    const check = checkerOf(item);
    const fitting = rooms.find((room) => check({ ...base, room }).length === 0);
    const room = own && fitting === own ? own : fitting;
    return {
      to: { ...base, room: room ?? (rooms[0] as string) },
      sure: room !== undefined && (!own || room === own),
    };
  };

  const over = (date: Date, id: string | undefined): void => {
    const item = id || draggedFromTray();
    const place = item ? placementAt(item, date) : undefined;
    if (!item || !place) return;
    const clashes = checkerOf(item)(place.to).map((clash) => clash.sentence);
    showHint({ where: `${placeInWords(problem, place.to)}.`, clashes });
  };

  const go = (item: string, date: Date): boolean => {
    showHint(null);
    const place = placementAt(item, date);
    checker.current = null;
    if (!place) return false;
    if (place.sure) return composer.move([{ item, to: place.to }]);
    composer.askWhere(item, typedFor(composer, place.to));
    return false;
  };

  return {
    begin,
    over,
    end: () => showHint(null),
    dropped: ({ event, revert }: EventDropArg) => {
      if (!event.start || !go(event.id, event.start)) revert();
    },
    dropFromTray: ({ draggedEl, date }: DropArg) => {
      const item = draggedEl.dataset.talk;
      if (item) go(item, date);
    },
    resized: ({ event, revert }: EventResizeDoneArg) => {
      showHint(null);
      const from = at.get(event.id);
      const length = event.start && event.end ? (event.end.getTime() - event.start.getTime()) / 60_000 : 0;
      if (!from || length < problem.gridMinutes) return revert();
      composer.move([{ item: event.id, to: { ...from, minutes: length } }]);
    },
  };
}

/** The card under the mouse: the calendar tells nothing of what comes from outside. */
const draggedFromTray = (): string | undefined =>
  document.querySelector<HTMLElement>('.tray [data-talk].is-dragged')?.dataset.talk;

/** `9 july 11:25`, as somebody would type it. */
function typedFor({ draft }: Composer, to: Placement): string {
  const date = formatDate(addDays(draft.event.startsOn, to.day), { weekday: false });
  return `${date.toLowerCase()} ${timeOf(to.start)}`;
}

/** This minute in the stand-in days; far away when the event's week does not hold today. */
function nowIn(columns: readonly Column[], event: { startsOn: string; timeZone: string }): string {
  const { date, minute } = instantToLocal(new Date(), event.timeZone);
  const index = columns.findIndex((column) => column.day === daysBetween(event.startsOn, date));
  return index < 0 ? '1999-01-01T00:00:00Z' : spanAt(index, minute, minute).start;
}
