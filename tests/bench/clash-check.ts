import { checkAll, moveChecker } from '../../shared/features/programme/timetable/check';
import { remediesFor } from '../../shared/features/programme/timetable/remedies';
import type { Item, Person, Placement, Problem } from '../../shared/features/programme/timetable/problem';

/**
 * The cost of judging one mouse move of a drag with 500 talks placed, in ms and as a share of a 16 ms frame.
 * Run: npx tsx tests/bench/clash-check.ts
 */

const TALKS = 500;
const DAYS = 12;
const ROOMS = 6;
const FRAME_MS = 16;

function bigProblem(): { problem: Problem; placements: Placement[] } {
  const persons: Person[] = Array.from({ length: 220 }, (_, i) => ({
    id: `p${i}`,
    name: `Person ${i}`,
    shortName: `P${i}`,
    arrival: { day: i % 3, minute: 600 },
    departure: { day: DAYS - 1 - (i % 2), minute: 1080 },
    blocked: [{ day: i % DAYS, start: 840, end: 900 }],
    dislikes: [],
  }));
  const items: Item[] = Array.from({ length: TALKS }, (_, i) => ({
    id: `i${i}`,
    label: `talk ${i}`,
    kind: i < 120 ? 'lecture' : i < 200 ? 'exercise' : i < 210 ? 'plenary' : 'talk',
    minutes: i < 120 ? 50 : 40,
    persons: [`p${i % 220}`, `p${(i * 7) % 220}`],
    audience: 20 + (i % 90),
    features: i % 5 === 0 ? ['projector'] : [],
    course: i < 120 ? `c${i % 10}` : null,
    number: i < 120 ? Math.floor(i / 10) + 1 : null,
    exerciseOf: i >= 120 && i < 200 ? `i${i - 120}` : null,
    pinned: null,
  }));
  const slots = Array.from({ length: 9 }, (_, i) => (i < 4 ? 540 + i * 55 : 840 + (i - 4) * 50));
  const placements = items.map((item, i) => ({
    item: item.id,
    day: Math.floor(i / (ROOMS * slots.length)) % DAYS,
    start: slots[Math.floor(i / ROOMS) % slots.length] as number,
    room: `r${i % ROOMS}`,
    minutes: item.minutes,
  }));
  const problem: Problem = {
    name: 'bench',
    startsOn: '2026-07-06',
    days: DAYS,
    gridMinutes: 5,
    blocks: Array.from({ length: DAYS }, (_, day) => [
      { id: `${day}a`, day, start: 540, end: 760, kind: 'session' as const },
      { id: `${day}b`, day, start: 840, end: 1090, kind: 'session' as const },
    ]).flat(),
    rooms: Array.from({ length: ROOMS }, (_, i) => ({
      id: `r${i}`,
      name: `Room ${i}`,
      shortName: `R${i}`,
      capacity: 60 + i * 30,
      features: i % 2 === 0 ? ['projector'] : [],
      closed: [],
    })),
    persons,
    items,
    courses: Array.from({ length: 10 }, (_, i) => ({
      id: `c${i}`,
      label: `Course ${i}`,
      minNights: 1,
      maxPerDay: 1,
    })),
    prerequisites: Array.from({ length: 40 }, (_, i) => ({ before: `i${i}`, after: `i${i + 300}` })),
  };
  return { problem, placements };
}

/** Median of the times of many runs, in ms. */
function median(runs: number, work: (i: number) => unknown): number {
  const times = Array.from({ length: runs }, (_, i) => {
    const start = performance.now();
    work(i);
    return performance.now() - start;
  });
  return times.sort((a, b) => a - b)[Math.floor(runs / 2)] as number;
}

const { problem, placements } = bigProblem();
const dragged = 'i77';
const clashesAt = moveChecker(problem, placements, dragged);
const target = (i: number): Placement => ({
  item: dragged,
  day: i % DAYS,
  start: 540 + ((i * 35) % 500),
  room: `r${i % ROOMS}`,
  minutes: 50,
});
const clashes = checkAll(problem, placements);

const perMove = median(2000, (i) => clashesAt(target(i)));
const dragStart = median(300, () => moveChecker(problem, placements, dragged));
const whole = median(100, () => checkAll(problem, placements));
const remedies = median(20, (i) =>
  remediesFor(problem, placements, clashes[i % clashes.length] as (typeof clashes)[number]),
);

const line = (what: string, ms: number): void =>
  console.log(
    `${what.padEnd(58)} ${ms.toFixed(3).padStart(9)} ms  ${((ms / FRAME_MS) * 100).toFixed(1).padStart(6)} % of a 16 ms frame`,
  );
console.log(
  `clash check, ${placements.length} talks placed, ${ROOMS} rooms, ${DAYS} days, ${clashes.length} clashes in the timetable`,
);
line('one mouse move of a drag (moveChecker)', perMove);
line('beginning of a drag (lay out the others)', dragStart);
line('whole timetable (checkAll)', whole);
line('remedies of one clash, verified (remediesFor)', remedies);
