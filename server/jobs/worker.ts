import { Op } from 'sequelize';
import { log } from '../http/request-log';
import { newId } from '../db/id';
import { transaction } from '../db/transaction';
import { JobRow, onQueued, type Reaction } from './job';

const MAX_ATTEMPTS = 8;

/** Seconds until the next try: 2, 4, 8 ... at most ten minutes. */
const backOff = (attempts: number): number => Math.min(600, 2 ** attempts);

/** Carries out what is due, one job after the other, until nothing is. Returns how many ran. */
export async function runDueJobs(
  reactions: readonly Reaction[],
  now: () => Date = () => new Date(),
): Promise<number> {
  for (let ran = 0; ; ran++) {
    const job = await JobRow.findOne({
      where: { state: 'queued', runAt: { [Op.lte]: now() } },
      order: [
        ['runAt', 'ASC'],
        ['id', 'ASC'],
      ],
    });
    if (!job) return ran;
    await (job.name.startsWith('fact:') ? expand(job, reactions) : carryOut(job, reactions, now));
  }
}

/** A fact becomes one job per reaction, in one transaction with its own end, so that none is lost and none comes twice. */
async function expand(job: JobRow, reactions: readonly Reaction[]): Promise<void> {
  const fact = job.name.slice('fact:'.length);
  await transaction(async () => {
    for (const reaction of reactions.filter((candidate) => candidate.fact.name === fact)) {
      const name = `reaction:${fact}:${reaction.name}`;
      await JobRow.create({
        id: newId(),
        name,
        payload: job.payload,
        key: `${job.id}:${reaction.name}`,
        runAt: job.runAt,
      });
    }
    await job.update({ state: 'done' });
  });
}

async function carryOut(job: JobRow, reactions: readonly Reaction[], now: () => Date): Promise<void> {
  const reaction = reactions.find(
    (candidate) => `reaction:${candidate.fact.name}:${candidate.name}` === job.name,
  );
  try {
    if (!reaction) throw new Error(`nobody reacts: ${job.name}`);
    await reaction.react(job.payload as never, { id: job.id });
    await transaction(() => job.update({ state: 'done', attempts: job.attempts + 1 }));
  } catch (error) {
    const attempts = job.attempts + 1;
    const failed = attempts >= MAX_ATTEMPTS;
    log.error({ err: error, job: job.name, attempts }, 'job failed');
    const runAt = new Date(now().getTime() + backOff(attempts) * 1000);
    const lastError = String((error as Error).message ?? error).slice(0, 500);
    await transaction(() => job.update({ state: failed ? 'failed' : 'queued', attempts, runAt, lastError }));
  }
}

/** Looks for due work when woken and every second. `stop` waits for the job in hand. */
export function startWorker(work: () => Promise<unknown>, everyMs = 1000): { stop(): Promise<void> } {
  let stopping = false;
  let wanted = false;
  let current: Promise<void> | undefined;
  const run = (): void => {
    wanted = true;
    current ??= (async () => {
      while (wanted && !stopping) {
        wanted = false;
        await work().catch((error: unknown) => log.error({ err: error }, 'worker'));
      }
      current = undefined;
    })();
  };
  const timer = setInterval(run, everyMs);
  onQueued(run);
  run();
  return {
    stop: async () => {
      stopping = true;
      clearInterval(timer);
      await current;
    },
  };
}
