import type {
  BlockInput,
  BlockKind,
  DeadlineInput,
  DeadlineKind,
  EventKind,
  EventState,
} from './events.contract';
import { datesBetween, formatDate, formatTime, minuteOf } from '../../lib/time';

export const eventKindNames: Record<EventKind, string> = {
  conference: 'Conference',
  workshop: 'Workshop',
  summer_school: 'Summer school',
  thematic_programme: 'Thematic programme',
};

export const eventStateNames: Record<EventState, string> = {
  draft: 'Draft',
  announced: 'Announced',
  open: 'Open',
  running: 'Running',
  finished: 'Finished',
  archived: 'Archived',
};

export const blockKindNames: Record<BlockKind, string> = {
  session: 'Session',
  coffee: 'Coffee',
  lunch: 'Lunch',
  social: 'Social',
};

export const deadlineNames: Record<DeadlineKind, string> = {
  registration_opens: 'Registration opens',
  applications_due: 'Applications due',
  abstracts_due: 'Abstracts due',
  grants_due: 'Grant applications close',
  grants_decided: 'Awards decided',
  programme_final: 'Programme final',
  registration_closes: 'Registration closes',
  slides_due: 'Slides due',
  claims_due: 'Claims close',
};

/** The order in which deadlines are expected to fall (common practice); used for the form and for warnings. */
export const deadlineOrder: readonly DeadlineKind[] = [
  'registration_opens',
  'applications_due',
  'abstracts_due',
  'grants_due',
  'grants_decided',
  'programme_final',
  'registration_closes',
  'slides_due',
  'claims_due',
];

const NEXT: Record<EventState, readonly EventState[]> = {
  draft: ['announced'],
  announced: ['open', 'draft'],
  open: ['running', 'announced'],
  running: ['finished'],
  finished: ['archived', 'running'],
  archived: ['finished'],
};

export interface EventFacts {
  state: EventState;
  startsOn: string;
  endsOn: string;
  lead: string;
  rooms: number;
  sessionBlocks: number;
  feeCategories: number;
  admitsMinors: boolean;
  safeguarding: string;
}

/** States that may follow, each with sentences about what is still missing (empty: it may be done now). `today` is the local date. */
export function nextStates(event: EventFacts, today: string): { to: EventState; missing: string[] }[] {
  return NEXT[event.state].map((to) => ({ to, missing: missingFor(event, to, today) }));
}

function missingFor(event: EventFacts, to: EventState, today: string): string[] {
  const missing: string[] = [];
  if (to === 'announced' && event.state === 'draft') {
    if (event.lead.trim() === '') missing.push('Write the paragraph for the public page.');
    if (event.admitsMinors && event.safeguarding.trim() === '') {
      missing.push('Name a responsible adult and the local policy: the event admits people under 18.');
    }
  }
  if (to === 'open' && event.feeCategories === 0)
    missing.push('Enter at least one fee category (it may be free).');
  if (to === 'running') {
    if (event.rooms === 0) missing.push('Enter at least one room.');
    if (event.sessionBlocks === 0) missing.push('Enter at least one session block.');
    if (event.state === 'open' && today < event.startsOn)
      missing.push(`The event begins on ${formatDate(event.startsOn)}.`);
  }
  if (to === 'finished' && event.state === 'running' && today < event.endsOn) {
    missing.push(`The event ends on ${formatDate(event.endsOn)}.`);
  }
  return missing;
}

/** People other than its team may see it. */
export const isPublic = (state: EventState): boolean => state !== 'draft';

/** Field errors of an event's particulars, keyed by field. */
export function eventErrors(input: { startsOn: string; endsOn: string }): Record<string, string> {
  if (input.endsOn < input.startsOn) return { endsOn: 'The last day is before the first.' };
  if (datesBetween(input.startsOn, input.endsOn).length > 200)
    return { endsOn: 'An event lasts at most 200 days.' };
  return {};
}

/** Field errors of day frames, keyed `blocks.<index>.<field>`: order, days outside the event, overlaps within a day. */
export function blockErrors(
  blocks: readonly BlockInput[],
  event: { startsOn: string; endsOn: string },
): Record<string, string> {
  const errors: Record<string, string> = {};
  blocks.forEach((block, index) => {
    if (block.endsAt <= block.startsAt) errors[`blocks.${index}.endsAt`] = 'The end is not after the start.';
    if (block.day < event.startsOn || block.day > event.endsOn) {
      errors[`blocks.${index}.day`] = `${formatDate(block.day)} is not a day of the event.`;
    }
    const length = minuteOf(block.endsAt) - minuteOf(block.startsAt);
    if (block.minimalMinutes !== null && block.minimalMinutes > length) {
      errors[`blocks.${index}.minimalMinutes`] = `The block itself has ${length} minutes.`;
    }
    const other = blocks.findIndex(
      (b, i) => i < index && b.day === block.day && b.startsAt < block.endsAt && block.startsAt < b.endsAt,
    );
    if (other >= 0)
      errors[`blocks.${index}.startsAt`] ??= `Overlaps with ${describeBlock(blocks[other] as BlockInput)}.`;
  });
  return errors;
}

export const describeBlock = (block: {
  kind: BlockKind;
  startsAt: string;
  endsAt: string;
  title?: string;
}): string =>
  `${block.title || blockKindNames[block.kind]} ${formatTime(block.startsAt)}–${formatTime(block.endsAt)}`;

/** The blocks of one day put on other days; what stood there before is replaced. */
export function copyDay<B extends { day: string; id?: string }>(
  blocks: readonly B[],
  from: string,
  to: readonly string[],
): B[] {
  const pattern = blocks.filter((block) => block.day === from);
  const targets = new Set(to.filter((day) => day !== from));
  const kept = blocks.filter((block) => !targets.has(block.day));
  const copies = [...targets].flatMap((day) => pattern.map((block) => ({ ...block, id: undefined, day })));
  return [...kept, ...copies];
}

/** Field errors of rooms, keyed `rooms.<index>.<field>`: names are unique. */
export function roomErrors(rooms: readonly { name: string; shortName: string }[]): Record<string, string> {
  const errors: Record<string, string> = {};
  rooms.forEach((room, index) => {
    for (const field of ['name', 'shortName'] as const) {
      const taken = rooms.findIndex((other) => other[field].toLowerCase() === room[field].toLowerCase());
      if (taken < index) errors[`rooms.${index}.${field}`] = 'Another room has this name.';
    }
  });
  return errors;
}

/** Field errors of deadlines: each kind once. */
export function deadlineErrors(deadlines: readonly DeadlineInput[]): Record<string, string> {
  const errors: Record<string, string> = {};
  deadlines.forEach((deadline, index) => {
    if (deadlines.findIndex((other) => other.kind === deadline.kind) < index) {
      errors[`deadlines.${index}.kind`] = `${deadlineNames[deadline.kind]} is there twice.`;
    }
  });
  return errors;
}
