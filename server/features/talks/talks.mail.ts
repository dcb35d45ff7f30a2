import { formatDateSpan, formatInstant } from '@shared/lib/time';
import { plainLatex } from '@shared/lib/latex';
import { talkKindNames } from '@shared/features/talks/talks.rules';
import type { TalkKind } from '@shared/features/talks/talks.contract';
import { layoutLetter } from '@server/mail/layout';

interface EventData {
  title: string;
  startsOn: string;
  endsOn: string;
  town: string;
  timeZone: string;
}

export function speakerInvitationLetter(data: {
  name: string;
  event: EventData;
  kind: TalkKind;
  minutes: number;
  questionMinutes: number;
  message: string;
  url: string;
}) {
  const { event } = data;
  return {
    subject: `Invitation to speak: ${event.title}`,
    ...layoutLetter({
      heading: `Invitation to speak: ${event.title}`,
      paragraphs: [
        `Dear ${data.name},`,
        ...(data.message
          ? data.message.split(/\n{2,}/)
          : ['the organisers would be glad if you gave a talk.']),
      ],
      facts: [
        ['Event', event.title],
        ['When', formatDateSpan(event.startsOn, event.endsOn)],
        ['Where', event.town],
        [
          'Talk',
          `${talkKindNames[data.kind]}, ${data.minutes} minutes, ${data.questionMinutes} of them for questions`,
        ],
      ],
      action: { label: 'Accept or decline', url: data.url },
      after: [
        'After accepting you tell when you arrive and leave, write the abstract and hand in slides on the same pages. The link is yours alone.',
      ],
    }),
  };
}

export function answerLetter(data: {
  organiser: string;
  speaker: string;
  event: EventData;
  answer: 'accepted' | 'declined';
  note: string;
  url: string;
}) {
  return {
    subject: `${data.speaker} has ${data.answer}: ${data.event.title}`,
    ...layoutLetter({
      heading: `${data.speaker} has ${data.answer}`,
      paragraphs: [
        `Dear ${data.organiser},`,
        `${data.speaker} has ${data.answer} the invitation to speak at ${data.event.title}.`,
        ...(data.note ? [`They write: ${data.note}`] : []),
      ],
      action: { label: 'Open the talks', url: data.url },
    }),
  };
}

export function decisionLetter(data: {
  name: string;
  event: EventData;
  title: string;
  decision: 'accepted' | 'declined';
  note: string;
  url: string;
}) {
  const title = plainLatex(data.title);
  const words =
    data.decision === 'accepted'
      ? `your talk “${title}” is accepted.`
      : `the committee could not find a place for your talk “${title}”.`;
  return {
    subject: `Your talk is ${data.decision}: ${data.event.title}`,
    ...layoutLetter({
      heading: data.decision === 'accepted' ? 'Your talk is accepted' : 'About your talk',
      paragraphs: [`Dear ${data.name},`, words, ...(data.note ? [data.note] : [])],
      action: { label: 'Open your talk', url: data.url },
    }),
  };
}

export function abstractReminderLetter(data: {
  name: string;
  event: EventData;
  title: string;
  until: string | null;
  url: string;
}) {
  const due = data.until
    ? ` It is wanted by ${formatInstant(data.until, data.event.timeZone)} (${data.event.timeZone}).`
    : '';
  return {
    subject: `Your abstract: ${data.event.title}`,
    ...layoutLetter({
      heading: 'Your abstract is still to come',
      paragraphs: [
        `Dear ${data.name},`,
        `for “${plainLatex(data.title)}” at ${data.event.title} we have no abstract yet.${due}`,
      ],
      action: { label: 'Write the abstract', url: data.url },
    }),
  };
}
