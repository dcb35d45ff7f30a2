import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import '../../../server/db/models';
import { transaction } from '../../../server/db/transaction';
import { startLocalMailbox, type LocalMailbox } from '../../../server/fakes/smtp/local-mailbox';
import {
  backOffSeconds,
  dispatchMail,
  isPermanent,
  recoverInterrupted,
  retryMessage,
} from '../../../server/mail/dispatch';
import { MessageRow } from '../../../server/mail/message.model';
import { messageIdOf, queueMessage, type OutgoingMessage } from '../../../server/mail/outbox';
import { freshDatabase } from '../../support/database';

/** The outbox against a real SMTP server with real sockets. */
let mailbox: LocalMailbox;
beforeAll(async () => {
  mailbox = await startLocalMailbox({ forget: true });
});
afterAll(() => mailbox.stop());
let subject = 0;
beforeEach(async () => {
  await freshDatabase();
  subject += 1;
});
afterEach(() => mailbox.misbehave({ code: 0 }));

const letter = (over: Partial<OutgoingMessage> = {}): OutgoingMessage => ({
  letter: 'test.letter',
  to: { name: 'Ngô Thị “Hằng”, Dr.', address: 'hang@example.org' },
  dedupKey: `test:${subject}`,
  mail: { subject: `Đề tài ${subject}: ζ(3) ∉ ℚ`, text: 'Dear Hằng', html: '<p>Dear Hằng</p>' },
  ...over,
});
const mine = () => mailbox.mails.filter((mail) => mail.subject.startsWith(`Đề tài ${subject}:`));
const only = async () => (await MessageRow.findOne()) as MessageRow;
const later = (seconds: number) => () => new Date(Date.now() + seconds * 1000);

describe('E5 queueing', () => {
  it('keeps one letter for one key, also when queued at the same time', async () => {
    await Promise.all(Array.from({ length: 10 }, () => queueMessage(letter())));
    await queueMessage(letter());
    expect(await MessageRow.count()).toBe(1);
  });

  it('queues nothing when the transaction around it fails', async () => {
    await expect(
      transaction(async () => {
        await queueMessage(letter());
        throw new Error('undone');
      }),
    ).rejects.toThrow('undone');
    expect(await MessageRow.count()).toBe(0);
  });

  it.each([
    ['a line break in subject', { mail: { subject: 'Hello\r\nBcc: all@example.org', text: 'a', html: 'a' } }],
    ['a line break in name', { to: { name: 'A\nB', address: 'a@example.org' } }],
    ['a line break in address', { to: { name: 'A', address: 'a@example.org\r\nRCPT TO:<b@example.org>' } }],
    ['a line break in replyTo', { replyTo: 'a@example.org\nX: y' }],
    ['not an address', { to: { name: 'A', address: 'a@example.org, b@example.org' } }],
    ['not an address', { replyTo: 'nobody' }],
    ['no subject', { mail: { subject: ' ', text: 'a', html: 'a' } }],
    ['no html', { mail: { subject: 's', text: 'a', html: undefined as unknown as string } }],
  ])('refuses %s before anybody is written to', async (fault, over) => {
    expect(() => queueMessage(letter(over))).toThrow(fault);
    expect(await MessageRow.count()).toBe(0);
  });

  it('sends a title that holds the word undefined', async () => {
    await queueMessage(
      letter({
        mail: { subject: `Đề tài ${subject}: is 0/0 undefined`, text: 'undefined', html: 'undefined' },
      }),
    );
    await dispatchMail();
    expect(mine()).toHaveLength(1);
  });
});

describe('E5 sending', () => {
  it('sends once, with the server’s reply kept and every character in place', async () => {
    await queueMessage(
      letter({
        replyTo: 'office@tarnholt.example.org',
        unsubscribeUrl: 'http://analemma.test/unsubscribe/x',
      }),
    );
    expect(await dispatchMail()).toBe(1);
    expect(await dispatchMail(later(90_000))).toBe(0);
    const [mail] = mine();
    expect(mine()).toHaveLength(1);
    expect(mail).toMatchObject({
      subject: `Đề tài ${subject}: ζ(3) ∉ ℚ`,
      recipients: ['hang@example.org'],
      messageId: messageIdOf(`test:${subject}`),
      calendar: null,
    });
    expect(mail?.text.trim()).toBe('Dear Hằng');
    const head = new Map(mail?.headers.map(({ name, value }) => [name, value]));
    expect(head.get('list-unsubscribe')).toContain('<http://analemma.test/unsubscribe/x>');
    expect(head.get('list-unsubscribe-post')).toBe('List-Unsubscribe=One-Click');
    expect(await only()).toMatchObject({
      state: 'sent',
      attempts: 1,
      lastError: null,
      serverReply: expect.stringContaining('250'),
    });
  });

  it('carries a calendar part as RFC 6047 asks: method and charset in the type, in the alternative and as a file', async () => {
    const content = [
      'BEGIN:VCALENDAR',
      'VERSION:2.0',
      'PRODID:x',
      'METHOD:REQUEST',
      'BEGIN:VEVENT',
      'SUMMARY:ζ',
      'END:VEVENT',
      'END:VCALENDAR',
      '',
    ].join('\r\n');
    await queueMessage(letter({ calendar: { method: 'REQUEST', content } }));
    await dispatchMail();
    const [mail] = mine();
    expect(mail).toMatchObject({ calendar: content, calendarMethod: 'REQUEST' });
    expect(mail?.attachments.map(({ name }) => name)).toContain('invitation.ics');
  });

  it('tries again after a 4xx, not before its time, and then sends', async () => {
    await queueMessage(letter());
    mailbox.misbehave({ code: 451, message: 'greylisted, try later', times: 2 });
    expect(await dispatchMail()).toBe(1);
    expect(await only()).toMatchObject({
      state: 'queued',
      attempts: 1,
      lastError: expect.stringContaining('greylisted'),
    });
    expect(await dispatchMail(later(29))).toBe(0);
    expect(await dispatchMail(later(40))).toBe(1);
    expect(await dispatchMail(later(120))).toBe(1);
    expect(await only()).toMatchObject({ state: 'sent', attempts: 3 });
    expect(mine()).toHaveLength(1);
  });

  it('fails at once after a 5xx, in the server’s words, and goes when the office sends it again', async () => {
    await queueMessage(letter());
    mailbox.misbehave({ code: 550, message: 'no such mailbox here' });
    await dispatchMail();
    const failed = await only();
    expect(failed).toMatchObject({
      state: 'failed',
      attempts: 1,
      lastError: expect.stringContaining('no such mailbox here'),
    });
    expect(await dispatchMail(later(90_000))).toBe(0);
    expect(await retryMessage(failed.id)).toBe(true);
    expect(await retryMessage(failed.id)).toBe(false);
    await dispatchMail(later(1));
    expect(await only()).toMatchObject({ state: 'sent' });
    expect(mine()).toHaveLength(1);
  });

  it('gives up after eight temporary refusals', async () => {
    await queueMessage(letter());
    mailbox.misbehave({ code: 421, times: 99 });
    let time = 0;
    for (let attempt = 1; attempt <= 8; attempt++) {
      expect(await dispatchMail(later(time))).toBe(1);
      time += 8_000;
    }
    expect(await dispatchMail(later(time))).toBe(0);
    expect(await only()).toMatchObject({ state: 'failed', attempts: 8 });
  });

  it('keeps one letter in the mailbox when the answer was lost after it had been taken', async () => {
    await queueMessage(letter());
    mailbox.misbehave({ dropAfterTaking: true });
    await dispatchMail();
    expect(await only()).toMatchObject({ state: 'queued' });
    await dispatchMail(later(60));
    expect(await only()).toMatchObject({
      state: 'sent',
      serverReply: expect.stringContaining('had it already'),
    });
    expect(mine()).toHaveLength(1);
  });

  it('finishes what a crash left between sending and sent: due at once at the next start, kept once', async () => {
    await queueMessage(letter());
    await dispatchMail();
    const row = await only();
    // What SIGKILL leaves behind after the server had taken the letter and before the row was marked.
    await transaction(() =>
      row.update({ state: 'sending', serverReply: null, sentAt: null, nextAt: later(600)() }),
    );
    expect(await dispatchMail()).toBe(0);
    expect(await recoverInterrupted()).toBe(1);
    expect(await dispatchMail(later(1))).toBe(1);
    expect(await only()).toMatchObject({ state: 'sent' });
    expect(mine()).toHaveLength(1);
  });
});

describe('E5 rules of sending', () => {
  it('waits 30 s, then twice as long each time, at most two hours, plus up to a fifth', () => {
    expect([1, 2, 3, 8, 20].map((attempts) => backOffSeconds(attempts, () => 0))).toEqual([
      30, 60, 120, 3840, 7200,
    ]);
    expect(backOffSeconds(1, () => 1)).toBe(36);
  });

  it.each([
    [{ responseCode: 550, command: 'RCPT TO' }, true],
    [{ responseCode: 554, command: 'DATA' }, true],
    [{ responseCode: 451, command: 'DATA' }, false],
    [{ responseCode: 535, command: 'AUTH PLAIN', code: 'EAUTH' }, false],
    [{ responseCode: 554, command: 'CONN' }, false],
    [{ code: 'ECONNECTION' }, false],
  ])('%j is permanent: %s', (error, expected) => expect(isPermanent(error)).toBe(expected));
});
