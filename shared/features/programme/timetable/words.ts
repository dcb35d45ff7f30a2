import { addDays, formatDate, formatTime, timeOf } from '../../../lib/time';
import { listInWords } from '../../../lib/text';
import { endOf, type Placement, type Problem } from './problem';

const dayNames = new WeakMap<Problem, Map<number, string>>();

/** `Thu 9 July` or `day 4`. Kept per problem: sentences are made on every mouse move. */
export function dayName(problem: Problem, number: number): string {
  const known = dayNames.get(problem) ?? new Map<number, string>();
  dayNames.set(problem, known);
  const name = known.get(number) ?? nameDay(problem.startsOn, number);
  known.set(number, name);
  return name;
}

const nameDay = (startsOn: string | null, number: number): string =>
  startsOn ? formatDate(addDays(startsOn, number)) : `day ${number + 1}`;

/** `Thu` or `day 4`, for buttons. */
export const shortDay = (problem: Problem, number: number): string =>
  problem.startsOn ? dayName(problem, number).slice(0, 3) : dayName(problem, number);

/** `9:05`. */
export const clock = (minutes: number): string => formatTime(timeOf(minutes));

/** `11:25–12:15`. */
export const clockSpan = (start: number, end: number): string => `${clock(start)}–${clock(end)}`;

/** `Thu 9 July, 11:25–12:15`. */
export const whenOf = (problem: Problem, placement: Placement): string =>
  `${dayName(problem, placement.day)}, ${clockSpan(placement.start, endOf(placement))}`;

/** First letter large: sentences may begin with a label like `the talk by Abubakar`. */
export const sentence = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

const featureWords: Record<string, string> = {
  blackboard: 'blackboard',
  projector: 'projector',
  camera: 'camera',
  recording: 'recording',
  hearingLoop: 'hearing loop',
  stepFree: 'step-free access',
  remoteLink: 'remote link',
};

/** A room feature in words; one that is not known keeps its own name. */
export const featureWord = (feature: string): string => featureWords[feature] ?? feature;

/** `no projector and no camera`. */
export const lacking = (features: readonly string[]): string =>
  listInWords(features.map((feature) => `no ${featureWord(feature)}`));
