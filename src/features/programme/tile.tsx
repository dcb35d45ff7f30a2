import { Pin } from 'lucide-react';
import type { TalkCard } from '@shared/features/programme/programme.contract';
import { clock } from '@shared/features/programme/timetable/words';
import { endOf, type Placement } from '@shared/features/programme/timetable/problem';
import { kindClass } from '@/components/kind-tag';
import { Sign } from '@/components/sign';
import { plainTitle } from './plain-title';
import './tile.css';

export const speakersOf = (card: TalkCard, full: boolean): string =>
  card.people
    .filter((person) => person.part === 'speaker' || person.part === 'tutor')
    .map((person) => (full ? person.printedName : person.shortName))
    .join(', ');

/** `Exercises A 3` does not fit a third of a narrow day. */
const shortWord = (word: string): string => word.replace('Exercises', 'Ex.');

/** A talk on the calendar: edge, tint and word of its kind, then what there is room for. */
export function Tile({
  card,
  at,
  wide,
  clash,
  fixed,
  label,
}: {
  card: TalkCard;
  at: Placement;
  wide: boolean;
  clash: boolean;
  fixed: boolean;
  label: string;
}) {
  const oneLine = at.minutes <= 25;
  const who = speakersOf(card, wide && !oneLine);
  const word = wide ? card.word : shortWord(card.word);
  return (
    <div className={`tile kind kind-tint ${kindClass[card.kind] ?? ''}`} data-line={oneLine}>
      <span className="sr-only">{label}</span>
      <div aria-hidden="true" className="tile-text">
        <div className="tile-head">
          <span className="kind-word">{word}</span> {wide && <Hours at={at} whole={!oneLine} />}
          {(!wide || oneLine) && <span>{who}</span>}
        </div>
        {!oneLine && <div className="tile-title">{plainTitle(card.title)}</div>}
        {!oneLine && wide && <div className="text-ink2">{who}</div>}
      </div>
      {(clash || fixed) && (
        <span className="tile-signs" aria-hidden="true">
          {fixed && <Pin size={11} strokeWidth={2} />}
          {clash && <Sign kind="must" />}
        </span>
      )}
    </div>
  );
}

/** `11:25–12:15`; where the lane is too narrow, or the talk too short, only the start. */
function Hours({ at, whole }: { at: Placement; whole: boolean }) {
  return (
    <span className="text-ink2">
      {clock(at.start)}
      {whole && <span className="tile-end">–{clock(endOf(at))}</span>}{' '}
    </span>
  );
}
