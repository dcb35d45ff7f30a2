import { defineFact } from '@server/jobs/job';

export const speakerInvited = defineFact<{ talkId: string; accountId: string; token: string }>(
  'speakerInvited',
);
export const invitationAnswered = defineFact<{
  talkId: string;
  accountId: string;
  answer: 'accepted' | 'declined';
  note: string;
}>('invitationAnswered');
export const talkSubmitted = defineFact<{ talkId: string }>('talkSubmitted');
export const talkDecided = defineFact<{ talkId: string; decision: 'accepted' | 'declined'; note: string }>(
  'talkDecided',
);
export const talkWithdrawn = defineFact<{ talkId: string }>('talkWithdrawn');
export const abstractHandedIn = defineFact<{ talkId: string }>('abstractHandedIn');
