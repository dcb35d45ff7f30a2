import { copyFileSync, rmSync } from 'node:fs';
import { inject } from 'vitest';
import { closeDatabase } from '../../server/db/connection';
import { writersDone } from '../../server/db/transaction';
import { env } from '../../server/env';

/** Puts a fresh copy of the migrated template in the place of this file's database. */
export async function freshDatabase(): Promise<void> {
  await writersDone();
  await closeDatabase();
  for (const tail of ['-wal', '-shm']) rmSync(env.DATABASE_FILE + tail, { force: true });
  copyFileSync(inject('templateDatabase'), env.DATABASE_FILE);
}
