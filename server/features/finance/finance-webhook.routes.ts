import express, { Router } from 'express';
import { log } from '@server/http/request-log';
import { takeNotice } from './finance-payments.service';
import { readNotice } from './finance.gateway';

/**
 * Notices of the card service: raw body, signature first, answered 2xx only after the commit. No session and no CSRF
 * token here: the signature is the door.
 */
export const stripeWebhookRouter: Router = Router();

stripeWebhookRouter.post(
  '/api/webhooks/stripe',
  express.raw({ type: () => true, limit: '1mb' }),
  async (req, res) => {
    const now = new Date();
    try {
      const notice = readNotice(req.body as Buffer, req.get('stripe-signature') ?? '', now);
      const effect = await takeNotice(notice, now).catch((error: unknown) => {
        log.error({ err: error, notice: notice.id }, 'webhook');
        return null;
      });
      if (effect === null) res.status(500).json({ received: false });
      else res.status(200).json({ received: true, effect });
    } catch {
      res.status(400).json({ received: false, reason: 'signature' });
    }
  },
);
