import { mkdtemp, rm } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import type { TestProject } from 'vitest/node';

declare module 'vitest' {
  export interface ProvidedContext {
    templateDatabase: string;
  }
}

/** Migrates one empty database; every test copies it. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const folder = await mkdtemp(path.join(os.tmpdir(), 'analemma-template-'));
  const file = path.join(folder, 'template.sqlite');
  process.env.NODE_ENV = 'test';
  process.env.DATABASE_FILE = file;
  process.env.BASE_URL = 'http://analemma.test'; // vitest sets its own, which is a path
  const { migrate } = await import('../../server/db/migrate');
  const { sequelize, closeDatabase } = await import('../../server/db/connection');
  await migrate();
  await sequelize.query('PRAGMA wal_checkpoint(TRUNCATE)');
  await closeDatabase();
  project.provide('templateDatabase', file);
  return () => rm(folder, { recursive: true, force: true });
}
