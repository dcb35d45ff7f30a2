import type { Clash } from './clash';
import type { Placement, Problem } from './problem';
import { itemOf, sceneOf } from './scene';
import { clock, dayName, sentence } from './words';

/** A soft rule that is not met: worth a look, nothing more. Same shape as a clash. */
export type Concern = Clash;

/** Starts before this minute belong to the morning. */
export const noon = 13 * 60;

/** Half days on which somebody would rather not speak, the heaviest wishes first. */
export function concernsOf(problem: Problem, placements: readonly Placement[]): Concern[] {
  const scene = sceneOf(problem, placements);
  const found = [...scene.placed.values()].flatMap((at) =>
    itemOf(scene, at.item).persons.flatMap((id) => {
      const person = scene.index.person.get(id);
      const half = at.start < noon ? 'am' : 'pm';
      const wish = person?.dislikes.find((d) => d.day === at.day && d.half === half && d.weight > 0);
      if (!person || !wish) return [];
      const part = `${dayName(problem, at.day)} ${half === 'am' ? 'morning' : 'afternoon'}`;
      const title = `${person.shortName} would rather not speak on ${part}.`;
      const rest = `${sentence(itemOf(scene, at.item).label)} is at ${clock(at.start)}.`;
      return [
        {
          weight: wish.weight,
          concern: { rule: `dislike:${id}`, items: [at.item], title, sentence: `${title} ${rest}` },
        },
      ];
    }),
  );
  return found.sort((a, b) => b.weight - a.weight).map((entry) => entry.concern);
}
