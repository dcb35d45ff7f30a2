import type { Block, Course, Item, Person, Problem, Room } from './problem';

/** Look-ups into a problem, made once per problem object. */
export interface ProblemIndex {
  problem: Problem;
  item: Map<string, Item>;
  room: Map<string, Room>;
  person: Map<string, Person>;
  course: Map<string, Course>;
  /** Lectures of a course by number. */
  lectures: Map<string, Item[]>;
  /** Exercise sessions of a lecture. */
  exercises: Map<string, Item[]>;
  /** Prerequisites in which an item takes part, on either side. */
  prerequisites: Map<string, { before: string; after: string }[]>;
  blocksOn: Map<number, Block[]>;
}

const indexes = new WeakMap<Problem, ProblemIndex>();

/** The index of a problem; problems are never changed in place, so it is kept with the object. */
export function indexOf(problem: Problem): ProblemIndex {
  const known = indexes.get(problem);
  if (known) return known;
  const lectures = groupBy(
    problem.items.filter((item) => item.course && item.number && item.kind !== 'exercise'),
    (item) => item.course as string,
  );
  for (const list of lectures.values()) list.sort((a, b) => (a.number ?? 0) - (b.number ?? 0));
  const pairs = problem.prerequisites.flatMap((pair) => [
    { item: pair.before, pair },
    { item: pair.after, pair },
  ]);
  const index: ProblemIndex = {
    problem,
    item: byId(problem.items),
    room: byId(problem.rooms),
    person: byId(problem.persons),
    course: byId(problem.courses),
    lectures,
    exercises: groupBy(
      problem.items.filter((item) => item.exerciseOf),
      (item) => item.exerciseOf as string,
    ),
    prerequisites: new Map(
      [...groupBy(pairs, (entry) => entry.item)].map(([item, list]) => [item, list.map((e) => e.pair)]),
    ),
    blocksOn: groupBy(problem.blocks, (block) => block.day),
  };
  indexes.set(problem, index);
  return index;
}

const byId = <T extends { id: string }>(list: readonly T[]): Map<string, T> =>
  new Map(list.map((one) => [one.id, one]));

export function groupBy<T, K>(list: readonly T[], keyOf: (one: T) => K): Map<K, T[]> {
  const groups = new Map<K, T[]>();
  for (const one of list) {
    const found = groups.get(keyOf(one));
    if (found) found.push(one);
    else groups.set(keyOf(one), [one]);
  }
  return groups;
}
