import { useMemo, useState, type KeyboardEvent } from 'react';
import { parseMove, rankPlaces, typedPlaces } from '@shared/features/programme/move-query';
import { possiblePlaces, type PossiblePlace } from '@shared/features/programme/timetable/places';
import { clock, dayName, featureWord, shortDay } from '@shared/features/programme/timetable/words';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Input } from '@/components/field';
import { Sign } from '@/components/sign';
import { roomOf, seatsOf, type Composer } from './use-composer';

const shownAtOnce = 8;

/** Type when and where; places that fit come first and say what follows. Arrows choose, Enter moves, Escape leaves it. */
export function MoveDialog({ composer }: { composer: Composer }) {
  if (!composer.moving) return null;
  return (
    <MoveForm key={composer.moving.talkId + composer.moving.typed} composer={composer} {...composer.moving} />
  );
}

function MoveForm({ composer, talkId, typed }: { composer: Composer; talkId: string; typed: string }) {
  const { problem, laid } = composer;
  const card = composer.cards.get(talkId);
  const [text, setText] = useState(typed);
  const [row, setRow] = useState(0);
  const query = useMemo(() => parseMove(problem, text), [problem, text]);
  const places = useMemo(
    () =>
      rankPlaces(possiblePlaces(problem, laid, talkId, typedPlaces(problem, query)), query).slice(
        0,
        shownAtOnce,
      ),
    [problem, laid, talkId, query],
  );
  const picked = places[Math.min(row, places.length - 1)];

  const go = (place: PossiblePlace | undefined): void => {
    if (place && composer.move(place.moves)) composer.closeMove();
  };
  const keys = (event: KeyboardEvent): void => {
    const step = { ArrowDown: 1, ArrowUp: -1 }[event.key];
    if (step) {
      event.preventDefault();
      setRow((now) => Math.max(0, Math.min(places.length - 1, now + step)));
    } else if (event.key === 'Enter') {
      event.preventDefault();
      go(picked);
    }
  };
  if (!card) return null;
  const needs = [`${card.minutes} min`, ...card.needs.map(featureWord), ...seatsOf(card)].join(', ');
  return (
    <Dialog open onClose={composer.closeMove} title={`Move ${card.word}`} aside={needs} width={560}>
      <Input
        label="When and where"
        value={text}
        placeholder="thu 9, 11:25, a room"
        autoFocus
        autoComplete="off"
        role="combobox"
        aria-expanded
        aria-controls="move-places"
        aria-activedescendant={picked ? `move-place-${places.indexOf(picked)}` : undefined}
        error={
          query.unknown.length > 0
            ? `“${query.unknown.join(' ')}” is neither a day, a time nor a room here.`
            : undefined
        }
        onChange={(event) => {
          setText(event.target.value);
          setRow(0);
        }}
        onKeyDown={keys}
      />
      <Places composer={composer} places={places} picked={picked} onPick={(i) => setRow(i)} onGo={go} />
      <div className="mt-4 flex flex-wrap items-center gap-2.5">
        <Button variant="primary" disabled={!picked} onClick={() => go(picked)}>
          {picked ? `Move to ${shortDay(problem, picked.to.day)} ${clock(picked.to.start)}` : 'Move it'}
        </Button>
        <Button onClick={composer.closeMove}>Leave it</Button>
        <span className="text-dense text-ink3">↑ ↓ choose, Enter moves, Esc leaves</span>
      </div>
    </Dialog>
  );
}

interface PlacesProps {
  composer: Composer;
  places: readonly PossiblePlace[];
  picked: PossiblePlace | undefined;
  onPick: (row: number) => void;
  onGo: (place: PossiblePlace) => void;
}

function Places({ composer, places, picked, onPick, onGo }: PlacesProps) {
  const { problem } = composer;
  if (places.length === 0) {
    return <p className="mt-4 font-serif text-[16px]">No place in the session blocks answers this.</p>;
  }
  return (
    <div
      id="move-places"
      role="listbox"
      aria-label="Places"
      className="mt-4 border-y-[1.75px] border-ink text-dense"
    >
      <div
        aria-hidden="true"
        className="grid grid-cols-[132px_116px_1fr] gap-2 border-b border-ink py-1 font-semibold text-ink2 max-sm:hidden"
      >
        <span>Time</span>
        <span>Room</span>
        <span>What follows</span>
      </div>
      {places.map((place, i) => (
        <div
          key={`${place.to.day} ${place.to.start} ${place.to.room}`}
          id={`move-place-${i}`}
          role="option"
          aria-selected={place === picked}
          onClick={() => onPick(i)}
          onDoubleClick={() => onGo(place)}
          className={`grid cursor-pointer grid-cols-[132px_116px_1fr] items-center gap-x-2 max-sm:grid-cols-[1fr_auto] max-sm:py-2.5 border-b border-rule py-1.5 last:border-b-0 ${
            place === picked ? 'bg-actwash' : 'hover:bg-wash'
          }`}
        >
          <span className="font-semibold">
            {dayName(problem, place.to.day)} {clock(place.to.start)}
          </span>
          <span>{roomOf(problem, place.to.room)}</span>
          <WhatFollows place={place} />
        </div>
      ))}
    </div>
  );
}

function WhatFollows({ place: { fits, follows } }: { place: PossiblePlace }) {
  if (!fits) {
    return (
      <span className="flex items-start gap-1.5 max-sm:col-span-2">
        <Sign kind="must" label="Clash:" /> {follows}
      </span>
    );
  }
  return (
    <span className="max-sm:col-span-2">
      <strong className="font-semibold text-good">Fits.</strong>
      {follows.replace(/^Fits\./, '')}
    </span>
  );
}
