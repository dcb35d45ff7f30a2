import { talkReactions } from '../features/talks/talks-letters.service';
import { registrationReactions } from '../features/registration/registration-letters.service';
import { grantReactions } from '../features/grants/grants-letters.service';
import { messageReactions } from '../features/messages/messages.jobs';
import type { Reaction } from './job';

/** The one table that binds facts to reactions: one line per reaction list. */
export const reactions: readonly Reaction[] = [
  ...talkReactions,
  ...registrationReactions,
  ...grantReactions,
  ...messageReactions,
];
