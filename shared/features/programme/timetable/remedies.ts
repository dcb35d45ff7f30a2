import { checkTouched } from './check';
import { clashKey, newClashes, type Clash } from './clash';
import { possiblePlaces, type PossiblePlace } from './places';
import type { Move, Placement, Problem } from './problem';
import { indexOf } from './problem-index';
import { sceneOf, withItemAt, type Scene } from './scene';
import { clock, dayName, shortDay } from './words';

/** A way out of a clash. */
export interface Remedy {
  kind: 'move' | 'swap' | 'unplace';
  /** The words of the button: a verb with its object. */
  label: string;
  moves: Move[];
}

/**
 * Ways out of a clash, the gentlest first: another room, another time, a swap, and last the tray. Each was applied and
 * checked again: the clash is gone and no other has come.
 */
export function remediesFor(
  problem: Problem,
  placements: readonly Placement[],
  clash: Clash,
  limit = 4,
): Remedy[] {
  const scene = sceneOf(problem, placements);
  const found: Remedy[] = [];
  for (const remedy of thinkable(problem, placements, clash)) {
    if (found.length === limit) break;
    if (settles(scene, clash, remedy.moves)) found.push(remedy);
  }
  return found;
}

/** Do these moves end a clash without making another? Looks only at what the moves can change. */
export function settles(scene: Scene, clash: Clash, moves: readonly Move[]): boolean {
  const touched = moves.map((move) => move.item);
  const after = checkTouched(
    moves.reduce((now, move) => withItemAt(now, move.item, move.to), scene),
    touched,
  );
  if (after.some((left) => clashKey(left) === clashKey(clash))) return false;
  return newClashes(checkTouched(scene, touched), after).length === 0;
}

function thinkable(problem: Problem, placements: readonly Placement[], clash: Clash): Remedy[] {
  const index = indexOf(problem);
  const named = clash.items.length > 1;
  const movable = clash.items.filter((id) => !index.item.get(id)?.pinned || clash.rule.startsWith('pin:'));
  const moves = movable.flatMap((id) => {
    const present = placements.find((p) => p.item === id);
    if (!present) return [];
    return possiblePlaces(problem, placements, id)
      .filter((place) => !place.clashes.some((left) => clashKey(left) === clashKey(clash)))
      .map((place) => ({ cost: costOf(present, place), remedy: asRemedy(problem, present, place, named) }));
  });
  const out = movable.map((id) => ({
    kind: 'unplace' as const,
    label: `Put ${index.item.get(id)?.label ?? id} back to be placed`,
    moves: [{ item: id, to: null }],
  }));
  return [...moves.sort((a, b) => a.cost - b.cost).map((entry) => entry.remedy), ...out];
}

/** Weights of a repair: a change of room 4, of time 10; then how far. Places with clashes of their own come last. */
function costOf(present: Placement, { to, moves, fits }: PossiblePlace): number {
  const days = Math.abs(to.day - present.day);
  const minutes = Math.abs(to.start - present.start);
  const time = days + minutes === 0 ? 0 : 10 + days * 4 + minutes / 60;
  return (time + (to.room === present.room ? 0 : 4)) * moves.length + (fits ? 0 : 1000);
}

function asRemedy(
  problem: Problem,
  present: Placement,
  { to, moves }: PossiblePlace,
  named: boolean,
): Remedy {
  const index = indexOf(problem);
  const label = (id: string): string => index.item.get(id)?.label ?? id;
  const room = index.room.get(to.room)?.name ?? to.room;
  const sameTime = to.day === present.day && to.start === present.start;
  const subject = named ? ` ${label(to.item)}` : '';
  const when = `${Math.abs(to.day - present.day) < 7 ? shortDay(problem, to.day) : dayName(problem, to.day)} ${clock(to.start)}`;
  const other = moves.find((move) => move.item !== to.item);
  if (other) {
    const swap = sameTime
      ? `Swap rooms${named ? ` of${subject} and` : ' with'} ${label(other.item)}`
      : `Swap${subject} with ${label(other.item)}, ${when}`;
    return { kind: 'swap', label: swap, moves };
  }
  const where = sameTime ? room : to.room === present.room ? when : `${when}, ${room}`;
  return { kind: 'move', label: `Move${subject} to ${where}`, moves };
}
