import { Draggable } from '@fullcalendar/interaction';
import { useEffect, useMemo, useRef } from 'react';
import type { TalkCard } from '@shared/features/programme/programme.contract';
import { indexOf } from '@shared/features/programme/timetable/problem-index';
import { featureWord } from '@shared/features/programme/timetable/words';
import { listInWords } from '@shared/lib/text';
import { timeOf } from '@shared/lib/time';
import { kindClass } from '@/components/kind-tag';
import { plainTitle } from './plain-title';
import { speakersOf } from './tile';
import type { Composer } from './use-composer';

/** What is to be placed. Each card can be dragged to a time, or moved by M. */
export function Tray({ composer }: { composer: Composer }) {
  const { draft, at, chosen } = composer;
  const list = useRef<HTMLUListElement>(null);
  const cards = useMemo(() => draft.cards.filter((card) => !at.has(card.talkId)), [draft.cards, at]);
  useDraggableCards(list, draft.can.change);
  return (
    <section aria-labelledby="tray-head" className="tray flex min-h-0 flex-col border-r border-rule bg-paper">
      <div className="px-4 pt-3 pb-2">
        <div className="flex items-baseline justify-between">
          <h2 id="tray-head" className="font-semibold">
            To be placed
          </h2>
          <span className="text-ink3">{cards.length}</span>
        </div>
        {cards.length > 0 && (
          <p className="text-dense text-ink3">
            Drag to a time, or press <kbd className="rounded-sign border border-field px-1.5">M</kbd> and type
            one.
          </p>
        )}
      </div>
      <ul ref={list} className="min-h-0 grow overflow-y-auto px-4 pb-4" aria-label="Talks to be placed">
        {cards.map((card) => (
          <TrayCard key={card.talkId} card={card} composer={composer} chosen={card.talkId === chosen} />
        ))}
        {cards.length === 0 && <EmptyTray talks={draft.cards.length} />}
      </ul>
    </section>
  );
}

function EmptyTray({ talks }: { talks: number }) {
  return (
    <li className="py-2">
      <p className="font-serif text-[16px] leading-5">
        {talks === 0 ? 'There are no talks yet.' : 'Everything is placed.'}
      </p>
      <p className="mt-1 text-dense text-ink3">
        {talks === 0
          ? 'Invite a speaker under Talks; accepted talks appear here.'
          : `${talks} talks stand on the calendar.`}
      </p>
    </li>
  );
}

function TrayCard({ card, composer, chosen }: { card: TalkCard; composer: Composer; chosen: boolean }) {
  const note = useMemo(() => noteOf(card, composer), [card, composer]);
  return (
    <li className="mb-1.5">
      <button
        type="button"
        data-talk={card.talkId}
        data-minutes={card.minutes}
        aria-pressed={chosen}
        onClick={() => composer.choose(card.talkId)}
        className={`kind kind-tint ${kindClass[card.kind] ?? ''} block w-full cursor-grab py-1 pr-1.5 text-left text-tile ${
          chosen ? 'outline-2 outline-act' : ''
        }`}
      >
        <span className="flex justify-between gap-2">
          <span className="kind-word">{card.word}</span>
          <span className="shrink-0 text-ink2">{card.minutes} min</span>
        </span>
        <span className="block font-serif text-[13px] leading-[15px]">
          {plainTitle(card.title) || 'No title yet'}
        </span>
        <span className="block text-ink2">{speakersOf(card, true)}</span>
        {note && <span className="block text-ink2 italic">{note}</span>}
      </button>
    </li>
  );
}

/** What to heed when placing it: what it follows, what it needs, when its people are there. */
function noteOf(card: TalkCard, { problem }: Composer): string {
  const index = indexOf(problem);
  const before = (index.prerequisites.get(card.talkId) ?? []).filter((pair) => pair.after === card.talkId);
  const item = index.item.get(card.talkId);
  const lecture = item?.exerciseOf;
  const previous = item?.course
    ? (index.lectures.get(item.course) ?? []).filter((one) => (one.number ?? 0) < (item.number ?? 0)).at(-1)
    : undefined;
  const after = [
    ...(lecture ? [lecture] : []),
    ...(previous ? [previous.id] : []),
    ...before.map((pair) => pair.before),
  ];
  const names = after.flatMap((id) => index.item.get(id)?.label ?? []);
  if (names.length > 0) return `after ${listInWords(names.slice(0, 3))}`;
  return card.needs.map(featureWord).join(', ');
}

/** Makes cards draggable onto the calendar; marks the one in the hand, so that the calendar can judge it. */
function useDraggableCards(list: React.RefObject<HTMLUListElement | null>, enabled: boolean): void {
  useEffect(() => {
    const element = list.current;
    if (!element || !enabled) return;
    const mark = (event: PointerEvent): void => {
      unmark();
      (event.target as Element).closest('[data-talk]')?.classList.add('is-dragged');
    };
    const unmark = (): void => {
      for (const card of element.querySelectorAll('.is-dragged')) card.classList.remove('is-dragged');
    };
    element.addEventListener('pointerdown', mark);
    const draggable = new Draggable(element, {
      itemSelector: '[data-talk]',
      eventData: (card) => ({
        title: card.querySelector('.font-serif')?.textContent ?? '',
        duration: timeOf(Number(card.dataset.minutes ?? 60)),
        create: false,
      }),
    });
    return () => {
      draggable.destroy();
      element.removeEventListener('pointerdown', mark);
    };
  }, [list, enabled]);
}
