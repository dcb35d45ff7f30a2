import { describe, expect, it } from 'vitest';
import { checkAll } from '@shared/features/programme/timetable/check';
import { concernsOf } from '@shared/features/programme/timetable/concerns';
import { possiblePlaces } from '@shared/features/programme/timetable/places';
import { remediesFor } from '@shared/features/programme/timetable/remedies';
import type { Clash } from '@shared/features/programme/timetable/clash';
import { at, block, item, person, problem, put, room } from './build-problem';

const first = (clashes: Clash[]): Clash => clashes[0] as Clash;

describe('remediesFor', () => {
  it('swaps a lecture that its lecturer can no longer give with one at a time when she is there', () => {
    const given = problem({
      blocks: [block(0, '9:00', '10:00'), block(0, '11:00', '12:00')],
      rooms: [room('Hall')],
      persons: [person('Sand', { departure: { day: 0, minute: at('10:20') } })],
      items: [item('A 4'), item('B 4', { persons: ['Sand'] })],
    });
    const placements = [put('A 4', 0, '9:00'), put('B 4', 0, '11:00')];
    const labels = remediesFor(given, placements, first(checkAll(given, placements))).map(
      (remedy) => remedy.label,
    );
    expect(labels).toEqual(['Swap with A 4, Mon 9:00', 'Put B 4 back to be placed']);
  });

  it('swaps rooms when the other audience fits', () => {
    const given = problem({
      blocks: [block(0, '14:00', '15:00')],
      rooms: [room('Ivar', { capacity: 56 }), room('Vey', { capacity: 40 })],
      items: [item('Exercises B 3', { audience: 52 }), item('Exercises C 3', { audience: 31 })],
    });
    const placements = [put('Exercises B 3', 0, '14:00', 'Vey'), put('Exercises C 3', 0, '14:00', 'Ivar')];
    const remedies = remediesFor(given, placements, first(checkAll(given, placements)));
    expect(remedies[0]?.label).toBe('Swap rooms with Exercises C 3');
    expect(remedies[0]?.moves).toHaveLength(2);
  });

  it('prefers another room to another time', () => {
    const given = problem({ items: [item('A'), item('B')] });
    const placements = [put('A', 0, '9:00'), put('B', 0, '9:00')];
    const labels = remediesFor(given, placements, first(checkAll(given, placements))).map(
      (remedy) => remedy.label,
    );
    expect(labels.slice(0, 2)).toEqual(['Move A to Ivar', 'Move B to Ivar']);
  });

  it('does not touch what is fixed', () => {
    const given = problem({
      items: [item('A', { pinned: { day: 0, start: at('9:00'), room: 'Hall' } }), item('B')],
    });
    const placements = [put('A', 0, '9:00'), put('B', 0, '9:00')];
    const remedies = remediesFor(given, placements, first(checkAll(given, placements)));
    expect(remedies.length).toBeGreaterThan(0);
    expect(remedies.flatMap((remedy) => remedy.moves).some((move) => move.item === 'A')).toBe(false);
  });

  it('has the tray where nothing else helps', () => {
    const given = problem({ items: [item('A', { audience: 900 })] });
    const placements = [put('A', 0, '9:00')];
    const remedies = remediesFor(given, placements, first(checkAll(given, placements)));
    expect(remedies.map((remedy) => remedy.kind)).toEqual(['unplace']);
  });

  it('settles one clash of an item that keeps another everywhere', () => {
    const given = problem({ items: [item('A', { audience: 900 }), item('B')] });
    const placements = [put('A', 0, '9:00'), put('B', 0, '9:30')];
    const clash = checkAll(given, placements).find((one) => one.rule === 'roomOnce') as Clash;
    expect(remediesFor(given, placements, clash)[0]?.kind).toBe('move');
  });
});

describe('possiblePlaces', () => {
  const given = problem({
    persons: [person('Ngo', { arrival: { day: 1, minute: 0 } })],
    items: [item('A', { persons: ['Ngo'] }), item('B')],
  });
  it('lists those that fit first, with what follows in words', () => {
    const places = possiblePlaces(given, [put('B', 1, '9:00')], 'A');
    expect(places[0]).toMatchObject({
      to: { day: 1, start: at('9:00'), room: 'Ivar' },
      fits: true,
      follows: 'Fits.',
    });
    const early = places.find((place) => place.to.day === 0);
    expect(early).toMatchObject({ fits: false, follows: 'Ngo has not arrived' });
    const fits = places.map((place) => place.fits);
    expect(fits.indexOf(false)).toBeGreaterThan(fits.lastIndexOf(true));
  });
  it('adds a time that was typed', () => {
    const typed = { day: 2, start: at('9:35'), room: 'Hall' };
    expect(possiblePlaces(given, [], 'A', [typed]).some((place) => place.to.start === at('9:35'))).toBe(true);
  });
  it('says which talk would change places', () => {
    const places = possiblePlaces(given, [put('A', 2, '14:00'), put('B', 1, '9:00')], 'A');
    const swap = places.find(
      (place) => place.to.day === 1 && place.to.start === at('9:00') && place.to.room === 'Hall',
    );
    expect(swap).toMatchObject({ fits: true, follows: 'Fits. B goes to Wed 14:00 in its place' });
  });
});

describe('concernsOf', () => {
  it('names disliked half days, the heaviest first', () => {
    const given = problem({
      persons: [
        person('Ngo', { dislikes: [{ day: 0, half: 'am', weight: 1 }] }),
        person('Lie', { dislikes: [{ day: 0, half: 'pm', weight: 3 }] }),
      ],
      items: [item('A', { persons: ['Ngo'] }), item('B', { persons: ['Lie'] })],
    });
    const concerns = concernsOf(given, [put('A', 0, '12:30'), put('B', 0, '13:00')]);
    expect(concerns.map((concern) => concern.rule)).toEqual(['dislike:Lie', 'dislike:Ngo']);
    expect(concernsOf(given, [put('A', 1, '9:00')])).toEqual([]);
  });
});
