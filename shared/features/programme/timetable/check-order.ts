import type { Clash } from './clash';
import { endOf, type Course, type Placement } from './problem';
import { groupBy } from './problem-index';
import { itemOf, labelOf, type Scene } from './scene';
import { clock, dayName, sentence, whenOf } from './words';
import { count, listInWords } from '../../../lib/text';

/** Hard rules about what comes after what: courses, exercises, prerequisites. */

export const checkCourse = (scene: Scene, course: Course): Clash[] => {
  const placed = (scene.index.lectures.get(course.id) ?? []).flatMap(
    (item) => scene.placed.get(item.id) ?? [],
  );
  const pairs = placed.slice(1).map((later, i) => [placed[i] as Placement, later] as const);
  return [
    ...pairs.flatMap(([earlier, later]) => [
      ...order(scene, course, earlier, later),
      ...nights(scene, course, earlier, later),
    ]),
    ...perDay(scene, course, placed),
  ];
};

const endsAfterStart = (earlier: Placement, later: Placement): boolean =>
  earlier.day > later.day || (earlier.day === later.day && endOf(earlier) > later.start);

/** Lectures in the order of their numbers. A lecture in the tray is skipped, its neighbours are compared. */
function order(scene: Scene, course: Course, earlier: Placement, later: Placement): Clash[] {
  if (!endsAfterStart(earlier, later)) return [];
  const title = `${sentence(course.label)} is out of order.`;
  const rest = `${sentence(labelOf(scene, later.item))} is on ${whenOf(scene.problem, later)}, ${labelOf(scene, earlier.item)} on ${whenOf(scene.problem, earlier)}.`;
  return [
    { rule: `order:${course.id}`, items: [earlier.item, later.item], title, sentence: `${title} ${rest}` },
  ];
}

/** Days between one lecture and the next. */
function nights(scene: Scene, course: Course, earlier: Placement, later: Placement): Clash[] {
  if (later.day - earlier.day >= course.minNights) return [];
  const title = `${sentence(course.label)} needs ${count(course.minNights, 'night')} between lectures.`;
  const days = `${dayName(scene.problem, earlier.day)} and ${dayName(scene.problem, later.day)}`;
  const names = `${sentence(labelOf(scene, earlier.item))} and ${labelOf(scene, later.item)}`;
  const rest =
    earlier.day === later.day
      ? `${names} are both on ${dayName(scene.problem, later.day)}.`
      : `${names} are on ${days}.`;
  return [
    { rule: `nights:${course.id}`, items: [earlier.item, later.item], title, sentence: `${title} ${rest}` },
  ];
}

/** Lectures of a course a day. */
function perDay(scene: Scene, course: Course, placed: readonly Placement[]): Clash[] {
  const days = [...groupBy(placed, (p) => p.day)].filter(([, list]) => list.length > course.maxPerDay);
  return days.map(([day, list]) => {
    const title = `${sentence(course.label)} has ${count(list.length, 'lecture')} on one day.`;
    const names = listInWords(list.map((p) => labelOf(scene, p.item)));
    const rest = `${sentence(names)} are on ${dayName(scene.problem, day)}; at most ${course.maxPerDay} a day.`;
    return {
      rule: `perDay:${course.id}`,
      items: list.map((p) => p.item),
      title,
      sentence: `${title} ${rest}`,
    };
  });
}

/** One item that must follow another. */
export interface Following {
  kind: 'exercise' | 'prereq';
  before: string;
  after: string;
}

/** What an item must follow: its lecture, its prerequisites. */
export function followingOf(scene: Scene, id: string): Following[] {
  const lecture = itemOf(scene, id).exerciseOf;
  const earlier = (scene.index.prerequisites.get(id) ?? []).filter((pair) => pair.after === id);
  return [
    ...(lecture === null ? [] : [{ kind: 'exercise' as const, before: lecture, after: id }]),
    ...earlier.map((pair) => ({ kind: 'prereq' as const, ...pair })),
  ];
}

export function checkFollowing(scene: Scene, { kind, before, after }: Following): Clash[] {
  const earlier = scene.placed.get(before);
  const later = scene.placed.get(after);
  if (!earlier || !later) return [];
  return kind === 'exercise' ? exercise(scene, earlier, later) : prereq(scene, earlier, later);
}

/** Exercises come after their lecture, on the same or the next day. */
function exercise(scene: Scene, lecture: Placement, session: Placement): Clash[] {
  const early = endsAfterStart(lecture, session);
  if (!early && session.day - lecture.day <= 1) return [];
  const title = `${sentence(labelOf(scene, session.item))} ${early ? 'before the lecture.' : 'too late after the lecture.'}`;
  const ends = `${sentence(labelOf(scene, lecture.item))} ends ${dayName(scene.problem, lecture.day)} at ${clock(endOf(lecture))}`;
  const rest = early
    ? `${ends}; the exercises begin ${dayName(scene.problem, session.day)} at ${clock(session.start)}.`
    : `${ends}; exercises follow on the same or the next day, these are on ${dayName(scene.problem, session.day)}.`;
  return [
    {
      rule: `exercise:${session.item}`,
      items: [lecture.item, session.item],
      title,
      sentence: `${title} ${rest}`,
    },
  ];
}

/** `before` has ended when `after` begins. */
function prereq(scene: Scene, before: Placement, after: Placement): Clash[] {
  if (!endsAfterStart(before, after)) return [];
  const title = `${sentence(labelOf(scene, after.item))} needs ${labelOf(scene, before.item)} first.`;
  const rest = `${sentence(labelOf(scene, after.item))} is on ${whenOf(scene.problem, after)}, ${labelOf(scene, before.item)} on ${whenOf(scene.problem, before)}.`;
  return [
    {
      rule: `prereq:${before.item}>${after.item}`,
      items: [before.item, after.item],
      title,
      sentence: `${title} ${rest}`,
    },
  ];
}
