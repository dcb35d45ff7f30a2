export interface CalendarReply {
  uid: string;
  attendee: string;
  partstat: string;
  /** 0 when it is not told: RFC 5546 section 3.2.3 lets a reply leave out only a zero. */
  sequence: number;
  /** When the person answered; null when it is not told. */
  stamp: Date | null;
}

interface Line {
  name: string;
  parameters: Map<string, string>;
  value: string;
}

/** Reads the answer of a METHOD:REPLY (RFC 5546 section 3.2.3): one event, exactly one attendee. Null for anything else. */
export function readReply(text: string): CalendarReply | null {
  const lines = text
    .replace(/\r?\n[ \t]/g, '')
    .split(/\r?\n/)
    .flatMap((line) => readLine(line) ?? []);
  const method = lines
    .find(({ name }) => name === 'METHOD')
    ?.value.trim()
    .toUpperCase();
  const start = lines.findIndex(({ name, value }) => name === 'BEGIN' && value.toUpperCase() === 'VEVENT');
  const end = lines.findIndex(({ name, value }) => name === 'END' && value.toUpperCase() === 'VEVENT');
  if (method !== 'REPLY' || start < 0 || end < start) return null;
  const event = lines.slice(start + 1, end);
  const one = (name: string): Line | undefined => event.find((line) => line.name === name);
  const attendees = event.filter(({ name }) => name === 'ATTENDEE');
  const address = /^mailto:(.+)$/i.exec(attendees[0]?.value ?? '')?.[1]?.trim();
  const uid = one('UID')?.value.trim();
  if (!uid || !address || attendees.length !== 1) return null;
  return {
    uid,
    attendee: address.toLowerCase(),
    partstat: (attendees[0]?.parameters.get('PARTSTAT') ?? 'NEEDS-ACTION').toUpperCase(),
    sequence: Number(/^\d{1,9}$/.exec(one('SEQUENCE')?.value.trim() ?? '0')?.[0] ?? -1),
    stamp: readStamp(one('DTSTAMP')?.value),
  };
}

/** `NAME;PARAM=value;PARAM="quoted: value":the value` (RFC 5545 section 3.1). */
function readLine(line: string): Line | null {
  const match = /^([\w-]+)((?:;[\w-]+=(?:"[^"]*"|[^";:,]*)(?:,(?:"[^"]*"|[^";:,]*))*)*):(.*)$/.exec(line);
  if (!match) return null;
  const parameters = new Map<string, string>();
  for (const [, name = '', value = ''] of (match[2] ?? '').matchAll(/;([\w-]+)=("[^"]*"|[^";:]*)/g))
    parameters.set(name.toUpperCase(), value.replace(/^"|"$/g, ''));
  return { name: (match[1] ?? '').toUpperCase(), parameters, value: match[3] ?? '' };
}

function readStamp(value: string | undefined): Date | null {
  const match = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(value?.trim() ?? '');
  if (!match) return null;
  const [year = 0, month = 1, day = 1, hour = 0, minute = 0, second = 0] = match.slice(1).map(Number);
  return new Date(Date.UTC(year, month - 1, day, hour, minute, second));
}
