import { appendFileSync } from 'node:fs';
import path from 'node:path';
import nodemailer from 'nodemailer';
import { afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import * as contract from '../../../shared/features/messages/messages.contract';
import { env } from '../../../server/env';
import { startLocalMailbox, type LocalMailbox } from '../../../server/fakes/smtp/local-mailbox';
import { acceptReplies } from '../../../server/features/messages/messages-test-mail.service';
import { placeTalk, publishRevision } from '../../../server/features/programme/programme.service';
import { systemActor } from '../../../server/features/accounts/accounts.service';
import { queueMessage } from '../../../server/mail/outbox';
import { administrator, buildAccount } from '../../support/build';
import { buildProgramme } from '../../support/build-programme';
import { startTestApp, type TestApp } from '../../support/server';

let t: TestApp;
let mailbox: LocalMailbox;
beforeAll(async () => {
  t = await startTestApp();
});
beforeEach(async () => {
  await t.reset();
  mailbox = await startLocalMailbox();
  acceptReplies();
});
afterEach(() => mailbox.stop());

async function post(message: Record<string, unknown>): Promise<void> {
  const transport = nodemailer.createTransport({ host: '127.0.0.1', port: mailbox.port, ignoreTLS: true });
  await transport.sendMail({ from: 'somebody@example.org', subject: 'Hello', text: 'Hello', ...message });
  transport.close();
}

describe('the test mailbox', () => {
  it('shows an administrator everything, others exactly what was sent to their own address', async () => {
    const [ann, joann] = [
      await buildAccount({ email: 'ann@example.org' }),
      await buildAccount({ email: 'joann@example.org' }),
    ];
    await post({
      to: `"ann@example.org" <${joann.email}>`,
      subject: 'For Joann',
      attachments: [{ filename: 'a "b".txt', content: 'attached' }],
    });
    const office = await t.signIn(await buildAccount({}, [administrator]));
    const all = (await office.call(contract.listTestMail)).body.items;
    const mail = all.find(({ subject }) => subject === 'For Joann')?.id ?? '';
    expect((await (await t.signIn(ann)).call(contract.listTestMail)).body.items).toEqual([]);
    expect((await (await t.signIn(ann)).call(contract.readTestMail, { params: { mail } })).status).toBe(404);
    const reader = await t.signIn(joann);
    expect((await reader.call(contract.readTestMail, { params: { mail } })).body).toMatchObject({
      subject: 'For Joann',
      attachments: [{ name: 'a "b".txt', bytes: 8 }],
    });
    const file = await reader.call(contract.downloadTestAttachment, { params: { mail, index: 0 } });
    expect(file.headers['content-disposition']).toMatch(/^attachment/);
    expect((await reader.call(contract.downloadTestAttachment, { params: { mail, index: 1 } })).status).toBe(
      404,
    );
    expect((await reader.call(contract.downloadTestCalendar, { params: { mail } })).status).toBe(404);
    expect((await t.stranger.call(contract.listTestMail)).status).toBe(401);
  });

  it('is there again after a restart, without the line that a crash cut off', async () => {
    await post({ to: 'a@example.org', subject: 'Before the restart' });
    const before = mailbox.mails.map(({ id }) => id);
    appendFileSync(path.join(path.dirname(env.DATABASE_FILE), 'local-mailbox.jsonl'), '{"id":"cut o');
    await mailbox.stop();
    mailbox = await startLocalMailbox();
    expect(mailbox.mails.map(({ id }) => id)).toEqual(before);
    expect(mailbox.mails[0]?.subject).toBe('Before the restart');
  });

  it('shows the way of a real invitation and of the reply to it, by SMTP both ways', async () => {
    const scene = await buildProgramme();
    await placeTalk(systemActor, scene.event.slug, {
      talkId: scene.first.id,
      roomId: scene.hall.id,
      day: '2027-07-05',
      startMinute: 540,
    });
    await publishRevision(systemActor, scene.event.slug, {});
    await t.runJobs();
    const invitation = mailbox.mails.find((mail) => mail.recipients.includes(scene.speaker.email));
    expect(invitation).toMatchObject({ calendarMethod: 'REQUEST' });
    const uid = /^UID:(.+)\r$/m.exec(invitation?.calendar ?? '')?.[1] ?? '';
    const content = [
      'BEGIN:VCALENDAR',
      'PRODID:-//x//y//EN',
      'VERSION:2.0',
      'METHOD:REPLY',
      'BEGIN:VEVENT',
      `UID:${uid}`,
      'DTSTAMP:20270101T000000Z',
      'ORGANIZER:mailto:office@tarnholt.example.org',
      `ATTENDEE;CN="Hằng: a, b";PARTSTAT=ACCEPTED:MAILTO:${scene.speaker.email}`,
      'SEQUENCE:0',
      'END:VEVENT',
      'END:VCALENDAR',
      '',
    ].join('\r\n');
    await post({
      to: 'office@tarnholt.example.org',
      subject: 'Accepted',
      icalEvent: { method: 'REPLY', content },
    });
    const organiser = await t.signIn(scene.organiser);
    await expect
      .poll(
        async () =>
          (await organiser.call(contract.talkAnswers, { params: { event: scene.event.slug } })).body.items[0]
            ?.answer,
      )
      .toBe('ACCEPTED');
  });

  it('keeps what the outbox sent to a person readable for that person', async () => {
    const person = await buildAccount();
    await queueMessage({
      letter: 'test',
      accountId: person.id,
      to: { name: person.printedName, address: person.email },
      dedupKey: `k${person.id}`,
      mail: { subject: 'Yours', text: 'Yours', html: '<p>Yours</p>' },
    });
    await t.runJobs();
    const { items } = (await (await t.signIn(person)).call(contract.listTestMail)).body;
    expect(items.map(({ subject }) => subject)).toEqual(['Yours']);
  });
});
