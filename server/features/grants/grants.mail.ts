import type { AwardLine } from '@shared/features/grants/grants.contract';
import { costKindNames, formatGrant, sumOf } from '@shared/features/grants/grants.rules';
import { formatDateSpan, formatInstant } from '@shared/lib/time';
import { layoutLetter } from '@server/mail/layout';

interface EventData {
  title: string;
  startsOn: string;
  endsOn: string;
  town: string;
  timeZone: string;
  currency: string;
}
const span = (event: EventData): string =>
  `${event.title}, ${formatDateSpan(event.startsOn, event.endsOn)}, ${event.town}`;
const linesOf = (lines: readonly (AwardLine & { fund?: string })[], currency: string): [string, string][] => [
  ...lines.map((line): [string, string] => [
    line.fund ? `${costKindNames[line.kind]}, ${line.fund}` : costKindNames[line.kind],
    formatGrant(line.amountMinor, currency),
  ]),
  ['Together', formatGrant(sumOf(lines), currency)],
];

export function grantReceivedLetter(data: {
  name: string;
  event: EventData;
  reference: string;
  requested: AwardLine[];
  decidedAt: string | null;
  url: string;
}) {
  const { event } = data;
  const when = data.decidedAt
    ? ` The committee decides until ${formatInstant(data.decidedAt, event.timeZone)} (${event.timeZone}) and writes to you.`
    : ' The committee decides and writes to you.';
  return {
    subject: `Grant application ${data.reference} received: ${event.title}`,
    ...layoutLetter({
      heading: 'Your grant application has arrived',
      paragraphs: [
        `Dear ${data.name},`,
        `we have your application for a travel grant for ${span(event)}.${when}`,
      ],
      facts: [['Reference', data.reference], ...linesOf(data.requested, event.currency)],
      action: { label: 'See your application', url: data.url },
    }),
  };
}

export function awardsOfferedLetter(data: {
  name: string;
  event: EventData;
  reference: string;
  lines: (AwardLine & { fund: string })[];
  answerBy: string;
  url: string;
}) {
  const { event } = data;
  return {
    subject: `A travel grant for you: ${event.title}`,
    ...layoutLetter({
      heading: 'A travel grant for you',
      paragraphs: [
        `Dear ${data.name},`,
        `we are glad to offer you a travel grant for ${span(event)}.`,
        `Please accept it, or give it back, by ${formatInstant(data.answerBy, event.timeZone)} (${event.timeZone}). After that the money goes to somebody else.`,
      ],
      facts: [['Reference', data.reference], ...linesOf(data.lines, event.currency)],
      action: { label: 'Answer the offer', url: data.url },
      after: [
        'The grant is paid after the event against receipts, at most up to these sums. Keep your tickets and bills.',
        'Whether a grant is taxable depends on the law where you live; the finance office can’t advise on that.',
      ],
    }),
  };
}

export function notAwardedLetter(data: { name: string; event: EventData; reference: string; url: string }) {
  return {
    subject: `About your grant application: ${data.event.title}`,
    ...layoutLetter({
      heading: 'No travel grant this time',
      paragraphs: [
        `Dear ${data.name},`,
        `the committee could not give you a travel grant for ${span(data.event)} and is sorry about it. Your registration is not touched by this.`,
        'If money comes back from others, we may still write to you.',
      ],
      facts: [['Reference', data.reference]],
      action: { label: 'See your application', url: data.url },
    }),
  };
}

export function awardLapsedLetter(data: { name: string; event: EventData; reference: string; url: string }) {
  return {
    subject: `Grant offer out of date: ${data.event.title}`,
    ...layoutLetter({
      heading: 'Your grant offer is out of date',
      paragraphs: [
        `Dear ${data.name},`,
        `we had no answer to the travel grant that we offered you for ${span(data.event)}, so the money has gone back to its fund. If you still want to come with a grant, write to us soon.`,
      ],
      facts: [['Reference', data.reference]],
      action: { label: 'See your application', url: data.url },
    }),
  };
}

export function awardReturnedLetter(data: {
  name: string;
  event: EventData;
  reference: string;
  person: string;
  url: string;
}) {
  return {
    subject: `Grant ${data.reference} given back: ${data.event.title}`,
    ...layoutLetter({
      heading: 'A grant has been given back',
      paragraphs: [
        `Dear ${data.name},`,
        `${data.person} does not take the travel grant for ${data.event.title}. The money is in its fund again and can be offered to somebody else.`,
      ],
      action: { label: 'Open the grants', url: data.url },
    }),
  };
}

/** To the funder: awards wait. No names, no sums: the page tells them to whoever may see it. */
export function awardsProposedLetter(data: {
  name: string;
  event: EventData;
  fund: string;
  decideBy: string | null;
  url: string;
}) {
  const by = data.decideBy
    ? ` by ${formatInstant(data.decideBy, data.event.timeZone)} (${data.event.timeZone})`
    : '';
  return {
    subject: `Awards proposed to ${data.fund}`,
    ...layoutLetter({
      heading: `Awards proposed to ${data.fund}`,
      paragraphs: [
        `Dear ${data.name},`,
        `the committee of ${data.event.title} proposes awards from ${data.fund}. Please approve or query each${by}.`,
      ],
      action: { label: 'See the awards', url: data.url },
    }),
  };
}

export function queryLetter(data: {
  name: string;
  event: EventData;
  fund: string;
  reference: string;
  question: string;
  url: string;
}) {
  return {
    subject: `Question about ${data.reference} from ${data.fund}`,
    ...layoutLetter({
      heading: `Question about ${data.reference}`,
      paragraphs: [
        `Dear ${data.name},`,
        `${data.fund} asks about the award ${data.reference} for ${data.event.title}:`,
        data.question,
        'The award waits for your answer. The others are not held up.',
      ],
      action: { label: 'Answer the question', url: data.url },
    }),
  };
}

export function queryAnsweredLetter(data: {
  name: string;
  event: EventData;
  fund: string;
  reference: string;
  answer: string;
  url: string;
}) {
  return {
    subject: `Answer about ${data.reference}`,
    ...layoutLetter({
      heading: `Answer about ${data.reference}`,
      paragraphs: [
        `Dear ${data.name},`,
        `the committee of ${data.event.title} answers your question about ${data.reference}:`,
        data.answer,
      ],
      action: { label: 'See the award', url: data.url },
    }),
  };
}
