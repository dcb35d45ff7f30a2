import type { Price } from '@shared/features/finance/finance.contract';
import { formatMoney } from '@shared/lib/money';
import { formatDateSpan, formatInstant } from '@shared/lib/time';
import { layoutLetter } from '@server/mail/layout';

interface EventData {
  title: string;
  startsOn: string;
  endsOn: string;
  town: string;
  timeZone: string;
}

export function receiptLetter(data: {
  name: string;
  event: EventData;
  number: string;
  code: string;
  paidAt: string;
  price: Price;
  url: string;
}) {
  const { event, price } = data;
  const facts: [string, string][] = price.lines.map((line) => [
    line.quantity > 1 ? `${line.label}, ${line.quantity} ×` : line.label,
    formatMoney(line.netMinor, price.currency),
  ]);
  for (const tax of price.taxes.filter((entry) => entry.taxMinor > 0))
    facts.push([
      `Tax ${tax.taxBasisPoints / 100} % on ${formatMoney(tax.netMinor, price.currency)}`,
      formatMoney(tax.taxMinor, price.currency),
    ]);
  return {
    subject: `Registered: ${event.title}`,
    ...layoutLetter({
      heading: price.totalMinor > 0 ? 'You are registered and paid' : 'You are registered',
      paragraphs: [
        `Dear ${data.name},`,
        `your place at ${event.title}, ${formatDateSpan(event.startsOn, event.endsOn)}, ${event.town}, is yours. This letter is your receipt, number ${data.number} of ${formatInstant(data.paidAt, event.timeZone)}.`,
      ],
      facts: [
        ...facts,
        ['Total', formatMoney(price.totalMinor, price.currency)],
        ...price.reasons.map((reason): [string, string] => ['Note', reason]),
        ['Code for the desk', data.code],
      ],
      action: { label: 'Open your registration', url: data.url },
    }),
  };
}

export function paymentFailedLetter(data: {
  name: string;
  event: EventData;
  sentence: string;
  until: string | null;
  url: string;
}) {
  const until = data.until
    ? ` Your place is kept until ${formatInstant(data.until, data.event.timeZone)} (${data.event.timeZone}).`
    : '';
  return {
    subject: `Payment not made: ${data.event.title}`,
    ...layoutLetter({
      heading: 'Your payment was not made',
      paragraphs: [
        `Dear ${data.name},`,
        `the card service says: ${data.sentence} Nothing was charged.${until}`,
      ],
      action: { label: 'Pay with another card', url: data.url },
    }),
  };
}

export function applicationReceivedLetter(data: {
  name: string;
  event: EventData;
  waiting: boolean;
  url: string;
}) {
  return {
    subject: `${data.waiting ? 'On the waiting list' : 'Application received'}: ${data.event.title}`,
    ...layoutLetter({
      heading: data.waiting ? 'You are on the waiting list' : 'Your application has arrived',
      paragraphs: [
        `Dear ${data.name},`,
        data.waiting
          ? `all places of ${data.event.title} are taken. When one becomes free, we write to the next on the list.`
          : `we have your application for ${data.event.title}. The committee decides and writes to you.`,
      ],
      action: { label: 'See your application', url: data.url },
    }),
  };
}

export function applicationDecisionLetter(data: {
  name: string;
  event: EventData;
  decision: 'offered' | 'waiting' | 'declined';
  note: string;
  answerBy: string | null;
  url: string;
}) {
  const { event } = data;
  const words = {
    offered: `we are glad to offer you a place at ${event.title}, ${formatDateSpan(event.startsOn, event.endsOn)}, ${event.town}.${data.answerBy ? ` Please register by ${formatInstant(data.answerBy, event.timeZone)} (${event.timeZone}); after that the place goes to the next person.` : ' Please register soon.'}`,
    waiting: `there is no place for you at ${event.title} yet; you are on the waiting list, and we write as soon as one becomes free.`,
    declined: `we could not find a place for you at ${event.title} and are sorry about it.`,
  };
  return {
    subject: `${{ offered: 'A place for you', waiting: 'On the waiting list', declined: 'About your application' }[data.decision]}: ${event.title}`,
    ...layoutLetter({
      heading: {
        offered: 'A place for you',
        waiting: 'You are on the waiting list',
        declined: 'About your application',
      }[data.decision],
      paragraphs: [`Dear ${data.name},`, words[data.decision], ...(data.note ? [data.note] : [])],
      action:
        data.decision === 'offered'
          ? { label: 'Register', url: data.url }
          : { label: 'See your application', url: data.url },
    }),
  };
}
