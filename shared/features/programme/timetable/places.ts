import { checkItem } from './check';
import type { Clash } from './clash';
import { endOf, samePlace, type Item, type Move, type Place, type Placement, type Problem } from './problem';
import { itemOf, sceneOf, withItemAt, type Scene } from './scene';
import { clock, shortDay } from './words';
import { count } from '../../../lib/text';

/** A place that an item could go to, and what follows from it. */
export interface PossiblePlace {
  to: Placement;
  /** The item's own move, and that of the item it changes places with. */
  moves: Move[];
  /** Nothing clashes there. */
  fits: boolean;
  /** What follows, in words. */
  follows: string;
  /** Clashes of everything that moves, as they would be. */
  clashes: Clash[];
}

/**
 * Places worth a look for an item: starts of blocks, starts and ends of what stands in a room already, and `extra`
 * ones (a time that was typed). Those that fit come first, then the nearest in time, then the same room.
 */
export function possiblePlaces(
  problem: Problem,
  placements: readonly Placement[],
  item: string,
  extra: readonly Place[] = [],
): PossiblePlace[] {
  const scene = sceneOf(problem, placements);
  const subject = scene.index.item.get(item);
  if (!subject) return [];
  const present = scene.placed.get(item) ?? null;
  const minutes = present?.minutes ?? subject.minutes;
  const seen = new Set<string>();
  return [...extra, ...(subject.pinned ? [subject.pinned] : []), ...candidates(scene, subject, minutes)]
    .filter((place) => {
      const key = `${place.day} ${place.start} ${place.room}`;
      return !seen.has(key) && Boolean(seen.add(key)) && !(present && samePlace(place, present));
    })
    .map((place) => weigh(scene, present, { ...place, item, minutes }))
    .sort((a, b) => Number(b.fits) - Number(a.fits) || distance(present, a) - distance(present, b));
}

function candidates(scene: Scene, item: Item, minutes: number): Place[] {
  const blocks = scene.problem.blocks.filter((block) => block.kind === 'session' || item.kind === 'social');
  return blocks.flatMap((block) => {
    const inside = (scene.onDay.get(block.day) ?? []).filter(
      (p) => p.item !== item.id && p.start < block.end && endOf(p) > block.start,
    );
    return scene.problem.rooms.flatMap((room) => {
      const own = inside.filter((p) => p.room === room.id);
      const starts = new Set([block.start, ...own.flatMap((p) => [p.start, endOf(p)])]);
      return [...starts]
        .filter((start) => start >= block.start && start + minutes <= block.end)
        .map((start) => ({ day: block.day, start, room: room.id }));
    });
  });
}

function weigh(scene: Scene, present: Placement | null, to: Placement): PossiblePlace {
  const moved = withItemAt(scene, to.item, to);
  const clashes = checkItem(moved, to.item);
  const plain = {
    to,
    moves: [{ item: to.item, to }],
    fits: clashes.length === 0,
    follows: inWords(clashes),
    clashes,
  };
  return plain.fits || !present ? plain : (exchange(scene, moved, present, to, clashes) ?? plain);
}

/** Changing places with the one item that stands there, when that solves everything. */
function exchange(
  scene: Scene,
  moved: Scene,
  present: Placement,
  to: Placement,
  clashes: Clash[],
): PossiblePlace | undefined {
  const taken = clashes.filter((clash) => clash.rule === 'roomOnce').flatMap((clash) => clash.items);
  const [other, ...more] = taken.filter((id) => id !== to.item);
  if (other === undefined || more.length > 0 || itemOf(scene, other).pinned) return undefined;
  const theirs = scene.placed.get(other) as Placement;
  const back: Placement = { ...theirs, day: present.day, start: present.start, room: present.room };
  const swapped = withItemAt(moved, other, back);
  if (checkItem(swapped, to.item).length + checkItem(swapped, other).length > 0) return undefined;
  const when =
    present.day === to.day ? clock(back.start) : `${shortDay(scene.problem, back.day)} ${clock(back.start)}`;
  const goes =
    present.day === to.day && present.start === theirs.start
      ? 'changes rooms with it'
      : `goes to ${when} in its place`;
  const moves = [
    { item: to.item, to },
    { item: other, to: back },
  ];
  return { to, moves, fits: true, follows: `Fits. ${itemOf(scene, other).label} ${goes}`, clashes: [] };
}

function inWords(clashes: readonly Clash[]): string {
  const [first, ...rest] = [...new Set(clashes.map((clash) => clash.title.replace(/\.$/, '')))];
  if (first === undefined) return 'Fits.';
  return rest.length === 0 ? first : `${first}, and ${count(rest.length, 'more clash', 'more clashes')}`;
}

/** Minutes between two places, a change of room counting half an hour; a swap comes after a plain move that is as near. */
function distance(present: Placement | null, place: PossiblePlace): number {
  const { to, moves } = place;
  const swap = moves.length > 1 ? 60 : 0;
  if (!present) return to.day * 1440 + to.start + swap;
  const time = Math.abs(to.day - present.day) * 1440 + Math.abs(to.start - present.start);
  return time + (to.room === present.room ? 0 : 30) + swap;
}
