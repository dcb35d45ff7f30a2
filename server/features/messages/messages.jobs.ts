import { on, type Reaction } from '@server/jobs/job';
import { revisionPublished } from '@server/features/programme/programme.jobs';
import { eventOfTalk } from '@server/features/talks/talks.service';
import { talkWithdrawn } from '@server/features/talks/talks.jobs';
import { syncInvitations } from './messages-invitations.service';

/** Calendars follow every change of the published programme. */
export const messageReactions: readonly Reaction[] = [
  on(revisionPublished, 'calendar invitations', async ({ eventId }) => void (await syncInvitations(eventId))),
  on(
    talkWithdrawn,
    'calendar cancellation',
    async ({ talkId }) => void (await syncInvitations(await eventOfTalk(talkId))),
  ),
] as unknown as Reaction[];
