import type { Request, Response, Router } from 'express';
import { eventFeed, personFeed, type Feed } from './messages-feeds.service';

/** Feeds speak iCalendar, not JSON, and are read by programs that send no cookies: plain routes beside the contracts. */
export function feedRoutes(router: Router): void {
  router.get('/calendars/events/:event.ics', async (req, res) =>
    sendFeed(req, res, await eventFeed(String(req.params.event), new Date())),
  );
  router.get('/calendars/events/:event/rooms/:room.ics', async (req, res) =>
    sendFeed(req, res, await eventFeed(String(req.params.event), new Date(), String(req.params.room))),
  );
  router.get('/calendars/:token.ics', async (req, res) =>
    sendFeed(req, res, await personFeed(String(req.params.token), new Date())),
  );
}

function sendFeed(req: Request, res: Response, feed: Feed | null): void {
  res.locals.route = 'GET /calendars';
  if (!feed) {
    res.status(404).type('text').send('There is no such calendar.');
    return;
  }
  res.setHeader('ETag', feed.etag);
  res.setHeader('Cache-Control', 'private, max-age=300');
  if (knows(req.headers['if-none-match'], feed.etag)) {
    res.status(304).end();
    return;
  }
  res
    .type('text/calendar; charset=utf-8')
    .setHeader('Content-Disposition', 'inline; filename="programme.ics"');
  res.send(feed.content);
}

/** RFC 9110 section 13.1.2: a list, compared weakly (a proxy that compresses writes W/). */
const knows = (header: string | undefined, etag: string): boolean =>
  header?.trim() === '*' || (header ?? '').split(',').some((tag) => tag.trim().replace(/^W\//, '') === etag);
