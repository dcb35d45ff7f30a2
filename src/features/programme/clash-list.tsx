import { useEffect, useState } from 'react';
import { clashKey, type Clash } from '@shared/features/programme/timetable/clash';
import { remediesFor, type Remedy } from '@shared/features/programme/timetable/remedies';
import type { Placement } from '@shared/features/programme/timetable/problem';
import { count } from '@shared/lib/text';
import { Button } from '@/components/button';
import { Sign } from '@/components/sign';
import type { Composer } from './use-composer';

export type Target = { at: Placement; words: string } | null;

const shownAtOnce = 12;

/** Clashes before wishes. First what is wrong, then one remedy as a button and the number of other ways. */
export function ClashList({
  composer,
  onTarget,
}: {
  composer: Composer;
  onTarget: (target: Target) => void;
}) {
  const { clashes, concerns, laid, problem } = composer;
  const [all, setAll] = useState(false);
  const shown = all ? clashes : clashes.slice(0, shownAtOnce);
  return (
    <section aria-labelledby="clash-head" className="border-t border-rule px-4 py-3">
      <div className="mb-1.5 flex items-baseline justify-between gap-3">
        <h2 id="clash-head" className="font-semibold" tabIndex={-1}>
          Clashes
        </h2>
        <p className="flex gap-3 text-dense" role="status">
          {clashes.length > 0 && (
            <span className="flex gap-1">
              <Sign kind="must" /> {clashes.length} must be settled
            </span>
          )}
          {concerns.length > 0 && (
            <span className="flex gap-1">
              <Sign kind="wish" /> {concerns.length} worth a look
            </span>
          )}
        </p>
      </div>
      {clashes.length === 0 && (
        <>
          <p className="font-serif text-[16px] leading-5">No clashes.</p>
          <p className="text-dense text-ink3">
            Checked: {count(laid.length, 'talk')}, {count(problem.rooms.length, 'room')},{' '}
            {count(problem.persons.filter((one) => one.arrival ?? one.departure).length, 'stay')}.
          </p>
        </>
      )}
      <ul>
        {shown.map((clash) => (
          <ClashRow key={clashKey(clash)} clash={clash} composer={composer} onTarget={onTarget} />
        ))}
        {concerns.slice(0, shownAtOnce).map((concern) => (
          <li key={clashKey(concern)} className="border-b border-rule py-2 text-dense last:border-b-0">
            <Sentence clash={concern} kind="wish" composer={composer} />
          </li>
        ))}
      </ul>
      {clashes.length > shown.length && (
        <Button variant="link" onClick={() => setAll(true)}>
          {clashes.length - shown.length} more below
        </Button>
      )}
    </section>
  );
}

function Sentence({ clash, kind, composer }: { clash: Clash; kind: 'must' | 'wish'; composer: Composer }) {
  return (
    <button
      type="button"
      className="flex w-full items-start gap-2 text-left"
      onClick={() => composer.choose(clash.items.at(-1) ?? null)}
    >
      <Sign kind={kind} label={kind === 'must' ? 'Clash' : 'Wish'} />
      <span>
        <strong className="font-semibold">{clash.title}</strong>
        {clash.sentence.slice(clash.title.length)}
      </span>
    </button>
  );
}

function ClashRow({
  clash,
  composer,
  onTarget,
}: {
  clash: Clash;
  composer: Composer;
  onTarget: (target: Target) => void;
}) {
  const remedies = useRemedies(clash, composer);
  const [open, setOpen] = useState(false);
  const touched = composer.chosen !== null && clash.items.includes(composer.chosen);
  const [best, ...others] = remedies ?? [];
  return (
    <li
      className={`-mx-4 border-b border-rule px-4 py-2 text-dense last:border-b-0 ${touched ? 'bg-actwash' : ''}`}
    >
      <Sentence clash={clash} kind="must" composer={composer} />
      {composer.draft.can.change && (
        <div className="mt-1.5 ml-[22px] flex flex-wrap items-center gap-x-3 gap-y-1.5">
          {best && <RemedyButton remedy={best} composer={composer} onTarget={onTarget} />}
          {others.length > 0 && !open && (
            <Button variant="link" aria-expanded={false} onClick={() => setOpen(true)}>
              {count(others.length, 'other way')}
            </Button>
          )}
          {open &&
            others.map((remedy) => (
              <RemedyButton key={remedy.label} remedy={remedy} composer={composer} onTarget={onTarget} />
            ))}
          {remedies?.length === 0 && <span className="text-ink3">{noWay(clash, composer)}</span>}
        </div>
      )}
    </li>
  );
}

const noWay = (clash: Clash, { at }: Composer): string =>
  clash.items.every((item) => at.get(item)?.fixed)
    ? 'All of these are fixed. Release one first.'
    : 'No single move settles this.';

function RemedyButton({
  remedy,
  composer,
  onTarget,
}: {
  remedy: Remedy;
  composer: Composer;
  onTarget: (target: Target) => void;
}) {
  const [first] = remedy.moves;
  const show = (): void => {
    const name = first && composer.cards.get(first.item)?.label;
    onTarget(first?.to ? { at: first.to, words: `${name} would go here` } : null);
  };
  const hide = (): void => onTarget(null);
  const settle = (): void => {
    hide();
    composer.move(remedy.moves);
  };
  return (
    <Button
      onClick={settle}
      onMouseEnter={show}
      onMouseLeave={hide}
      onFocus={show}
      onBlur={hide}
      className="min-h-[26px] max-w-full py-0.5 text-left whitespace-normal!"
    >
      {remedy.label}
    </Button>
  );
}

/** Remedies of a clash, found after the paint: each is verified, which in a crowded programme takes a while. */
function useRemedies(clash: Clash, { problem, laid }: Composer): Remedy[] | undefined {
  const [found, setFound] = useState<Remedy[]>();
  const key = clashKey(clash);
  useEffect(() => {
    return whenIdle(() => setFound(remediesFor(problem, laid, clash)));
    // eslint-disable-next-line react-hooks/exhaustive-deps -- a clash with the same key is the same clash
  }, [key, problem, laid]);
  return found;
}

/** Runs work between inputs, so that a crowded list does not hold up the next drag. Returns the way to call it off. */
function whenIdle(work: () => void): () => void {
  if (typeof requestIdleCallback !== 'function') {
    const timer = setTimeout(work, 30);
    return () => clearTimeout(timer);
  }
  const handle = requestIdleCallback(work, { timeout: 1500 });
  return () => cancelIdleCallback(handle);
}
