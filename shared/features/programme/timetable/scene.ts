import type { Item, Placement, Problem } from './problem';
import { groupBy, indexOf, type ProblemIndex } from './problem-index';

/** A timetable laid out for looking things up: who stands where, and what a day holds. */
export interface Scene {
  problem: Problem;
  index: ProblemIndex;
  placed: Map<string, Placement>;
  onDay: Map<number, Placement[]>;
}

/** Placements of items or rooms that the problem does not know are left out: nothing can be said about them. */
export function sceneOf(problem: Problem, placements: readonly Placement[]): Scene {
  const index = indexOf(problem);
  const known = placements.filter((p) => index.item.has(p.item) && index.room.has(p.room));
  const placed = new Map(known.map((p) => [p.item, p]));
  return { problem, index, placed, onDay: groupBy([...placed.values()], (p) => p.day) };
}

/** The same scene with one item somewhere else, or taken away. Only that item's days are laid out again. */
export function withItemAt(scene: Scene, item: string, to: Placement | null): Scene {
  const placed = new Map(scene.placed);
  const onDay = new Map(scene.onDay);
  const from = placed.get(item);
  placed.delete(item);
  if (from)
    onDay.set(
      from.day,
      (onDay.get(from.day) ?? []).filter((p) => p.item !== item),
    );
  if (to && scene.index.item.has(item) && scene.index.room.has(to.room)) {
    placed.set(item, to);
    onDay.set(to.day, [...(onDay.get(to.day) ?? []), to]);
  }
  return { ...scene, placed, onDay };
}

export const itemOf = (scene: Scene, id: string): Item => scene.index.item.get(id) as Item;
export const labelOf = (scene: Scene, id: string): string => scene.index.item.get(id)?.label ?? id;
export const roomName = (scene: Scene, id: string): string => scene.index.room.get(id)?.name ?? id;
