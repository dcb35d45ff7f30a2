import { AsyncLocalStorage } from 'node:async_hooks';
import { Sequelize, type QueryOptions, type Transaction } from 'sequelize';
import { env } from '../env';
import { closeConnections, dialectModule } from './sqlite';

/** What Sequelize asks of a continuation-local namespace, on AsyncLocalStorage: the ambient transaction. */
const storage = new AsyncLocalStorage<Map<string, unknown>>();
const namespace = {
  run: <T>(fn: (context: Map<string, unknown>) => T): T => {
    const context = new Map(storage.getStore() ?? []);
    return storage.run(context, () => fn(context));
  },
  bind: <F>(fn: F): F => fn,
  get: (key: string): unknown => storage.getStore()?.get(key),
  set: (key: string, value: unknown): void => void storage.getStore()?.set(key, value),
};
Sequelize.useCLS(namespace);

export const ambientTransaction = (): Transaction | undefined =>
  (namespace.get('transaction') as Transaction | null | undefined) ?? undefined;

/** Runs outside of any ambient transaction: for what must not join it (jobs after commit). */
export const outsideTransaction = <T>(fn: () => T): T => storage.run(new Map(), fn);

export const sequelize = new Sequelize({
  dialect: 'sqlite',
  dialectModule,
  storage: env.DATABASE_FILE,
  logging: false,
  define: { underscored: true, freezeTableName: true },
});

const pool = sequelize.connectionManager as unknown as { connections: { default?: unknown } };

const CHANGE = /^\s*(insert|update|delete|replace)\b/i;

/** No change outside a transaction: a forgotten `transaction(...)` fails at once, here, and not some day by a lost update. */
const query = sequelize.query.bind(sequelize) as (sql: unknown, options?: QueryOptions) => Promise<unknown>;
sequelize.query = ((sql: string | { query: string }, options?: QueryOptions) => {
  const text = typeof sql === 'string' ? sql : sql.query;
  if (CHANGE.test(text) && !options?.transaction && !ambientTransaction()) {
    return Promise.reject(new Error(`a change outside a transaction: ${text.slice(0, 80)}`));
  }
  return query(sql, options);
}) as typeof sequelize.query;

/** Opens the reader first, so that it never becomes the writer (see sqlite.ts). */
export async function openDatabase(): Promise<void> {
  if (!pool.connections.default) await outsideTransaction(() => sequelize.query('SELECT 1'));
}

/** Closes the connections; they open again on the next use. */
export async function closeDatabase(): Promise<void> {
  pool.connections = {};
  await closeConnections();
}
