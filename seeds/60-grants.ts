import type { EventDetail } from '@shared/features/events/events.contract';
import type { AwardLine, FundInput, GrantInput } from '@shared/features/grants/grants.contract';
import { Problem } from '@shared/http/problem';
import { addDays } from '@shared/lib/time';
import type { Actor } from '@server/http/authorize';
import {
  ensureAccountForEmail,
  grantRole,
  systemActor,
  type PersonView,
} from '@server/features/accounts/accounts.service';
import {
  applyForGrant,
  basisOf,
  readMyGrant,
  saveMyGrant,
  withdrawMyGrant,
} from '@server/features/grants/grants-applications.service';
import { proposeAward } from '@server/features/grants/grants-awards.service';
import { answerAward, sendDecisions } from '@server/features/grants/grants-decisions.service';
import { readBoard } from '@server/features/grants/grants-board.service';
import { decideAward, readFund } from '@server/features/grants/grants-funder.service';
import { createFund } from '@server/features/grants/grants-funds.service';
import { scoreApplication } from '@server/features/grants/grants-scores.service';
import { as, type Cast } from './10-accounts';

const DAY = 86_400_000;
const anybody = {
  stages: [],
  countries: [],
  notCountries: [],
  flagsAny: [],
  minScore: null,
} satisfies FundInput['eligibility'];

/** Three invented funds, no two with the same rules. */
const funds: FundInput[] = [
  {
    name: 'Ness Bequest',
    funder: 'The trustees of the Ness Bequest',
    budgetMinor: 1_150_000,
    currency: 'EUR',
    covers: ['travel', 'accommodation', 'subsistence'],
    eligibility: { ...anybody, stages: ['student', 'doctoral', 'postdoc'] },
    capPerPersonMinor: 110_000,
    floors: [],
    showScores: true,
  },
  {
    name: 'Varde Fund',
    funder: 'Varde Lighthouse Society',
    budgetMinor: 420_000,
    currency: 'EUR',
    covers: ['travel', 'fee'],
    eligibility: { ...anybody, stages: ['student', 'doctoral'], flagsAny: ['first_meeting', 'gives_talk'] },
    capPerPersonMinor: 60_000,
    floors: [{ group: 'first_meeting', percent: 50, of: 'awarded' }],
    showScores: false,
  },
  {
    name: 'Long Road Fund',
    funder: 'Friends of the Tarnholt Institute',
    budgetMinor: 680_000,
    currency: 'EUR',
    covers: ['travel', 'accommodation', 'subsistence', 'fee'],
    eligibility: { ...anybody, notCountries: ['DK', 'NO', 'SE', 'DE', 'FR'], minScore: 5 },
    capPerPersonMinor: null,
    floors: [{ group: 'no_other_money', percent: 40, of: 'budget' }],
    showScores: true,
  },
];

const reasons = [
  'My thesis is about inflation tilings whose hull has torsion in degree two, and nobody in my town works on it. Courses A and B cover what I could not learn from books.',
  'I count lattice points in non-rational polytopes. Lecture C 4 and the exercises of the second week bear directly on the chapter that I am writing now.',
  'I teach in a department of three. Two weeks with people who work on packings would carry me through the year; my university pays for no journeys abroad.',
  'I have computed quandle colourings for all prime knots with twelve crossings and would like to compare with the tables of the lecturers of course B.',
];

function wish(n: number): GrantInput {
  const items: GrantInput['items'] = [
    {
      kind: 'travel',
      amountMinor: 18_000 + ((n * 7_300) % 61_000),
      quantity: null,
      note: n % 2 ? 'Train both ways' : 'Flight, then the train from the main line',
    },
  ];
  if (n % 3 !== 1)
    items.push({
      kind: 'accommodation',
      amountMinor: 41_800,
      quantity: 11,
      note: 'Shared room at Lindgard House',
    });
  if (n % 4 === 0) items.push({ kind: 'subsistence', amountMinor: 16_500, quantity: 11, note: '' });
  if (n % 5 === 2) items.push({ kind: 'fee', amountMinor: 15_000, quantity: null, note: 'Early fee' });
  return {
    motivation: reasons[n % reasons.length] as string,
    items,
    minUsefulMinor: n % 6 === 3 ? (items[0]?.amountMinor ?? 0) : 0,
    firstMeeting: n % 3 === 0,
    noOtherMoney: n % 4 < 2,
    talkId: null,
  };
}

/** The committee and the funders act as themselves: who decided what stays true in the audit trail. */
interface Desk {
  event: EventDetail;
  organiser: Actor;
  reviewer: Actor;
  /** One per fund, in the order of the funds. */
  funders: Actor[];
  fundIds: string[];
}
interface Wave {
  people: PersonView[];
  at: Date;
}

async function handIn({ event }: Desk, { people, at }: Wave, offset: number): Promise<void> {
  for (const [n, person] of people.entries())
    await applyForGrant(as(person), event.slug, wish(n + offset), at);
}

/** Both score everybody, except where they must not or declare a conflict of interest. */
async function score({ event, organiser, reviewer }: Desk, now: Date): Promise<void> {
  for (const by of [reviewer, organiser]) {
    const { rows } = await readBoard(by, event.id, now);
    for (const [n, row] of rows
      .filter(
        (candidate) =>
          candidate.conflict === null && candidate.myScore === null && candidate.decision === null,
      )
      .entries()) {
      if (by === organiser && n % 4 === 3) continue;
      const conflict = by === reviewer && n === 5;
      const given = {
        score: conflict ? null : 4 + ((n * 5 + row.requested.length) % 7),
        comment: n % 3 === 0 ? 'Clear plan; the letter fits the courses.' : '',
        conflict,
      };
      await scoreApplication(by, event.id, row.id, given);
    }
  }
}

function linesFor(requested: AwardLine[], fund: FundInput): AwardLine[] {
  let left = fund.capPerPersonMinor ?? Number.MAX_SAFE_INTEGER;
  return requested.flatMap((line) => {
    const amountMinor = fund.covers.includes(line.kind) ? Math.min(line.amountMinor, left) : 0;
    left -= amountMinor;
    return amountMinor > 0 ? [{ kind: line.kind, amountMinor }] : [];
  });
}

/** Proposes for the best of those without an award, from the first fund that may pay; `most` at the most. */
async function propose({ event, organiser, fundIds }: Desk, most: number, now: Date): Promise<void> {
  let made = 0;
  const { rows } = await readBoard(organiser, event.id, now);
  for (const [n, row] of rows
    .filter((candidate) => candidate.awards.length === 0 && candidate.decision === null && candidate.person)
    .entries()) {
    for (let turn = 0; turn < funds.length && made < most; turn++) {
      const which = (n + turn) % funds.length;
      const lines = linesFor(row.requested, funds[which] as FundInput);
      const taken =
        lines.length > 0 &&
        (await tryAward(organiser, event.id, row.id, fundIds[which] as string, lines, now));
      if (!taken) continue;
      made += 1;
      break;
    }
  }
}

async function tryAward(
  by: Actor,
  eventId: string,
  applicationId: string,
  fundId: string,
  lines: AwardLine[],
  now: Date,
): Promise<boolean> {
  try {
    await proposeAward(by, eventId, applicationId, fundId, { lines, version: null }, now);
    return true;
  } catch (error) {
    if (error instanceof Problem && error.code === 'grants.refused') return false;
    throw error;
  }
}

/** Each funder decides on what is proposed; with `some`, one is queried and the last ones are left. */
async function decide({ funders, fundIds }: Desk, some: boolean, now: Date): Promise<void> {
  for (const [index, fundId] of fundIds.entries()) {
    const open = (await readFund(fundId)).awards.filter((award) => award.state === 'proposed');
    for (const [n, award] of open.entries()) {
      if (some && n >= 3) break;
      const queried = some && n === 1;
      await decideAward(
        funders[index] as Actor,
        fundId,
        award.id,
        award.version,
        {
          decision: queried ? 'queried' : 'approved',
          question: queried ? 'Is there a cheaper journey by train and ship?' : '',
        },
        now,
      );
    }
  }
}

async function answer({ event }: Desk, people: PersonView[], now: Date): Promise<void> {
  let offers = 0;
  for (const person of people) {
    const mine = await readMyGrant(as(person), event.slug, now);
    if (mine.decision?.outcome !== 'offered') continue;
    offers += 1;
    if (offers % 4 === 0) continue; // has not answered yet
    await answerAward(as(person), event.slug, mine.version, offers === 3 ? 'returned' : 'accepted', now);
  }
}

async function openDesk(cast: Cast, event: EventDetail): Promise<Desk> {
  const person = (email: string, givenName: string, familyName: string, affiliation: string) =>
    ensureAccountForEmail({
      email,
      givenName,
      familyName,
      affiliation,
      country: 'DK',
      careerStage: 'other',
      timeZone: 'Europe/Copenhagen',
    });
  const holders = [
    cast.by.funder,
    await person('varde@example.org', 'Þórdís', 'Egilsdóttir-Vik', 'Varde Lighthouse Society'),
    await person('longroad@example.org', 'Casimir', 'Ołtarzewski-Holm', 'Friends of the Tarnholt Institute'),
  ];
  const fundIds: string[] = [];
  for (const [index, input] of funds.entries()) {
    const fund = await createFund(systemActor, event.slug, input);
    fundIds.push(fund.id);
    await grantRole({
      accountId: (holders[index] as PersonView).id,
      role: 'funder',
      scope: 'fund',
      scopeId: fund.id,
      by: systemActor,
    });
  }
  const holding = (who: PersonView, role: 'organiser' | 'reviewer'): Actor => ({
    ...as(who),
    grants: [{ role, scope: 'event', scopeId: event.id }],
  });
  const funders = holders.map((who, index): Actor => ({
    ...as(who),
    grants: [{ role: 'funder', scope: 'fund', scopeId: fundIds[index] as string }],
  }));
  return {
    event,
    organiser: holding(cast.by.organiser, 'organiser'),
    reviewer: holding(cast.by.reviewer, 'reviewer'),
    funders,
    fundIds,
  };
}

/** Funds of the school, a first round that is decided and answered, a second one that the committee and the funders have in hand. */
export async function seedGrants(cast: Cast, event: EventDetail, now: Date, scale: number): Promise<void> {
  const desk = await openDesk(cast, event);
  const withBasis: PersonView[] = [];
  for (const person of [cast.by.participant, ...cast.crowd.slice(50, 50 + 60 * scale)]) {
    if (await basisOf(event.id, person.id)) withBasis.push(person);
  }
  const ago = (days: number): Date => new Date(now.getTime() - days * DAY);
  const [first, second] = [withBasis.slice(0, 14), withBasis.slice(14, 14 + 22 * scale)];
  await handIn(desk, { people: first, at: ago(30) }, 0);
  await score(desk, ago(20));
  await propose(desk, 10, ago(18));
  await decide(desk, false, ago(12));
  await sendDecisions(desk.organiser, event.slug, addDays(event.startsOn, -55), now);
  await answer(desk, first, now);
  await handIn(desk, { people: second, at: ago(16) }, 14);
  const [draft, leaver] = [withBasis[14 + 22 * scale], second[0]];
  if (draft) await saveMyGrant(as(draft), event.slug, 0, wish(3), ago(12));
  await score(desk, ago(5));
  if (leaver)
    await withdrawMyGrant(
      as(leaver),
      event.slug,
      (await readMyGrant(as(leaver), event.slug, now)).version,
      now,
    );
  await propose(desk, 12, ago(3));
  await decide(desk, true, ago(1));
}
