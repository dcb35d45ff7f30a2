import { createHash } from 'node:crypto';
import { Op } from 'sequelize';
import { plainLatex } from '@shared/lib/latex';
import { env } from '@server/env';
import { eventById, eventsById, requireEvent } from '@server/features/events/events.service';
import { publishedProgramme, type PublishedPlacement } from '@server/features/programme/programme.service';
import { feedText, type CalendarItem } from './calendar-text';
import { CalendarFeedRow, CalendarInvitationRow } from './messages.model';

const ORGANIZER = { name: env.INSTITUTE_NAME, email: env.OFFICE_EMAIL };
const KEPT_DAYS = 30;

export interface Feed {
  content: string;
  etag: string;
}

/** A stable UUID-shaped UID for a public item: a hash, so that it names nobody (RFC 7986 section 5.3). */
function stableUid(...parts: string[]): string {
  const hex = createHash('sha256').update(parts.join(' ')).digest('hex');
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-8${hex.slice(13, 16)}-a${hex.slice(17, 20)}-${hex.slice(20, 32)}`;
}

function publicItem(event: { id: string; slug: string; title: string; venue: string; town: string }, placement: PublishedPlacement, stamp: Date): CalendarItem {
  return {
    uid: stableUid('feed', event.id, placement.talkId),
    sequence: 0,
    startsAt: placement.startsAt,
    endsAt: placement.endsAt,
    summary: plainLatex(placement.title).replace(/\n/g, ' '),
    description: `${placement.word}. ${event.title}`,
    location: `${placement.roomName}, ${event.venue}, ${event.town}`,
    url: `${env.BASE_URL}/events/${event.slug}/programme`,
    cancelled: false,
    stamp,
  };
}

const finished = (content: string): Feed => ({ content, etag: `"${createHash('sha256').update(content).digest('base64url').slice(0, 27)}"` });

/** The public feed of an event, or of one of its rooms. Null when there is none. */
export async function eventFeed(slug: string, roomId?: string): Promise<Feed | null> {
  const event = await requireEvent(slug).catch(() => null);
  if (!event || event.state === 'draft') return null;
  const programme = await publishedProgramme(event.id);
  const placements = (programme?.placements ?? []).filter((placement) => !roomId || placement.roomId === roomId);
  // The stamp is the time of publication, so that the same programme is the same text and a program that asks often gets 304.
  const stamp = new Date(programme?.publishedAt ?? 0);
  const name = roomId ? `${event.title}, ${placements[0]?.roomName ?? 'room'}` : event.title;
  return finished(feedText(name, placements.map((placement) => publicItem(event, placement, stamp)), ORGANIZER));
}

/** A person's own feed: what they have a part in; what was cancelled stays as cancelled for 30 days. */
export async function personFeed(token: string, now: Date): Promise<Feed | null> {
  const feed = await CalendarFeedRow.findOne({ where: { token } });
  if (!feed) return null;
  const since = new Date(now.getTime() - KEPT_DAYS * 86_400_000);
  const rows = await CalendarInvitationRow.findAll({
    where: { accountId: feed.accountId, [Op.or]: [{ lastMethod: 'REQUEST' }, { updatedAt: { [Op.gt]: since } }] },
    order: ['startsAt'],
  });
  const events = await eventsById(rows.map((row) => row.eventId));
  const programmes = new Map<string, Map<string, PublishedPlacement>>();
  for (const id of events.keys()) programmes.set(id, new Map(((await publishedProgramme(id))?.placements ?? []).map((placement) => [placement.talkId, placement])));
  const items = await Promise.all(
    rows.map(async (row): Promise<CalendarItem> => {
      const event = events.get(row.eventId) ?? (await eventById(row.eventId));
      const placement = programmes.get(row.eventId)?.get(row.talkId);
      return {
        uid: row.uid,
        sequence: row.sequence,
        startsAt: row.startsAt,
        endsAt: row.endsAt,
        summary: plainLatex(placement?.title ?? 'Talk').replace(/\n/g, ' '),
        description: `${placement?.word ?? 'Talk'}. ${event.title}`,
        location: `${row.roomName}, ${event.venue}, ${event.town}`,
        url: `${env.BASE_URL}/events/${event.slug}/programme`,
        cancelled: row.lastMethod === 'CANCEL',
        stamp: row.updatedAt,
      };
    }),
  );
  return finished(feedText('My programme', items, ORGANIZER));
}
