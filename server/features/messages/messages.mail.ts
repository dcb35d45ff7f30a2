import { formatSpan, zoneName } from '@shared/lib/time';
import { layoutLetter } from '@server/mail/layout';

export function calendarLetter(data: {
  method: 'REQUEST' | 'CANCEL';
  sequence: number;
  name: string;
  event: { title: string; timeZone: string };
  word: string;
  title: string;
  startsAt: string;
  endsAt: string;
  roomName: string;
  url: string;
  answerUrl: string;
}) {
  const { event, title } = data;
  const when = `${formatSpan(data.startsAt, data.endsAt, event.timeZone)} ${zoneName(data.startsAt, event.timeZone)}`;
  const heading =
    data.method === 'CANCEL'
      ? 'No longer in the programme'
      : data.sequence > 0
        ? 'New time or room'
        : 'In the programme';
  const words = {
    CANCEL: `“${title}” at ${event.title} is no longer in the programme, or no longer yours. The calendar file takes it out of your calendar.`,
    REQUEST:
      data.sequence > 0
        ? `“${title}” at ${event.title} has moved. This is when and where it takes place now:`
        : `“${title}” at ${event.title} is in the programme:`,
  };
  return {
    subject: `${data.method === 'CANCEL' ? 'Cancelled' : data.sequence > 0 ? 'Moved' : 'Invitation'}: ${title.slice(0, 120)}, ${when}`,
    ...layoutLetter({
      heading,
      paragraphs: [`Dear ${data.name},`, words[data.method]],
      facts: [
        ['What', data.word],
        ['When', when],
        ['Where', data.roomName],
      ],
      ...(data.method === 'REQUEST' && { action: { label: 'Say whether you come', url: data.answerUrl } }),
      after: [`The programme: ${data.url}`],
    }),
  };
}

/** A letter that an organiser wrote, its fields filled in. */
export function freeLetter({
  subject,
  text,
  event,
}: {
  subject: string;
  text: string;
  event: { title: string; contactEmail: string };
}) {
  const paragraphs = text
    .replace(/\r\n?/g, '\n')
    .split(/\n{2,}/)
    .map((paragraph) => paragraph.trim())
    .filter(Boolean);
  return {
    subject,
    ...layoutLetter({
      heading: subject,
      paragraphs,
      footer: `You get this because you take part in ${event.title}. Answers go to ${event.contactEmail}.`,
    }),
  };
}
