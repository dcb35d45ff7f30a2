import type { EventDropArg } from '@fullcalendar/core';
import dayGridPlugin from '@fullcalendar/daygrid';
import interactionPlugin, { type DropArg } from '@fullcalendar/interaction';
import FullCalendar from '@fullcalendar/react';
import { useMemo } from 'react';
import { clock, dayName } from '@shared/features/programme/timetable/words';
import { addDays, daysBetween, timeOf } from '@shared/lib/time';
import { kindClass } from '@/components/kind-tag';
import { Sign } from '@/components/sign';
import { speakersOf } from './tile';
import { placeInWords, type Composer } from './use-composer';
import './calendar.css';

/** The whole event on one sheet: a line per talk. Dragging changes the day and keeps hour and room. */
export function OverviewCalendar({
  composer,
  days,
}: {
  composer: Composer;
  days: readonly (readonly number[])[];
}) {
  const { draft, laid, problem, cards, chosen } = composer;
  const { startsOn } = draft.event;
  const first = addDays(startsOn, mondayBefore(startsOn));
  const inClash = useMemo(
    () => new Set(composer.clashes.flatMap((clash) => clash.items)),
    [composer.clashes],
  );
  const shown = new Set(
    days.flat().map((day) => new Date(`${addDays(startsOn, day)}T00:00:00Z`).getUTCDay()),
  );
  const events = useMemo(
    () =>
      laid.map((at) => ({
        id: at.item,
        start: `${addDays(startsOn, at.day)}T${timeOf(at.start)}:00Z`,
        allDay: false,
        editable: draft.can.change && !at.fixed,
        classNames: at.item === chosen ? ['is-chosen'] : [],
      })),
    [laid, startsOn, chosen, draft.can.change],
  );
  const dropped = ({ event, revert }: EventDropArg): void => {
    const at = composer.at.get(event.id);
    const day = event.start ? daysBetween(startsOn, event.start.toISOString()) : -1;
    if (!at || day < 0 || day >= problem.days || !composer.move([{ item: at.item, to: { ...at, day } }]))
      revert();
  };
  const fromTray = ({ draggedEl, date }: DropArg): void => {
    const day = daysBetween(startsOn, date.toISOString());
    const talkId = draggedEl.dataset.talk;
    if (!talkId || day < 0 || day >= problem.days) return;
    composer.askWhere(talkId, dayName(problem, day).toLowerCase());
  };
  return (
    <div className="overview-calendar">
      <FullCalendar
        key={startsOn}
        plugins={[dayGridPlugin, interactionPlugin]}
        initialView="whole"
        views={{ whole: { type: 'dayGrid', duration: { weeks: days.length } } }}
        timeZone="UTC"
        firstDay={1}
        initialDate={first}
        hiddenDays={[0, 1, 2, 3, 4, 5, 6].filter((weekday) => !shown.has(weekday))}
        headerToolbar={false}
        height="100%"
        dayMaxEvents
        editable={draft.can.change}
        droppable={draft.can.change}
        eventInteractive
        eventDisplay="block"
        eventOrder="start,id"
        events={events}
        eventDidMount={({ el, event }) => {
          el.dataset.talk = event.id;
        }}
        eventClick={({ event }) => composer.choose(event.id)}
        eventDrop={dropped}
        drop={fromTray}
        eventContent={({ event }) => {
          const card = cards.get(event.id);
          const at = composer.at.get(event.id);
          if (!card || !at) return null;
          return (
            <div
              className={`tile kind kind-tint ${kindClass[card.kind] ?? ''}`}
              title={placeInWords(problem, at)}
            >
              <span className="text-ink2">{clock(at.start)}</span>{' '}
              <span className="kind-word">{card.word}</span> {speakersOf(card, false)}
              {inClash.has(at.item) && (
                <span className="tile-signs">
                  <Sign kind="must" label="clashes" />
                </span>
              )}
            </div>
          );
        }}
      />
    </div>
  );
}

/** Days back from a date to its Monday, as a negative number. */
const mondayBefore = (date: string): number => -((new Date(`${date}T00:00:00Z`).getUTCDay() + 6) % 7);
