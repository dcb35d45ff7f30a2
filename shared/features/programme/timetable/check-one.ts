import type { Clash } from './clash';
import {
  endOf,
  samePlace,
  type Item,
  type Moment,
  type Person,
  type Placement,
  type Window,
} from './problem';
import { roomName, type Scene } from './scene';
import { clock, clockSpan, dayName, lacking, sentence, whenOf } from './words';
import { listInWords } from '../../../lib/text';

/** Hard rules about one placement: its block, its people, its room, its pin. */

const broken = (rule: string, item: Item, title: string, rest: string): Clash[] => [
  { rule, items: [item.id], title, sentence: `${title} ${rest}` },
];

/** An item lies inside one block; social blocks take only what is social. */
export function insideBlock(scene: Scene, item: Item, at: Placement): Clash[] {
  const fitting = (scene.index.blocksOn.get(at.day) ?? []).filter(
    (block) => block.kind === 'session' || item.kind === 'social',
  );
  if (fitting.some((block) => block.start <= at.start && endOf(at) <= block.end)) return [];
  const day = dayName(scene.problem, at.day);
  const spans = fitting.map((block) => clockSpan(block.start, block.end));
  const rest = spans.length
    ? `The blocks of ${day} are ${listInWords(spans)}.`
    : `There is no block on ${day}.`;
  return broken('insideBlock', item, `${sentence(item.label)} is not inside a session block.`, rest);
}

const meets = (window: Window, at: Placement): boolean =>
  window.day === at.day && window.start < endOf(at) && at.start < window.end;

const isBefore = (day: number, minute: number, moment: Moment): boolean =>
  day < moment.day || (day === moment.day && minute < moment.minute);

/** Everyone needed is there: after the arrival, before the departure, outside blocked times. */
export function presence(scene: Scene, item: Item, at: Placement): Clash[] {
  return item.persons.flatMap((id) => {
    const person = scene.index.person.get(id);
    return person ? personPresence(scene, item, at, person) : [];
  });
}

function personPresence(scene: Scene, item: Item, at: Placement, person: Person): Clash[] {
  const { arrival, departure, shortName } = person;
  const here = `${sentence(item.label)} is on ${whenOf(scene.problem, at)}`;
  const rule = `presence:${person.id}`;
  const moment = (m: Moment): string => `${dayName(scene.problem, m.day)} at ${clock(m.minute)}`;
  if (arrival && isBefore(at.day, at.start, arrival)) {
    return broken(
      rule,
      item,
      `${shortName} has not arrived.`,
      `${here}; the stay begins ${moment(arrival)}.`,
    );
  }
  if (departure && isBefore(departure.day, departure.minute, { day: at.day, minute: endOf(at) })) {
    const gone = !isBefore(at.day, at.start, departure);
    const title = gone ? `${shortName} has left.` : `${shortName} must leave before the end.`;
    return broken(rule, item, title, `${here}; the stay ends ${moment(departure)}.`);
  }
  const blocked = person.blocked.find((window) => meets(window, at));
  if (!blocked) return [];
  return broken(
    rule,
    item,
    `${shortName} is not free.`,
    `${here}; not available ${clockSpan(blocked.start, blocked.end)}.`,
  );
}

export function roomClosed(scene: Scene, item: Item, at: Placement): Clash[] {
  const window = scene.index.room.get(at.room)?.closed.find((closed) => meets(closed, at));
  if (!window) return [];
  const rest = `${sentence(item.label)} is on ${whenOf(scene.problem, at)}; the room is closed ${clockSpan(window.start, window.end)}.`;
  return broken(`roomClosed:${at.room}`, item, `${roomName(scene, at.room)} is closed.`, rest);
}

export function capacity(scene: Scene, item: Item, at: Placement): Clash[] {
  const room = scene.index.room.get(at.room);
  if (!room || item.audience <= room.capacity) return [];
  const rest = `${item.audience} people are expected at ${item.label}; ${room.name} seats ${room.capacity}.`;
  return broken(`capacity:${item.id}`, item, `${room.name} is too small.`, rest);
}

export function features(scene: Scene, item: Item, at: Placement): Clash[] {
  const room = scene.index.room.get(at.room);
  const missing = item.features.filter((feature) => !room?.features.includes(feature));
  if (!room || missing.length === 0) return [];
  const it = missing.length === 1 ? 'it' : 'them';
  return broken(
    `features:${item.id}`,
    item,
    `${room.name} has ${lacking(missing)}.`,
    `${sentence(item.label)} needs ${it}.`,
  );
}

/** A fixed item stays where it was fixed. */
export function pin(scene: Scene, item: Item, at: Placement): Clash[] {
  if (!item.pinned || samePlace(item.pinned, at)) return [];
  const { day, start, room } = item.pinned;
  const rest = `It was fixed on ${dayName(scene.problem, day)} at ${clock(start)} in ${roomName(scene, room)}.`;
  return broken(`pin:${item.id}`, item, `${sentence(item.label)} is fixed.`, rest);
}
