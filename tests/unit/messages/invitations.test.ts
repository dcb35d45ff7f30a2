import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  invitationChanges,
  type PublishedTalk,
  type SentInvitation,
} from '../../../shared/features/messages/invitations.rules';

const talk = (over: Partial<PublishedTalk> = {}): PublishedTalk => ({
  talkId: 't',
  startsAt: '2027-07-05T07:00:00.000Z',
  endsAt: '2027-07-05T08:00:00.000Z',
  roomName: 'Great Hall',
  people: [{ accountId: 'a', part: 'speaker' }],
  ...over,
});
const sent = (over: Partial<SentInvitation> = {}): SentInvitation => ({
  id: 'i',
  talkId: 't',
  accountId: 'a',
  sequence: 0,
  lastMethod: 'REQUEST',
  startsAt: '2027-07-05T07:00:00.000Z',
  endsAt: '2027-07-05T08:00:00.000Z',
  roomName: 'Great Hall',
  ...over,
});
const short = (changes: ReturnType<typeof invitationChanges>) =>
  changes.map((c) => `${c.method} ${c.sequence} ${c.accountId}`);

describe('invitationChanges', () => {
  it.each([
    ['first publication', [], [talk()], ['REQUEST 0 a']],
    ['published again', [sent()], [talk()], []],
    ['moved', [sent()], [talk({ startsAt: '2027-07-05T09:00:00.000Z' })], ['REQUEST 1 a']],
    ['other room', [sent({ sequence: 3 })], [talk({ roomName: 'Ivar' })], ['REQUEST 4 a']],
    ['no longer placed', [sent()], [], ['CANCEL 1 a']],
    ['cancelled already', [sent({ lastMethod: 'CANCEL', sequence: 1 })], [], []],
    ['placed again', [sent({ lastMethod: 'CANCEL', sequence: 1 })], [talk()], ['REQUEST 2 a']],
    [
      'speaker replaced',
      [sent()],
      [talk({ people: [{ accountId: 'b', part: 'speaker' }] })],
      ['REQUEST 0 b', 'CANCEL 1 a'],
    ],
    [
      'chair and tutor get theirs, two parts of one person are one invitation',
      [],
      [
        talk({
          people: [
            { accountId: 'a', part: 'speaker' },
            { accountId: 'a', part: 'chair' },
            { accountId: 'c', part: 'chair' },
          ],
        }),
      ],
      ['REQUEST 0 a', 'REQUEST 0 c'],
    ],
  ] as const)('%s', (_name, before, after, expected) =>
    expect(short(invitationChanges([...before], [...after]))).toEqual(expected),
  );

  it('whatever the programmes: applied once, nothing is owed; sequences only grow', () => {
    const programme = fc.uniqueArray(
      fc.record({
        talkId: fc.constantFrom('t1', 't2', 't3'),
        hour: fc.integer({ min: 8, max: 12 }),
        roomName: fc.constantFrom('G', 'I'),
        people: fc.uniqueArray(fc.constantFrom('a', 'b', 'c'), { minLength: 1 }),
      }),
      { selector: (entry) => entry.talkId },
    );
    fc.assert(
      fc.property(fc.array(programme, { minLength: 1, maxLength: 6 }), (revisions) => {
        let state: SentInvitation[] = [];
        for (const revision of revisions) {
          const published = revision.map((entry) => ({
            talkId: entry.talkId,
            startsAt: `2027-07-05T${entry.hour}:00`,
            endsAt: `2027-07-05T${entry.hour}:50`,
            roomName: entry.roomName,
            people: entry.people.map((accountId) => ({ accountId, part: 'speaker' })),
          }));
          for (const change of invitationChanges(state, published)) {
            const before = state.find(
              (row) => row.talkId === change.talkId && row.accountId === change.accountId,
            );
            if (before) expect(change.sequence).toBe(before.sequence + 1);
            const { method, invitationId: _id, ...rest } = change;
            state = [
              ...state.filter((row) => row !== before),
              { ...rest, id: `${change.talkId}${change.accountId}`, lastMethod: method },
            ];
          }
          expect(invitationChanges(state, published)).toEqual([]);
        }
      }),
    );
  });
});
