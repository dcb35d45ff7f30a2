import type { AddressInfo } from 'node:net';
import path from 'node:path';
import type { Readable } from 'node:stream';
import { simpleParser } from 'mailparser';
import { SMTPServer, type SMTPServerSession } from 'smtp-server';
import { env } from '@server/env';
import { smtpTransport, useTransport } from '@server/mail/transport';
import { openMailFile } from './mail-file';
import { storedMail, type StoredMail } from './stored-mail';

export type { StoredMail } from './stored-mail';

export interface LocalMailbox {
  port: number;
  /** The latest first. */
  mails: readonly StoredMail[];
  /** For tests: answer the next letters with this SMTP code, or wait so many milliseconds. */
  misbehave(how: Partial<Fault>): void;
  /** What else happens with a letter that arrives (replies to calendar invitations). */
  onMail(listener: (mail: StoredMail) => void): void;
  stop(): Promise<void>;
}

interface Fault {
  code: number;
  message: string;
  /** So many letters are refused. */
  times: number;
  delayMs: number;
  /** Takes the letter, but the line goes dead before the answer: what a sender sees when either side dies there. */
  dropAfterTaking: boolean;
}

const KEPT = 500;
let running: LocalMailbox | undefined;
/** The mailbox of this process, when there is one. */
export const localMailbox = (): LocalMailbox | undefined => running;

/** A real SMTP server on loopback whose letters are kept and can be read; nothing goes out. */
export async function startLocalMailbox(
  options: { port?: number; forget?: boolean } = {},
): Promise<LocalMailbox> {
  if (env.NODE_ENV === 'production' && !env.ALLOW_FAKES.includes('smtp'))
    throw new Error('the local mailbox does not run in production unless it is named');
  const box = new Mailbox(
    options.forget ? null : path.join(path.dirname(env.DATABASE_FILE), 'local-mailbox.jsonl'),
  );
  const server = new SMTPServer({
    authOptional: true,
    disableReverseLookup: true, // there is no name server to ask on loopback; waiting for one made each letter slow
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: 20 * 1024 * 1024,
    onData: (stream, session, done) =>
      void box.take(stream, session).then(
        (reply) => done(null, reply),
        (error: Error) => done(error),
      ),
  });
  server.on('error', () => undefined);
  await new Promise<void>((resolve) => server.listen(options.port ?? 0, '127.0.0.1', resolve));
  const { port } = server.server.address() as AddressInfo;
  const transport = smtpTransport(`smtp://127.0.0.1:${port}?ignoreTLS=true`);
  useTransport(transport);
  running = {
    port,
    mails: box.mails,
    misbehave: (how) => void Object.assign(box.fault, noFault, { times: how.code ? 1 : 0 }, how),
    onMail: (listener) => void box.listeners.push(listener),
    stop: async () => {
      transport.close();
      useTransport(undefined);
      running = undefined;
      await new Promise<void>((resolve) => server.close(() => resolve()));
    },
  };
  return running;
}

const noFault: Fault = { code: 451, message: 'try later', times: 0, delayMs: 0, dropAfterTaking: false };

class Mailbox {
  readonly mails: StoredMail[];
  readonly listeners: ((mail: StoredMail) => void)[] = [];
  readonly fault: Fault = { ...noFault };
  private readonly file;
  private serial: number;

  constructor(file: string | null) {
    this.file = openMailFile(file, KEPT);
    this.mails = [...this.file.mails].reverse();
    this.serial = this.mails.length;
  }

  /** Keeps one letter and resolves with the answer; rejects with `responseCode` when told to misbehave. */
  async take(stream: Readable, session: SMTPServerSession): Promise<string> {
    const parsed = await simpleParser(stream);
    const { delayMs, code, message, dropAfterTaking } = this.fault;
    if (delayMs) await new Promise((resolve) => setTimeout(resolve, delayMs));
    if (this.fault.times > 0) {
      this.fault.times -= 1;
      throw Object.assign(new Error(message), { responseCode: code });
    }
    const recipients = session.envelope.rcptTo.map(({ address }) => address);
    const twin =
      parsed.messageId &&
      this.mails.find(
        (mail) =>
          mail.messageId === parsed.messageId && mail.recipients.join() === recipients.join().toLowerCase(),
      );
    if (twin) return `had it already as ${twin.id}`;
    const mail = storedMail(parsed, `mail-${++this.serial}-${Date.now().toString(36)}`, recipients);
    this.file.append(mail);
    this.mails.unshift(mail);
    this.mails.length = Math.min(this.mails.length, KEPT);
    for (const listener of this.listeners) listener(mail);
    if (dropAfterTaking) {
      this.fault.dropAfterTaking = false;
      throw Object.assign(new Error('the line went dead'), { responseCode: 421 });
    }
    return `taken as ${mail.id}`;
  }
}
