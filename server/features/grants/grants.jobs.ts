import { defineFact } from '@server/jobs/job';

export const grantApplied = defineFact<{ applicationId: string }>('grantApplied');
export const awardProposed = defineFact<{ awardId: string; fundId: string }>('awardProposed');
export const awardApproved = defineFact<{ awardId: string; fundId: string }>('awardApproved');
export const awardQueried = defineFact<{ awardId: string; talkId: string }>('awardQueried');
export const awardQueryAnswered = defineFact<{ awardId: string; talkId: string }>('awardQueryAnswered');
export const awardsOffered = defineFact<{ applicationId: string; answerBy: string }>('awardsOffered');
export const grantNotAwarded = defineFact<{ applicationId: string }>('grantNotAwarded');
export const awardAnswered = defineFact<{
  applicationId: string;
  answer: 'accepted' | 'returned' | 'lapsed';
}>('awardAnswered');
