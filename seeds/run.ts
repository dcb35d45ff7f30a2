import { AccountRow } from '@server/features/accounts/accounts.model';
import { closeDatabase } from '@server/db/connection';
import { migrate } from '@server/db/migrate';
import '@server/db/models';
import { reactions } from '@server/jobs/registry';
import { runDueJobs } from '@server/jobs/worker';
import { introduceScopes } from '@server/routes';
import { seedAccounts } from './10-accounts';
import { demoDates, seedEvents } from './20-events';
import { seedMoreEvents } from './25-more-events';
import { seedConferenceTalks, seedSchoolTalks, seedWorkshopTalks } from './30-talks';
import { seedProgramme } from './40-programme';
import { seedRegistrations } from './50-registration';
import { seedGrants } from './60-grants';

/**
 * Fills an empty database with the invented demo scenario, all through the services, dates relative to now. Does
 * nothing when there are accounts. `scale` 10 makes ten times as many people, talks and registrations, for measuring.
 */
export async function seedDemo({
  scale = 1,
  now = new Date(),
}: { scale?: number; now?: Date } = {}): Promise<boolean> {
  if ((await AccountRow.count()) > 0) return false;
  introduceScopes();
  const cast = await seedAccounts(scale);
  const events = await seedEvents(cast, demoDates(now), scale);
  await seedMoreEvents(cast, demoDates(now), now);
  await seedSchoolTalks(cast, events.school);
  await seedConferenceTalks(cast, events.conference, scale);
  await seedWorkshopTalks(cast, events.workshop);
  const runJobs = async (): Promise<void> => void (await runDueJobs(reactions));
  await seedRegistrations(cast, events, now, scale, runJobs);
  await seedGrants(cast, events.school, now, scale);
  await seedProgramme(events.school, events.conference, events.workshop, now);
  await runJobs();
  return true;
}

/** `npm run seed -- --scale 10` */
async function main(): Promise<void> {
  const at = process.argv.indexOf('--scale');
  const scale = at > 0 ? Number(process.argv[at + 1]) : 1;
  if (!Number.isInteger(scale) || scale < 1 || scale > 50)
    throw new Error('--scale takes a whole number from 1 to 50');
  const started = Date.now();
  await migrate();
  const filled = await seedDemo({ scale });
  console.log(
    filled
      ? `Filled at scale ${scale} in ${((Date.now() - started) / 1000).toFixed(1)} s.`
      : 'The database is not empty; nothing was changed.',
  );
  await closeDatabase();
}

if (process.argv[1]?.endsWith('seeds/run.ts')) {
  main().catch((error: unknown) => {
    console.error(error);
    process.exit(1);
  });
}
