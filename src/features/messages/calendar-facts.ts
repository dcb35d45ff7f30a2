import { ownTime } from '@/lib/format';
import { methodWords } from './message-words';

const unescape = (text: string): string =>
  text.replace(/\\([\\;,nN])/g, (_whole, char: string) => (char.toLowerCase() === 'n' ? '\n' : char));

/** `20270705T070000Z` as the reader's own time; anything else as it stands. */
function timeOf(value: string): string {
  const match = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(value);
  return match
    ? ownTime(`${match[1]}-${match[2]}-${match[3]}T${match[4]}:${match[5]}:${match[6]}.000Z`)
    : value;
}

/** What a calendar part says, for reading: of its first item. */
export function calendarFacts(text: string): [label: string, value: string][] {
  const lines = text.replace(/\r?\n[ \t]/g, '').split(/\r?\n/);
  const value = (name: string): string => {
    const line =
      lines.find((candidate) => candidate.startsWith(`${name}:`) || candidate.startsWith(`${name};`)) ?? '';
    // The value begins after the first colon that does not stand in a quoted parameter.
    return /^[^":]*(?:"[^"]*"[^":]*)*:(.*)$/.exec(line)?.[1] ?? '';
  };
  const method = value('METHOD');
  const facts: [string, string][] = [
    [
      'What it does',
      `${methodWords[method] ?? method}${Number(value('SEQUENCE')) > 0 && method === 'REQUEST' ? ', changed' : ''}`,
    ],
    ['Title', unescape(value('SUMMARY'))],
    ['Begins', timeOf(value('DTSTART'))],
    ['Ends', timeOf(value('DTEND'))],
    ['Where', unescape(value('LOCATION'))],
    ['For', value('ATTENDEE').replace(/^mailto:/i, '')],
    ['From', value('ORGANIZER').replace(/^mailto:/i, '')],
    ['Sequence', value('SEQUENCE')],
    ['State', value('STATUS').toLowerCase()],
  ];
  return facts.filter(([, content]) => content !== '');
}
