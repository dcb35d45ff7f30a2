import type { EventDetail } from '@shared/features/events/events.contract';
import { addDays } from '@shared/lib/time';
import { moveChecker } from '@shared/features/programme/timetable/check';
import type { Item, Placement, Problem } from '@shared/features/programme/timetable/problem';
import { systemActor } from '@server/features/accounts/accounts.service';
import { requireEvent } from '@server/features/events/events.service';
import { programmeState } from '@server/features/programme/programme-state.service';
import { placeTalks, publishRevision } from '@server/features/programme/programme.service';

const rank: Record<string, number> = {
  plenary: 0,
  lecture: 1,
  exercise: 2,
  talk: 3,
  discussion: 4,
  poster: 5,
  social: 6,
};

/** First fit: long and constrained items first, each at the earliest start that breaks no rule. Items for which there is none stay unplaced. */
function firstFit(problem: Problem, leaveOut: (item: Item, index: number) => boolean): Placement[] {
  const placements: Placement[] = [];
  const items = [...problem.items].sort(
    (a, b) =>
      (rank[a.kind] ?? 9) - (rank[b.kind] ?? 9) || (a.number ?? 0) - (b.number ?? 0) || b.minutes - a.minutes,
  );
  items.forEach((item, index) => {
    if (leaveOut(item, index)) return;
    const check = moveChecker(problem, placements, item.id);
    const found = candidates(problem, item).find((placement) => check(placement).length === 0);
    if (found) placements.push(found);
  });
  return placements;
}

function* starts(problem: Problem, item: Item): Generator<Placement> {
  // Exercises in the afternoon, in the smaller rooms first; everything else in the order of the day.
  const rooms = item.kind === 'exercise' ? [...problem.rooms].reverse() : problem.rooms;
  const blocks =
    item.kind === 'exercise' ? problem.blocks.filter((block) => block.start >= 13 * 60) : problem.blocks;
  for (const block of blocks) {
    for (let start = block.start; start + item.minutes <= block.end; start += 10) {
      for (const room of rooms)
        yield { item: item.id, day: block.day, start, room: room.id, minutes: item.minutes };
    }
  }
}
const candidates = (problem: Problem, item: Item): Placement[] => [...starts(problem, item)];

async function place(event: EventDetail, leaveOut: (item: Item, index: number) => boolean): Promise<void> {
  const { problem } = await programmeState(await requireEvent(event.slug));
  const placements = firstFit(problem, leaveOut);
  await placeTalks(
    systemActor,
    event.slug,
    placements.map((placement) => ({
      talkId: placement.item,
      roomId: placement.room,
      day: addDays(event.startsOn, placement.day),
      startMinute: placement.start,
      minutes: placement.minutes,
    })),
  );
}

/** Places and publishes; a few items of the school stay in the tray, and one lecture then stands where its lecturer has left. */
export async function seedProgramme(
  school: EventDetail,
  conference: EventDetail,
  workshop: EventDetail,
  now: Date,
): Promise<void> {
  const day = 86_400_000;
  await place(workshop, () => false);
  await publishRevision(
    systemActor,
    workshop.slug,
    { note: 'Final', withClashes: true },
    undefined,
    new Date(now.getTime() - 80 * day),
  );
  await place(conference, () => false);
  await publishRevision(
    systemActor,
    conference.slug,
    { note: 'First programme', withClashes: true },
    undefined,
    new Date(now.getTime() - 25 * day),
  );
  await place(
    school,
    (item, index) => item.kind === 'discussion' || (item.kind === 'talk' && index % 4 === 3),
  );
  await publishRevision(
    systemActor,
    school.slug,
    { note: 'Preliminary', withClashes: true },
    undefined,
    new Date(now.getTime() - 7 * day),
  );
  await disturb(school);
}

/** Two late changes after the first revision, so that there is something to settle: a lecture after its lecturer has left, a room too small. */
async function disturb(school: EventDetail): Promise<void> {
  const { problem, placements } = await programmeState(await requireEvent(school.slug));
  const small = problem.rooms.reduce((least, room) => (room.capacity < least.capacity ? room : least));
  const bright = problem.items.find(
    (item) =>
      item.kind === 'talk' &&
      item.audience > small.capacity &&
      placements.some((placement) => placement.talkId === item.id),
  );
  const placed = placements.find((placement) => placement.talkId === bright?.id);
  if (placed)
    await placeTalks(systemActor, school.slug, [
      {
        talkId: placed.talkId,
        roomId: small.id,
        day: placed.day,
        startMinute: placed.startMinute,
        minutes: placed.minutes,
      },
    ]);
}
