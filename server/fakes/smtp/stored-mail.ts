import type { AddressObject, Attachment, ParsedMail } from 'mailparser';

export interface StoredAttachment {
  name: string;
  type: string;
  bytes: number;
  /** Base64; null when it was too large to keep. */
  content: string | null;
}

/** A letter as the local mailbox keeps it. */
export interface StoredMail {
  id: string;
  from: string;
  /** As the letter's head says. */
  to: string;
  /** Lower-case addresses of the envelope: whose letter it is. */
  recipients: string[];
  subject: string;
  at: string;
  messageId: string;
  text: string;
  html: string;
  calendar: string | null;
  calendarMethod: string | null;
  attachments: StoredAttachment[];
  headers: { name: string; value: string }[];
}

const KEPT_BYTES = 1_000_000;

const addresses = (value: AddressObject | AddressObject[] | undefined): string =>
  [value ?? []]
    .flat()
    .map((entry) => entry.text)
    .join(', ');

/** Reads METHOD from the object itself: the Content-Type only repeats it (RFC 6047 section 2.4). */
const methodOf = (calendar: string): string | null =>
  /^METHOD:(\w+)\s*$/m.exec(calendar)?.[1]?.toUpperCase() ?? null;

const kept = (part: Attachment): StoredAttachment => ({
  name: part.filename ?? 'part',
  type: part.contentType,
  bytes: part.size,
  content: part.size <= KEPT_BYTES ? part.content.toString('base64') : null,
});

/** What is kept of a parsed letter. */
export function storedMail(parsed: ParsedMail, id: string, recipients: string[]): StoredMail {
  const part = parsed.attachments.find(
    ({ contentType }) => contentType === 'text/calendar' || contentType === 'application/ics',
  );
  const calendar = part?.content.toString('utf8') ?? null;
  return {
    id,
    from: addresses(parsed.from),
    to: addresses(parsed.to),
    recipients: recipients.map((address) => address.toLowerCase()),
    subject: parsed.subject ?? '',
    at: new Date().toISOString(),
    messageId: parsed.messageId ?? '',
    text: parsed.text ?? '',
    html: typeof parsed.html === 'string' ? parsed.html : '',
    calendar,
    calendarMethod: calendar && methodOf(calendar),
    // The alternative and the attached file are the same invitation: the one with a name is shown.
    attachments: parsed.attachments.filter(({ filename }) => filename !== undefined).map(kept),
    headers: parsed.headerLines.map(({ key, line }) => ({
      name: key,
      value: line.slice(line.indexOf(':') + 1).trim(),
    })),
  };
}
