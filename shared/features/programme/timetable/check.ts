import { clashKey, type Clash } from './clash';
import type { Item, Placement, Problem } from './problem';
import { checkCourse, checkFollowing, followingOf } from './check-order';
import { insideBlock, roomClosed, presence, capacity, features, pin } from './check-one';
import { onePlace, overlap, plenaryAlone, roomOnce } from './check-two';
import { itemOf, sceneOf, withItemAt, type Scene } from './scene';

/**
 * The hard rules in three families. Each family says which placements it looks at, so that a whole timetable and a
 * single move are judged by the very same functions.
 */
const aboutOne = [insideBlock, presence, roomClosed, capacity, features, pin];
const aboutTwo = [roomOnce, onePlace, plenaryAlone];

const checkOne = (scene: Scene, placement: Placement): Clash[] =>
  aboutOne.flatMap((rule) => rule(scene, itemOf(scene, placement.item), placement));

const checkTwo = (scene: Scene, a: Placement, b: Placement): Clash[] => {
  const [first, second] = a.start < b.start || (a.start === b.start && a.item < b.item) ? [a, b] : [b, a];
  return aboutTwo.flatMap((rule) => rule(scene, first, second));
};

/** Pairs of a day that overlap in time, found by a sweep over the starts. */
function overlapping(day: readonly Placement[]): [Placement, Placement][] {
  const pairs: [Placement, Placement][] = [];
  const running: Placement[] = [];
  for (const next of [...day].sort((a, b) => a.start - b.start)) {
    for (let i = running.length - 1; i >= 0; i--) {
      const other = running[i] as Placement;
      if (overlap(other, next)) pairs.push([other, next]);
      else running.splice(i, 1);
    }
    running.push(next);
  }
  return pairs;
}

/** Every clash of a timetable; items that are not placed break nothing. */
export function checkAll(problem: Problem, placements: readonly Placement[]): Clash[] {
  return checkScene(sceneOf(problem, placements));
}

export function checkScene(scene: Scene): Clash[] {
  const placed = [...scene.placed.values()];
  return [
    ...placed.flatMap((placement) => checkOne(scene, placement)),
    ...[...scene.onDay.values()].flatMap(overlapping).flatMap(([a, b]) => checkTwo(scene, a, b)),
    ...scene.problem.courses.flatMap((course) => checkCourse(scene, course)),
    ...placed
      .flatMap((placement) => followingOf(scene, placement.item))
      .flatMap((pair) => checkFollowing(scene, pair)),
  ];
}

/** The clashes in which one item of a scene takes part. */
export function checkItem(scene: Scene, id: string): Clash[] {
  const placement = scene.placed.get(id);
  if (!placement) return [];
  const item = itemOf(scene, id);
  const others = (scene.onDay.get(placement.day) ?? []).filter((p) => p.item !== id && overlap(p, placement));
  return [
    ...checkOne(scene, placement),
    ...others.flatMap((other) => checkTwo(scene, placement, other)),
    ...courseOf(scene, item).filter((clash) => clash.items.includes(id)),
    ...relationsOf(scene, item).flatMap((pair) => checkFollowing(scene, pair)),
  ];
}

/**
 * Everything that can change when these items move: their own clashes, and those of their courses, where two lectures
 * become neighbours when the one between them goes.
 */
export function checkTouched(scene: Scene, ids: readonly string[]): Clash[] {
  const courses = new Set(ids.map((id) => itemOf(scene, id).course).filter((id) => id !== null));
  const found = [
    ...ids.flatMap((id) => checkItem(scene, id)),
    ...scene.problem.courses
      .filter((course) => courses.has(course.id))
      .flatMap((course) => checkCourse(scene, course)),
  ];
  return [...new Map(found.map((clash) => [clashKey(clash), clash])).values()];
}

const courseOf = (scene: Scene, item: Item): Clash[] => {
  const course = item.course === null ? undefined : scene.index.course.get(item.course);
  return course ? checkCourse(scene, course) : [];
};

/** What the item follows, and what follows the item. */
function relationsOf(scene: Scene, item: Item) {
  const after = (scene.index.exercises.get(item.id) ?? []).map((exercise) => exercise.id);
  const later = (scene.index.prerequisites.get(item.id) ?? []).filter((pair) => pair.before === item.id);
  const ids = new Set([...after, ...later.map((pair) => pair.after)]);
  const theirs = [...ids].flatMap((id) => followingOf(scene, id));
  return [...followingOf(scene, item.id), ...theirs.filter((pair) => pair.before === item.id)];
}

/**
 * The clashes that an item would take part in at a placement; the others stay where they are. Equal to the part of
 * `checkAll` that names the item (a property test holds the two together), and quick enough for every mouse move.
 */
export function checkMove(
  problem: Problem,
  placements: readonly Placement[],
  item: string,
  placement: Placement,
): Clash[] {
  return moveChecker(problem, placements, item)(placement);
}

/** `checkMove` for many placements of the same item: the others are laid out once, when the drag begins. */
export function moveChecker(
  problem: Problem,
  placements: readonly Placement[],
  item: string,
): (placement: Placement) => Clash[] {
  const rest = withItemAt(sceneOf(problem, placements), item, null);
  return (placement) => checkItem(withItemAt(rest, item, placement), item);
}
