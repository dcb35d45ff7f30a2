import nodemailer, { type Transporter } from 'nodemailer';
import { env } from '../env';

export interface WireMessage {
  to: { name: string; address: string };
  subject: string;
  text: string;
  html: string;
  calendar: { method: 'REQUEST' | 'CANCEL'; content: string } | null;
  replyTo: string | null;
  unsubscribeUrl: string | null;
  messageId: string;
}

export interface MailTransport {
  /** Sends and resolves with the server's reply; rejects with its words (`responseCode` where SMTP gave one). */
  send(message: WireMessage): Promise<string>;
}

let current: MailTransport | undefined;

/** Puts another transport in place (tests, the local mailbox). */
export function useTransport(transport: MailTransport | undefined): void {
  current = transport;
}

export function mailTransport(): MailTransport {
  current ??= smtpTransport(env.SMTP_URL ?? 'smtp://127.0.0.1:2525');
  return current;
}

/** SMTP by nodemailer. The calendar part stands in the alternative and as an attachment (RFC 6047 section 2.4). */
export function smtpTransport(url: string): MailTransport & { close(): void } {
  // Options of the connection go into its address: what is passed beside an address are defaults of letters.
  const address = new URL(url);
  const options = {
    pool: 'true',
    maxConnections: '2',
    connectionTimeout: '20000',
    greetingTimeout: '20000',
    socketTimeout: '120000',
  };
  for (const [name, value] of Object.entries(options))
    if (!address.searchParams.has(name)) address.searchParams.set(name, value);
  const transporter: Transporter = nodemailer.createTransport(address.href);
  return {
    close: () => transporter.close(),
    send: async (message) => {
      const info = (await transporter.sendMail({
        from: { name: env.INSTITUTE_NAME, address: env.OFFICE_EMAIL },
        to: message.to,
        replyTo: message.replyTo ?? undefined,
        subject: message.subject,
        text: message.text,
        html: message.html,
        messageId: message.messageId,
        disableFileAccess: true,
        disableUrlAccess: true,
        ...(message.unsubscribeUrl && {
          headers: {
            'List-Unsubscribe': `<${message.unsubscribeUrl}>`,
            'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click',
          },
        }),
        ...(message.calendar && {
          icalEvent: {
            method: message.calendar.method,
            filename: 'invitation.ics',
            content: message.calendar.content,
          },
        }),
      })) as { response: string };
      return info.response;
    },
  };
}
