import type { Clash } from './clash';
import { endOf, type Placement } from './problem';
import { itemOf, labelOf, roomName, type Scene } from './scene';
import { clock, clockSpan, dayName, sentence } from './words';

/** Hard rules about two placements that overlap in time (half-open, so back to back is no overlap). */

export const overlap = (a: Placement, b: Placement): boolean =>
  a.day === b.day && a.start < endOf(b) && b.start < endOf(a);

const both = (a: Placement, b: Placement): string[] => [a.item, b.item];

/** One item per room at a time. */
export function roomOnce(scene: Scene, a: Placement, b: Placement): Clash[] {
  if (a.room !== b.room) return [];
  const title = `${roomName(scene, a.room)} is taken twice.`;
  const span = clockSpan(Math.max(a.start, b.start), Math.min(endOf(a), endOf(b)));
  const names = `${sentence(labelOf(scene, a.item))} and ${labelOf(scene, b.item)}`;
  const rest = `${names} overlap on ${dayName(scene.problem, a.day)}, ${span}.`;
  return [{ rule: 'roomOnce', items: both(a, b), title, sentence: `${title} ${rest}` }];
}

/** Nobody is in two places: speakers, lecturers, tutors and chairs alike. */
export function onePlace(scene: Scene, a: Placement, b: Placement): Clash[] {
  const there = itemOf(scene, b.item).persons;
  const shared = [...new Set(itemOf(scene, a.item).persons)].filter((id) => there.includes(id));
  return shared.map((id) => {
    const title = `${scene.index.person.get(id)?.shortName ?? id} is in two places.`;
    const where = (p: Placement) =>
      `${labelOf(scene, p.item)} is at ${clock(p.start)} in ${roomName(scene, p.room)}`;
    const rest = `On ${dayName(scene.problem, a.day)} ${where(a)}, and ${where(b)}.`;
    return { rule: `onePlace:${id}`, items: both(a, b), title, sentence: `${title} ${rest}` };
  });
}

/** Nothing runs beside a plenary talk. */
export function plenaryAlone(scene: Scene, a: Placement, b: Placement): Clash[] {
  const beside = (plenary: Placement, other: Placement): Clash[] => {
    if (itemOf(scene, plenary.item).kind !== 'plenary') return [];
    const title = `${sentence(labelOf(scene, plenary.item))} must be alone.`;
    const rest = `${sentence(labelOf(scene, other.item))} runs at the same time, ${clock(other.start)} in ${roomName(scene, other.room)}.`;
    return [
      {
        rule: `plenaryAlone:${plenary.item}`,
        items: both(plenary, other),
        title,
        sentence: `${title} ${rest}`,
      },
    ];
  };
  return [...beside(a, b), ...beside(b, a)];
}
