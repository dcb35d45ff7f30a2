import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { talkKinds, talkStates, type TalkState } from '../../../shared/features/talks/talks.contract';
import {
  needsSpeaker,
  owesAbstract,
  prerequisiteCircle,
  presenceErrors,
  stepRefusal,
  usualMinutes,
} from '../../../shared/features/talks/talks.rules';
import { findClasses, mscProblem } from '../../../shared/features/talks/subjects.rules';

describe('states of a talk (product.md section 4)', () => {
  const allowed: Record<TalkState, TalkState[]> = {
    draft: ['submitted', 'accepted', 'declined', 'withdrawn'],
    submitted: ['accepted', 'declined', 'withdrawn'],
    accepted: ['declined', 'withdrawn'],
    declined: ['accepted'],
    withdrawn: [],
  };
  it.each(talkStates.flatMap((from) => talkStates.map((to) => [from, to] as const)))(
    '%s -> %s',
    (from, to) => {
      const refusal = stepRefusal(from, to);
      if (allowed[from].includes(to)) expect(refusal).toBeUndefined();
      else
        expect(refusal).toBe(
          from === to ? `The talk is ${from} already.` : `A ${from} talk can’t become ${to}.`,
        );
    },
  );
});

describe('kinds', () => {
  it('owe an abstract when somebody gives a talk', () => {
    expect(talkKinds.filter(owesAbstract)).toEqual(['plenary', 'invited', 'contributed', 'course_lecture']);
    expect(talkKinds.filter(needsSpeaker)).toEqual([
      'plenary',
      'invited',
      'contributed',
      'course_lecture',
      'exercise',
    ]);
  });
  it.each(talkKinds)('%s: questions fit into the time', (kind) => {
    expect(usualMinutes[kind].questionMinutes).toBeLessThan(usualMinutes[kind].minutes);
    expect(usualMinutes[kind].minutes % 5).toBe(0);
  });
});

describe('prerequisites', () => {
  it.each([
    ['none', [], false],
    [
      'a chain',
      [
        ['a', 'b'],
        ['b', 'c'],
      ],
      false,
    ],
    [
      'a diamond',
      [
        ['a', 'b'],
        ['a', 'c'],
        ['b', 'd'],
        ['c', 'd'],
      ],
      false,
    ],
    ['itself', [['a', 'a']], true],
    [
      'two',
      [
        ['a', 'b'],
        ['b', 'a'],
      ],
      true,
    ],
    [
      'a long circle behind a chain',
      [
        ['x', 'a'],
        ['a', 'b'],
        ['b', 'c'],
        ['c', 'a'],
      ],
      true,
    ],
  ] as [string, [string, string][], boolean][])('%s', (_name, pairs, closed) => {
    const found = prerequisiteCircle(pairs.map(([before, after]) => ({ before, after })));
    expect(found !== undefined).toBe(closed);
    if (found) expect(pairs).toContainEqual([found.before, found.after]);
  });

  it('never finds a circle where all pairs go upwards, and always where one is closed', () => {
    const upwards = fc.array(
      fc.tuple(fc.nat(30), fc.nat(30)).filter(([a, b]) => a < b),
      { minLength: 1, maxLength: 60 },
    );
    fc.assert(
      fc.property(upwards, (edges) => {
        const pairs = edges.map(([a, b]) => ({ before: `${a}`, after: `${b}` }));
        const [first] = pairs as [{ before: string; after: string }];
        return (
          prerequisiteCircle(pairs) === undefined &&
          prerequisiteCircle([...pairs, { before: first.after, after: first.before }]) !== undefined
        );
      }),
    );
  });

  it('stands a chain of 500', () => {
    const pairs = Array.from({ length: 500 }, (_, i) => ({ before: `${i}`, after: `${i + 1}` }));
    expect(prerequisiteCircle(pairs)).toBeUndefined();
  });
});

describe('travel window', () => {
  it.each([
    [{ arrivesAt: null, leavesAt: null, blocked: [] }, {}],
    [{ arrivesAt: '2027-07-05T08:00', leavesAt: '2027-07-06T08:00', blocked: [] }, {}],
    [
      { arrivesAt: '2027-07-06T08:00', leavesAt: '2027-07-06T08:00', blocked: [] },
      { leavesAt: 'You leave before you arrive.' },
    ],
    [
      {
        arrivesAt: null,
        leavesAt: '2027-07-06T08:00',
        blocked: [{ from: '2027-07-05T10:00', to: '2027-07-05T09:00' }],
      },
      { 'blocked.0.to': 'The end is not after the start.' },
    ],
  ])('%j', (presence, errors) => expect(presenceErrors(presence)).toEqual(errors));
});

describe('MSC 2020 by words', () => {
  it('finds classes by number and by words of the title', () => {
    expect(findClasses('52')).toEqual([{ code: '52', title: 'Convex and discrete geometry' }]);
    expect(findClasses('knot')).toEqual([]);
    expect(findClasses('number THEORY').map((found) => found.code)).toContain('11');
    expect(findClasses('a', 4)).toHaveLength(4);
  });
  // Sources: "Demo codes" and "E-codes" of the official MSC_2020.csv, msc2020.org.
  it.each([
    '14H52',
    '16G20',
    '20F65',
    '35Q30',
    '37D20',
    '53C21',
    '55P42',
    '60H15',
    '65N30',
    '68Q17',
    '90B35',
    '90C10',
    '91B32',
    '46L05',
    '03E35',
    '60E05',
  ])('%s', (code) => expect(mscProblem(code)).toBeUndefined());
});
