import { useCallback, useMemo, useState } from 'react';
import type { Draft, TalkCard } from '@shared/features/programme/programme.contract';
import { pinFixed } from '@shared/features/programme/programme-problem.rules';
import { toTimetable } from '@shared/features/programme/programme.rules';
import { checkAll } from '@shared/features/programme/timetable/check';
import type { Clash } from '@shared/features/programme/timetable/clash';
import { concernsOf } from '@shared/features/programme/timetable/concerns';
import {
  applyMoves,
  samePlace,
  type Move,
  type Placement,
  type Problem,
} from '@shared/features/programme/timetable/problem';
import { clock, dayName, sentence } from '@shared/features/programme/timetable/words';
import { count } from '@shared/lib/text';
import { changesOf } from './draft-changes';
import { useDraftSaving } from './draft-saving';

export type Laid = Placement & { fixed: boolean };

/** Everything that the parts of the composer share: the timetable as it stands, what is chosen, and what can be done. */
export interface Composer {
  draft: Draft;
  problem: Problem;
  laid: Laid[];
  at: Map<string, Laid>;
  cards: Map<string, TalkCard>;
  clashes: Clash[];
  concerns: Clash[];
  chosen: string | null;
  choose(talkId: string | null): void;
  /** The Move dialog: whose, and what is typed in it already. */
  moving: { talkId: string; typed: string } | null;
  askWhere(talkId: string, typed?: string): void;
  closeMove(): void;
  /** Moves talks, says so, and can be undone. False when one of them is fixed. */
  move(moves: Move[], said?: string): boolean;
  setFixed(talkId: string, fixed: boolean): void;
  undo(): void;
  redo(): void;
  canUndo: string | null;
  canRedo: string | null;
  saving: boolean;
  /** The last thing that happened, for the polite live region. */
  said: string;
  say(text: string): void;
}

export const placeInWords = (problem: Problem, at: Placement): string =>
  `${dayName(problem, at.day)} ${clock(at.start)}, ${roomOf(problem, at.room)}`;

const whereInWords = (problem: Problem, from: Placement | undefined, to: Placement | null): string => {
  if (!to) return 'is to be placed';
  return from && samePlace(from, to) ? `now ${to.minutes} min` : `now ${placeInWords(problem, to)}`;
};

export const roomOf = (problem: Problem, id: string): string =>
  problem.rooms.find((room) => room.id === id)?.name ?? '';

/** `120 seats`, or nothing where the number is not known. */
export const seatsOf = (card: TalkCard): string[] =>
  card.expectedAudience === null ? [] : [`${card.expectedAudience} seats`];

const clashesLeft = (clashes: readonly Clash[]): string =>
  clashes.length === 0 ? 'No clashes.' : `${count(clashes.length, 'clash', 'clashes')} left.`;

export function useComposer(event: string, draft: Draft): Composer {
  const saving = useDraftSaving(event, draft);
  const [chosen, setChosen] = useState<string | null>(null);
  const [moving, setMoving] = useState<Composer['moving']>(null);
  const [said, say] = useState('');
  const { startsOn } = draft.event;

  const laid = useMemo(
    () => saving.placements.map((one) => ({ ...toTimetable(one, startsOn), fixed: one.fixed })),
    [saving.placements, startsOn],
  );
  const problem = useMemo(() => pinFixed(draft.problem, laid), [draft.problem, laid]);
  const clashes = useMemo(() => checkAll(problem, laid), [problem, laid]);
  const concerns = useMemo(() => concernsOf(problem, laid), [problem, laid]);
  const at = useMemo(() => new Map(laid.map((one) => [one.item, one])), [laid]);
  const cards = useMemo(() => new Map(draft.cards.map((card) => [card.talkId, card])), [draft.cards]);

  const nameOf = (talkId: string): string => cards.get(talkId)?.label ?? 'The talk';

  const move = (moves: Move[], already?: string): boolean => {
    const held = moves.find(({ item, to }) => moved(at.get(item), to) && at.get(item)?.fixed);
    if (held) {
      say(`${sentence(nameOf(held.item))} is fixed. Release it first.`);
      return false;
    }
    const [first] = moves;
    if (!first || !draft.can.change) return false;
    const where = whereInWords(problem, at.get(first.item), first.to);
    const text = already ?? `${sentence(nameOf(first.item))} ${where}.`;
    saving.change(text, changesOf(moves, startsOn));
    say(`${text} ${clashesLeft(checkAll(problem, applyMoves(laid, moves)))}`);
    return true;
  };

  const setFixed = (talkId: string, fixed: boolean): void => {
    const here = at.get(talkId);
    if (!here) return;
    const text = `${sentence(nameOf(talkId))} is ${fixed ? 'fixed here' : 'released'}.`;
    saving.change(
      text,
      changesOf([{ item: talkId, to: here }], startsOn).map((one) => ({ ...one, fixed })),
    );
    say(text);
  };

  const askWhere = useCallback((talkId: string, typed = '') => {
    setChosen(talkId);
    setMoving({ talkId, typed });
  }, []);

  const back = (what: string | null, verb: string): void =>
    say(what ? `${verb}: ${what}` : 'Nothing left to take back.');

  return {
    draft,
    problem,
    laid,
    at,
    cards,
    clashes,
    concerns,
    chosen,
    choose: setChosen,
    moving,
    askWhere,
    closeMove: () => setMoving(null),
    move,
    setFixed,
    undo: () => back(saving.undo(), 'Taken back'),
    redo: () => back(saving.redo(), 'Done again'),
    canUndo: saving.canUndo,
    canRedo: saving.canRedo,
    saving: saving.saving,
    said,
    say,
  };
}

const moved = (from: Placement | undefined, to: Placement | null): boolean =>
  from !== undefined && (!to || to.day !== from.day || to.start !== from.start || to.room !== from.room);
