import { readdir } from 'node:fs/promises';
import path from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import type { QueryInterface } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';
import { sequelize } from './connection';
import { transaction } from './transaction';

const folder = path.join(path.dirname(fileURLToPath(import.meta.url)), 'migrations');

export interface Migration {
  up(input: { context: QueryInterface }): Promise<unknown>;
  down(input: { context: QueryInterface }): Promise<unknown>;
}

/** All migrations in the order of their names, each run in its own transaction. */
export async function migrator() {
  const files = (await readdir(folder)).filter((name) => name.endsWith('.ts')).sort();
  const load = async (file: string) =>
    (await import(pathToFileURL(path.join(folder, file)).href)) as Migration;
  return new Umzug({
    context: sequelize.getQueryInterface(),
    storage: new SequelizeStorage({ sequelize, tableName: 'migrations' }),
    logger: undefined,
    migrations: files.map((file) => ({
      name: file.replace(/\.ts$/, ''),
      up: async (input: { context: QueryInterface }) => (await load(file)).up(input),
      down: async (input: { context: QueryInterface }) => (await load(file)).down(input),
    })),
  });
}

/** Brings the database to the newest shape. Returns the names of the migrations that ran. */
export async function migrate(): Promise<string[]> {
  await sequelize.query('SELECT 1');
  const umzug = await migrator();
  const ran: string[] = [];
  for (const { name } of await umzug.pending()) {
    await transaction(() => umzug.up({ migrations: [name] }));
    ran.push(name);
  }
  return ran;
}

/** Runs one statement after the other: migrations are written as SQL. */
export async function statements(context: QueryInterface, sql: string[]): Promise<void> {
  for (const statement of sql) await context.sequelize.query(statement);
}
