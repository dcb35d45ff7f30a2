import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import { simpleParser, type AddressObject, type ParsedMail } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { env } from '@server/env';
import { smtpTransport, useTransport } from '@server/mail/transport';

export interface StoredMail {
  id: string;
  from: string;
  to: string;
  subject: string;
  at: string;
  messageId: string;
  text: string;
  html: string;
  calendar: string | null;
  calendarMethod: string | null;
  attachments: { name: string; type: string; bytes: number }[];
  headers: { name: string; value: string }[];
}

export interface LocalMailbox {
  port: number;
  mails: readonly StoredMail[];
  /** For tests: answer the next letters with this SMTP code, or wait so many milliseconds. */
  misbehave(how: { code?: number; message?: string; times?: number; delayMs?: number }): void;
  /** What else happens with a letter that arrives (replies to calendar invitations). */
  onMail(listener: (mail: StoredMail) => void): void;
  stop(): Promise<void>;
}

const KEPT = 500;
let running: LocalMailbox | undefined;
/** The mailbox of this process, when there is one. */
export const localMailbox = (): LocalMailbox | undefined => running;

/** A real SMTP server on loopback whose letters are kept and can be read; nothing goes out. */
export async function startLocalMailbox(options: { port?: number; forget?: boolean } = {}): Promise<LocalMailbox> {
  if (env.NODE_ENV === 'production' && !env.ALLOW_FAKES.includes('smtp')) throw new Error('the local mailbox does not run in production unless it is named');
  const file = options.forget ? null : path.join(path.dirname(env.DATABASE_FILE), 'local-mailbox.json');
  const mails: StoredMail[] = file && existsSync(file) ? (JSON.parse(readFileSync(file, 'utf8')) as StoredMail[]) : [];
  const listeners: ((mail: StoredMail) => void)[] = [];
  const fault = { code: 0, message: '', times: 0, delayMs: 0 };
  let serial = mails.length;
  let saving: NodeJS.Timeout | undefined;
  const save = (): void => {
    saving = undefined;
    if (!file) return;
    mkdirSync(path.dirname(file), { recursive: true });
    writeFileSync(file, JSON.stringify(mails));
  };
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: 20 * 1024 * 1024,
    onData(stream, _session, done) {
      simpleParser(stream).then(
        async (parsed) => {
          if (fault.delayMs) await new Promise((resolve) => setTimeout(resolve, fault.delayMs));
          if (fault.times > 0) {
            fault.times -= 1;
            done(Object.assign(new Error(fault.message), { responseCode: fault.code }));
            return;
          }
          const mail = stored(parsed, `mail-${++serial}-${Date.now().toString(36)}`);
          mails.unshift(mail);
          mails.length = Math.min(mails.length, KEPT);
          saving ??= setTimeout(save, 200);
          for (const listener of listeners) listener(mail);
          done(null, `taken as ${mail.id}`);
        },
        (error: unknown) => done(error as Error),
      );
    },
  });
  server.on('error', () => undefined);
  await new Promise<void>((resolve) => server.listen(options.port ?? 0, '127.0.0.1', resolve));
  const { port } = server.server.address() as AddressInfo;
  const transport = smtpTransport(`smtp://127.0.0.1:${port}?ignoreTLS=true`);
  useTransport(transport);
  running = {
    port,
    mails,
    misbehave: (how) => void Object.assign(fault, { code: 451, message: 'try later', times: how.code ? 1 : 0, delayMs: 0 }, how),
    onMail: (listener) => void listeners.push(listener),
    stop: async () => {
      clearTimeout(saving);
      save();
      transport.close();
      useTransport(undefined);
      running = undefined;
      await new Promise<void>((resolve) => server.close(() => resolve()));
    },
  };
  return running;
}

const addresses = (value: AddressObject | AddressObject[] | undefined): string => (Array.isArray(value) ? value : value ? [value] : []).map((entry) => entry.text).join(', ');

function stored(parsed: ParsedMail, id: string): StoredMail {
  const calendar = parsed.attachments.find((part) => part.contentType === 'text/calendar');
  const method = /method=([A-Z]+)/i.exec(calendar?.headers.get('content-type') ? JSON.stringify(calendar.headers.get('content-type')).replace(/"/g, '').replace(/:/g, '=') : '')?.[1];
  const content = calendar?.content.toString('utf8') ?? null;
  return {
    id,
    from: addresses(parsed.from),
    to: addresses(parsed.to),
    subject: parsed.subject ?? '',
    at: new Date().toISOString(),
    messageId: parsed.messageId ?? '',
    text: parsed.text ?? '',
    html: typeof parsed.html === 'string' ? parsed.html : '',
    calendar: content,
    calendarMethod: content ? (/^METHOD:(\w+)/m.exec(content)?.[1] ?? method ?? null) : null,
    attachments: parsed.attachments.map((part) => ({ name: part.filename ?? 'part', type: part.contentType, bytes: part.size })),
    headers: parsed.headerLines.map(({ key, line }) => ({ name: key, value: line.slice(line.indexOf(':') + 1).trim() })),
  };
}
