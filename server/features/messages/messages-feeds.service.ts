import { createHash, createHmac } from 'node:crypto';
import { Op } from 'sequelize';
import { plainLatex } from '@shared/lib/latex';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { env } from '@server/env';
import type { Actor } from '@server/http/authorize';
import { eventsById, requireEvent, roomsOf, type eventById } from '@server/features/events/events.service';
import {
  droppedPlacements,
  publishedProgramme,
  type PublishedPlacement,
} from '@server/features/programme/programme.service';
import { talkTitle } from '@server/features/talks/talks.service';
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

type Event = Awaited<ReturnType<typeof eventById>>;

const summaryOf = (title: string): string => plainLatex(title).replace(/\s+/g, ' ').trim();

function itemOf(
  event: Event,
  placement: Pick<PublishedPlacement, 'startsAt' | 'endsAt' | 'roomName' | 'title' | 'word'>,
) {
  return {
    startsAt: placement.startsAt,
    endsAt: placement.endsAt,
    summary: summaryOf(placement.title),
    description: `${placement.word}. ${event.title}`,
    location: [placement.roomName, event.venue, event.town].filter(Boolean).join(', '),
    url: `${env.BASE_URL}/events/${event.slug}/programme`,
  };
}

const REMEMBERED = 200;
const written = new Map<string, Feed>();

/** The feed of these items. Writing one takes far longer than looking them up, and calendar programs ask all day: the same items are written once. */
function feedOf(name: string, items: CalendarItem[]): Feed {
  const key = createHash('sha256')
    .update(JSON.stringify([name, items]))
    .digest('base64url');
  const known = written.get(key);
  if (known) return known;
  const feed = { content: feedText(name, items, ORGANIZER), etag: `"${key.slice(0, 27)}"` };
  if (written.size >= REMEMBERED) written.delete(written.keys().next().value as string);
  written.set(key, feed);
  return feed;
}

const hashOf = (secret: string): string => createHash('sha256').update(secret).digest('hex');
/** 256 bits that only this server can compute, so that the owner is shown the address again though it is kept as a hash. */
const secretOf = (rowId: string): string =>
  createHmac('sha256', env.SESSION_SECRET).update(`calendar feed ${rowId}`).digest('base64url');

/** The secret part of one's own feed address; made when there is none, new (and the old one ended) when asked. */
export function myFeedToken(actor: Actor, renew: boolean): Promise<string> {
  return transaction(async () => {
    const before = await CalendarFeedRow.findOne({ where: { accountId: actor.accountId } });
    // Another session secret makes other addresses: the kept hash then no longer fits, and the address is made anew.
    if (before && !renew && before.tokenHash === hashOf(secretOf(before.id))) return secretOf(before.id);
    await before?.destroy();
    const id = newId();
    await CalendarFeedRow.create({ id, accountId: actor.accountId, tokenHash: hashOf(secretOf(id)) });
    return secretOf(id);
  });
}

/** The public feed of an event, or of one of its rooms. Null when there is none. What was cancelled stays as cancelled for 30 days. */
export async function eventFeed(slug: string, now: Date, roomId?: string): Promise<Feed | null> {
  const event = await requireEvent(slug).catch(() => null);
  const room = roomId ? (await roomsOf(event?.id ?? '')).find(({ id }) => id === roomId) : undefined;
  if (!event || event.state === 'draft' || (roomId && !room)) return null;
  const programme = await publishedProgramme(event.id);
  const dropped = await droppedPlacements(event.id, daysBefore(now));
  // Stamp and sequence come from the revision, so that the same programme is the same text and who asks often gets 304.
  const stamp = new Date(programme?.publishedAt ?? 0);
  const sequence = 2 * (programme?.number ?? 0);
  const item =
    (cancelled: boolean) =>
    (placement: PublishedPlacement): CalendarItem => ({
      ...itemOf(event, placement),
      uid: stableUid('feed', event.id, placement.talkId),
      sequence: cancelled ? sequence + 1 : sequence,
      cancelled,
      stamp,
    });
  const items = [
    ...(programme?.placements ?? []).map((one) => ({ one, write: item(false) })),
    ...dropped.map((one) => ({ one, write: item(true) })),
  ];
  const chosen = items.filter(({ one }) => !roomId || one.roomId === roomId);
  return feedOf(
    room ? `${event.title}, ${room.name}` : event.title,
    chosen.map(({ one, write }) => write(one)),
  );
}

const daysBefore = (now: Date): Date => new Date(now.getTime() - KEPT_DAYS * 86_400_000);

/** A person's own feed: what they have a part in; what was cancelled stays as cancelled for 30 days. Null for an unknown or ended address. */
export async function personFeed(token: string, now: Date): Promise<Feed | null> {
  const feed = await CalendarFeedRow.findOne({ where: { tokenHash: hashOf(token) } });
  if (!feed) return null;
  const rows = await CalendarInvitationRow.findAll({
    where: {
      accountId: feed.accountId,
      [Op.or]: [{ lastMethod: 'REQUEST' }, { updatedAt: { [Op.gt]: daysBefore(now) } }],
    },
    order: ['startsAt', 'id'],
  });
  const events = await eventsById(rows.map((row) => row.eventId));
  const titles = await publishedTitles([...events.keys()]);
  const items = await Promise.all(
    rows.map(async (row): Promise<CalendarItem> => {
      const { title, word } = titles.get(row.talkId) ?? { title: await talkTitle(row.talkId), word: 'Talk' };
      const event = events.get(row.eventId) as Event;
      const { startsAt, endsAt, roomName } = row;
      return {
        ...itemOf(event, { startsAt, endsAt, roomName, title, word }),
        uid: row.uid,
        sequence: row.sequence,
        cancelled: row.lastMethod === 'CANCEL',
        stamp: row.updatedAt,
      };
    }),
  );
  return feedOf('My programme', items);
}

async function publishedTitles(eventIds: string[]): Promise<Map<string, PublishedPlacement>> {
  const programmes = await Promise.all(eventIds.map(publishedProgramme));
  return new Map(
    programmes
      .flatMap((programme) => programme?.placements ?? [])
      .map((placement) => [placement.talkId, placement]),
  );
}
