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
export function invitationChanges(sent: readonly SentInvitation[], programme: readonly PublishedTalk[]): InvitationChange[] {
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
        changes.push({ method: 'REQUEST', invitationId: before.id, accountId, sequence: before.sequence + 1, ...when });
      }
    }
  }
  for (const before of sent) {
    if (before.lastMethod === 'CANCEL' || wanted.has(key(before.talkId, before.accountId))) continue;
    const { id, talkId, accountId, sequence, startsAt, endsAt, roomName } = before;
    changes.push({ method: 'CANCEL', invitationId: id, talkId, accountId, sequence: sequence + 1, startsAt, endsAt, roomName });
  }
  return changes;
}

const sameTimeAndPlace = (a: { startsAt: string; endsAt: string; roomName: string }, b: { startsAt: string; endsAt: string; roomName: string }): boolean =>
  a.startsAt === b.startsAt && a.endsAt === b.endsAt && a.roomName === b.roomName;

/** An answer counts when it is for the present sequence (an older one is to a time that no longer holds). */
export const answerCounts = (invitation: { sequence: number; lastMethod: string }, answer: { sequence: number }): boolean =>
  invitation.lastMethod === 'REQUEST' && answer.sequence >= invitation.sequence;
