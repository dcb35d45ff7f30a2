import type { DeadlineKind } from '../events/events.contract';
import type { Duty } from './runup.contract';
import { formatMoney } from '../../lib/money';
import { count } from '../../lib/text';
import { addDays } from '../../lib/time';

/** Everything that duties are worked out from; counts by the services, dates local to the event. */
export interface DutyFacts {
  slug: string;
  state: string;
  today: string;
  startsOn: string;
  endsOn: string;
  deadlines: readonly { kind: DeadlineKind; date: string }[];
  missingSteps: readonly string[];
  unanswered: readonly string[];
  missingAbstracts: readonly string[];
  submitted: number;
  toBePlaced: number;
  clashes: number;
  unpaid: { people: number; amountMinor: number; currency: string };
  undecidedApplications: number;
  oddities: number;
  failedMessages: number;
  speakersWithoutStay: readonly string[];
  /** Applications handed in and without an award, questions of funders, approved awards without a letter. */
  grants: { undecided: number; queried: number; toTell: number };
}

type Draft = Omit<Duty, 'soon'>;

/** What needs attention, by date; what is late or due within a week first. */
export function dutiesOf(facts: DutyFacts): Duty[] {
  const by = (kind: DeadlineKind): string | null =>
    facts.deadlines.find((deadline) => deadline.kind === kind)?.date ?? null;
  const base = `/organise/${facts.slug}`;
  const drafts: (Draft | false)[] = [
    facts.oddities > 0 && {
      key: 'oddities',
      by: facts.today,
      title: `${count(facts.oddities, 'payment')} to be settled`,
      detail: 'Paid twice, another amount, or paid after the place was gone',
      action: 'See the payments',
      href: `${base}/registrations`,
    },
    facts.failedMessages > 0 && {
      key: 'messages',
      by: facts.today,
      title: `${count(facts.failedMessages, 'letter')} could not be sent`,
      detail: 'The mail server refused them; its words stand beside each',
      action: 'Open messages',
      href: `${base}/messages?state=failed`,
    },
    facts.state === 'draft' && {
      key: 'announce',
      by: null,
      title:
        facts.missingSteps.length > 0
          ? 'The event is not ready to be announced'
          : 'The event can be announced',
      detail: facts.missingSteps.join(' ') || 'Everything that the public page needs is there',
      action: 'Open settings',
      href: `${base}/settings`,
    },
    facts.unanswered.length > 0 && {
      key: 'invitations',
      by: by('abstracts_due'),
      title: `${count(facts.unanswered.length, 'invited speaker')} ${facts.unanswered.length === 1 ? 'has' : 'have'} not answered`,
      detail: names(facts.unanswered),
      action: 'See who',
      href: `${base}/talks?missing=answer`,
    },
    facts.submitted > 0 && {
      key: 'submissions',
      by: by('programme_final'),
      title: `${count(facts.submitted, 'submitted talk')} to decide`,
      detail: 'The call for abstracts',
      action: 'Decide',
      href: `${base}/talks?state=submitted`,
    },
    facts.missingAbstracts.length > 0 && {
      key: 'abstracts',
      by: by('programme_final') ?? by('abstracts_due'),
      title: `${count(facts.missingAbstracts.length, 'abstract')} ${facts.missingAbstracts.length === 1 ? 'is' : 'are'} missing`,
      detail: names(facts.missingAbstracts),
      action: 'See who',
      href: `${base}/talks?missing=abstract`,
    },
    facts.clashes + facts.toBePlaced > 0 && {
      key: 'programme',
      by: by('programme_final') ?? facts.startsOn,
      title: programmeTitle(facts),
      detail: 'In the draft of the programme',
      action: 'Open programme',
      href: `${base}/programme`,
    },
    facts.undecidedApplications > 0 && {
      key: 'applications',
      by: by('registration_closes'),
      title: `${count(facts.undecidedApplications, 'application')} to decide`,
      detail: 'Received, not yet offered, waiting or declined',
      action: 'Decide',
      href: `${base}/registrations?view=applications&state=received`,
    },
    facts.unpaid.people > 0 && {
      key: 'unpaid',
      by: by('registration_closes'),
      title: `${count(facts.unpaid.people, 'person', 'people')} ${facts.unpaid.people === 1 ? 'has' : 'have'} a place and not paid`,
      detail: `${formatMoney(facts.unpaid.amountMinor, facts.unpaid.currency)} together`,
      action: 'See who',
      href: `${base}/registrations?state=reserved`,
    },
    facts.speakersWithoutStay.length > 0 && {
      key: 'stays',
      by: by('programme_final'),
      title: `${count(facts.speakersWithoutStay.length, 'speaker')} ${facts.speakersWithoutStay.length === 1 ? 'has' : 'have'} not said when they arrive`,
      detail: names(facts.speakersWithoutStay),
      action: 'Open talks',
      href: `${base}/talks`,
    },
    facts.grants.queried > 0 && {
      key: 'queries',
      by: by('grants_decided'),
      title: `${count(facts.grants.queried, 'question')} of a funder to answer`,
      detail: 'The awards wait until they are answered',
      action: 'Open grants',
      href: `${base}/grants`,
    },
    facts.grants.undecided > 0 && {
      key: 'grants',
      by: by('grants_decided'),
      title: `${count(facts.grants.undecided, 'grant application')} without an award`,
      detail: 'Propose an award, or let the letters say that there is none',
      action: 'Open grants',
      href: `${base}/grants`,
    },
    facts.grants.toTell > 0 && {
      key: 'awards',
      by: by('grants_decided'),
      title: `${count(facts.grants.toTell, 'approved award')} not yet told`,
      detail: 'The decision letters can go out',
      action: 'Open grants',
      href: `${base}/grants`,
    },
  ];
  const limit = addDays(facts.today, 7);
  return drafts
    .filter((draft) => draft !== false)
    .map((draft) => ({ ...draft, soon: draft.by !== null && draft.by <= limit }))
    .sort((a, b) => (a.by ?? '9999').localeCompare(b.by ?? '9999'));
}

function programmeTitle({ clashes, toBePlaced }: DutyFacts): string {
  const parts = [
    clashes > 0 && count(clashes, 'clash', 'clashes'),
    toBePlaced > 0 && `${count(toBePlaced, 'talk')} not placed`,
  ];
  return `${parts.filter(Boolean).join(', ')}`.replace(/^\w/, (c) => c.toUpperCase());
}

/** The first four names, then how many more. */
export function names(list: readonly string[]): string {
  return list.length <= 4 ? list.join(', ') : `${list.slice(0, 4).join(', ')} and ${list.length - 4} more`;
}

/** Payments added up day by day: what had come in by the end of each. */
export function incomeByDay(
  steps: readonly { on: string; amountMinor: number }[],
): { on: string; totalMinor: number }[] {
  const days: { on: string; totalMinor: number }[] = [];
  let total = 0;
  for (const step of [...steps].sort((a, b) => a.on.localeCompare(b.on))) {
    total += step.amountMinor;
    const last = days[days.length - 1];
    if (last?.on === step.on) last.totalMinor = total;
    else days.push({ on: step.on, totalMinor: total });
  }
  return days;
}
