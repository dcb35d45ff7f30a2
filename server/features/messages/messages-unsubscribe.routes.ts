import express, { type Request, type Response, type Router } from 'express';
import { escapeHtml } from '@server/mail/layout';
import { refusalOf, refuseLetters } from './messages-letters.service';

/**
 * One-click unsubscribing (RFC 8058): a mail program sends a POST with neither cookies nor a CSRF token, so this is a
 * plain route outside /api; the token in the address is the whole authority. A GET only asks (section 3.1: link
 * scanners follow links, and must not unsubscribe anybody).
 */
export function unsubscribeRoutes(router: Router): void {
  router.get('/unsubscribe/:token', (req, res) =>
    show(res, async () => {
      const { title } = await refusalOf(String(req.params.token));
      return `<p>No more letters about ${escapeHtml(title)}, except what concerns your own talk, registration or money?</p><form method="post"><button>Stop these letters</button></form>`;
    }),
  );
  router.post(
    '/unsubscribe/:token',
    express.urlencoded({ extended: false, limit: '1kb' }),
    (req: Request, res: Response) =>
      show(res, async () => {
        const { title } = await refuseLetters(String(req.params.token));
        return `<p>You will get no more such letters about ${escapeHtml(title)}. What concerns your own talk, registration or money is still sent.</p>`;
      }),
  );
}

async function show(res: Response, content: () => Promise<string>): Promise<void> {
  res.locals.route = 'unsubscribe';
  const body = await content().catch(() => null);
  res
    .status(body === null ? 404 : 200)
    .type('html')
    .send(
      `<!doctype html><html lang="en"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>Letters</title><main><h1>Letters</h1>${body ?? '<p>This link is out of date.</p>'}</main></html>`,
    );
}
