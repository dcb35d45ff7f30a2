import type { KeyboardEvent } from 'react';
import { endOf, type Placement } from '@shared/features/programme/timetable/problem';
import type { Composer } from './use-composer';

/** The talk that a key is meant for: the tile, card or row that has the focus, else the chosen one. */
export const talkUnder = (target: EventTarget | null, chosen: string | null): string | null =>
  (target instanceof Element && target.closest<HTMLElement>('[data-talk]')?.dataset.talk) || chosen;

const typing = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement &&
  (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName));

/** Undo and redo, wherever the focus is. True when the key was one of them. */
export function undoKeys(
  event: globalThis.KeyboardEvent,
  composer: Pick<Composer, 'undo' | 'redo'>,
): boolean {
  if (typing(event.target) || !(event.ctrlKey || event.metaKey)) return false;
  const key = event.key.toLowerCase();
  if (key !== 'z' && key !== 'y') return false;
  event.preventDefault();
  if (key === 'y' || event.shiftKey) composer.redo();
  else composer.undo();
  return true;
}

/**
 * Every drag has its keys: M opens Move, Alt + arrows shift by five minutes or a day, with Shift they make it longer or
 * shorter, R takes the next room, Delete puts the talk back to be placed, P fixes or releases, U takes the last move back.
 */
export function talkKeys(event: KeyboardEvent, composer: Composer): void {
  if (typing(event.target) || event.ctrlKey || event.metaKey) return;
  const talkId = talkUnder(event.target, composer.chosen);
  if (!talkId || !act(event, composer, talkId)) return;
  event.preventDefault();
  event.stopPropagation();
}

function act(event: KeyboardEvent, composer: Composer, talkId: string): boolean {
  const here = composer.at.get(talkId);
  const key = event.key.toLowerCase();
  if (key === 'm') composer.askWhere(talkId);
  else if (key === 'u') composer.undo();
  else if (!here) return false;
  else if (event.altKey && event.key.startsWith('Arrow')) shift(composer, here, event.key, lengthStep(event));
  else if (event.altKey) return false;
  else if (key === 'r')
    composer.move([{ item: talkId, to: { ...here, room: nextRoom(composer, here.room) } }]);
  else if (key === 'p') composer.setFixed(talkId, !here.fixed);
  else if (key === 'delete' || key === 'backspace') composer.move([{ item: talkId, to: null }]);
  else return false;
  return true;
}

/** `longer`: 1 or -1 changes the length instead of the place. */
function shift(composer: Composer, here: Placement, arrow: string, longer: number): void {
  const { days, gridMinutes } = composer.problem;
  const to = { ...here };
  if (longer !== 0) {
    to.minutes += longer * gridMinutes;
    if (to.minutes >= gridMinutes && endOf(to) <= 1440) composer.move([{ item: here.item, to }]);
    return;
  }
  if (arrow === 'ArrowUp') to.start -= gridMinutes;
  if (arrow === 'ArrowDown') to.start += gridMinutes;
  if (arrow === 'ArrowLeft') to.day -= 1;
  if (arrow === 'ArrowRight') to.day += 1;
  if (to.day < 0 || to.day >= days) composer.say('That is outside the event.');
  else if (to.start < 0 || endOf(to) > 1440) composer.say('That is outside the day.');
  else composer.move([{ item: here.item, to }]);
}

function nextRoom({ problem }: Composer, room: string): string {
  const ids = problem.rooms.map((one) => one.id);
  return ids[(ids.indexOf(room) + 1) % ids.length] ?? room;
}

const lengthStep = (event: KeyboardEvent): number =>
  event.shiftKey ? ({ ArrowDown: 1, ArrowUp: -1 }[event.key] ?? 0) : 0;

/** 1 to 7 move the lens while the focus is in the work area. True when the key was one of them. */
export function lensKey(
  event: KeyboardEvent,
  days: readonly number[],
  moveLens: (day: number) => void,
): boolean {
  if (typing(event.target) || event.ctrlKey || event.metaKey || event.altKey || !/^[1-7]$/.test(event.key))
    return false;
  const day = days[Number(event.key) - 1];
  if (day !== undefined) moveLens(day);
  return day !== undefined;
}
