import { describe, expect, it } from 'vitest';
import { parseMove, rankPlaces, typedPlaces } from '@shared/features/programme/move-query';
import { possiblePlaces } from '@shared/features/programme/timetable/places';
import { at, block, item, problem, room } from './build-problem';

/** Two weeks from Mon 6 July 2026. */
const given = problem({
  days: 12,
  blocks: Array.from({ length: 12 }, (_, day) => block(day, '9:00', '12:30')),
  rooms: [room('Great Hall', { shortName: 'G' }), room('Ivar', { shortName: 'I' })],
  items: [item('A')],
});

describe('parseMove', () => {
  it.each([
    ['thu', { days: [3, 10] }],
    ['thu 9', { days: [3], starts: [540] }],
    ['thu 10', { days: [3, 10], starts: [600] }],
    ['9 july 11:25 ivar', { days: [3], starts: [at('11:25')], exact: true, rooms: ['Ivar'] }],
    ['Great', { rooms: ['Great Hall'] }],
    ['g', { rooms: ['Great Hall'] }],
    ['11.25', { starts: [at('11:25')], exact: true }],
    ['tue 14:00', { days: [1, 8], starts: [840], exact: true }],
    ['nowhere', { unknown: ['nowhere'] }],
  ])('%s', (text, wanted) => {
    expect(parseMove(given, text)).toEqual({
      days: [],
      starts: [],
      exact: false,
      rooms: [],
      unknown: [],
      ...wanted,
    });
  });
});

describe('rankPlaces', () => {
  it('puts the day and hour that were typed first', () => {
    const query = parseMove(given, 'thu 9');
    const [first] = rankPlaces(possiblePlaces(given, [], 'A'), query);
    expect(first?.to).toMatchObject({ day: 3, start: 540 });
  });
  it('adds the very minute that was typed', () => {
    const places = typedPlaces(given, parseMove(given, 'thu 9 9:35'));
    expect(places).toEqual([
      { day: 3, start: at('9:35'), room: 'Great Hall' },
      { day: 3, start: at('9:35'), room: 'Ivar' },
    ]);
  });
});
