import { expect, it, vi } from 'vitest';
import '../../../server/db/models';
import { transaction } from '../../../server/db/transaction';
import { dispatchMail } from '../../../server/mail/dispatch';
import { queueMessage } from '../../../server/mail/outbox';
import { useTransport } from '../../../server/mail/transport';
import { freshDatabase } from '../../support/database';

// The limit is for real mail servers: the environment names one before anything reads it; the transport is a stand-in.
vi.hoisted(() => {
  process.env.SMTP_URL = 'smtp://mail.example.org';
});

it('E5 sends at most 600 letters a minute, and the rest in the next', async () => {
  await freshDatabase();
  let sent = 0;
  useTransport({ send: async () => `250 taken ${++sent}` });
  await transaction(async () => {
    for (let n = 0; n < 605; n++)
      await queueMessage({
        letter: 'test',
        to: { name: 'A', address: 'a@example.org' },
        dedupKey: `rate:${n}`,
        mail: { subject: 's', text: 't', html: 'h' },
      });
  });
  const start = Date.now();
  expect(await dispatchMail(() => new Date(start))).toBe(600);
  expect(await dispatchMail(() => new Date(start + 30_000))).toBe(0);
  expect(await dispatchMail(() => new Date(start + 61_000))).toBe(5);
  expect(sent).toBe(605);
}, 60_000);
