import type { MessageState } from '@shared/features/messages/messages.contract';
import type { Answer } from '@shared/features/messages/invitations.rules';

export const stateWords: Record<MessageState, string> = {
  queued: 'Waiting',
  sending: 'Being sent',
  sent: 'Sent',
  failed: 'Failed',
};
export const answerWords: Record<Answer, string> = {
  ACCEPTED: 'Comes',
  TENTATIVE: 'Perhaps',
  DECLINED: 'Does not come',
};

/** What a calendar part does. */
export const methodWords: Record<string, string> = {
  REQUEST: 'Invitation',
  CANCEL: 'Cancellation',
  REPLY: 'Answer',
  PUBLISH: 'Calendar',
};
