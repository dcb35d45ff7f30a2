/** What a person's calendar has been told about a talk. */
export interface SentInvitation {
  id: string;
  talkId: string;
  accountId: string;
  /** Of the last message; only grows (RFC 5546 section 2.1.4). */
  sequence: number;
  lastMethod: 'REQUEST' | 'CANCEL';
  startsAt: string;
  endsAt: string;
  roomName: string;
}

/** A published talk with the people who are to have it in their calendars. Instants in UTC. */
export interface PublishedTalk {
  talkId: string;
  startsAt: string;
  endsAt: string;
  roomName: string;
  people: readonly { accountId: string; part: string }[];
}

export interface InvitationChange {
  method: 'REQUEST' | 'CANCEL';
  /** Null for a first invitation. */
  invitationId: string | null;
  talkId: string;
  accountId: string;
  sequence: number;
  startsAt: string;
  endsAt: string;
  roomName: string;
}

/**
 * Exactly the messages that a change of the programme calls for, by talk and person: a first REQUEST with sequence 0; an
 * update with the sequence raised when start, end or room have changed, and only then; a CANCEL when the person no longer
 * has a part in it or it is no longer placed. The same programme again calls for nothing.
 */
export function invitationChanges(
  sent: readonly SentInvitation[],
  programme: readonly PublishedTalk[],
): InvitationChange[] {
  const key = (talkId: string, accountId: string): string => `${talkId} ${accountId}`;
  const known = new Map(sent.map((invitation) => [key(invitation.talkId, invitation.accountId), invitation]));
  const changes: InvitationChange[] = [];
  const wanted = new Set<string>();
  for (const { people, ...when } of programme) {
    for (const accountId of new Set(people.map((person) => person.accountId))) {
      wanted.add(key(when.talkId, accountId));
      const before = known.get(key(when.talkId, accountId));
      if (!before) changes.push({ method: 'REQUEST', invitationId: null, accountId, sequence: 0, ...when });
      else if (before.lastMethod === 'CANCEL' || !sameTimeAndPlace(before, when)) {
        changes.push({
          method: 'REQUEST',
          invitationId: before.id,
          accountId,
          sequence: before.sequence + 1,
          ...when,
        });
      }
    }
  }
  for (const before of sent) {
    if (before.lastMethod === 'CANCEL' || wanted.has(key(before.talkId, before.accountId))) continue;
    const { id, talkId, accountId, sequence, startsAt, endsAt, roomName } = before;
    changes.push({
      method: 'CANCEL',
      invitationId: id,
      talkId,
      accountId,
      sequence: sequence + 1,
      startsAt,
      endsAt,
      roomName,
    });
  }
  return changes;
}

const sameTimeAndPlace = (
  a: { startsAt: string; endsAt: string; roomName: string },
  b: { startsAt: string; endsAt: string; roomName: string },
): boolean => a.startsAt === b.startsAt && a.endsAt === b.endsAt && a.roomName === b.roomName;

export const answers = ['ACCEPTED', 'TENTATIVE', 'DECLINED'] as const;
export type Answer = (typeof answers)[number];

/** The answer of a PARTSTAT; null for one that says neither yes, no nor perhaps. */
export const answerOf = (partstat: string): Answer | null =>
  answers.find((answer) => answer === partstat) ?? null;

/** A reply counts for the present time only: its sequence must be the invitation's (RFC 5546 section 3.2.3). */
export const answerCounts = (
  invitation: { sequence: number; lastMethod: string },
  reply: { sequence: number },
): boolean => invitation.lastMethod === 'REQUEST' && reply.sequence === invitation.sequence;
