import sqlite3 from 'sqlite3';

/**
 * A thin wrapper of the sqlite3 module for Sequelize's `dialectModule`.
 *
 * Sequelize opens and closes a connection for every transaction. Measured on two cores, 60 concurrent IMMEDIATE
 * transactions then starve each other of libuv threads and most fail with SQLITE_BUSY. Here the first connection is
 * the reader and stays; every later one is the one writer, kept open and handed out again. `transaction.ts` queues
 * writers, so the writer is never in two hands.
 */
type Callback = (error: Error | null) => void;

const PRAGMAS = `
  PRAGMA journal_mode = WAL;
  PRAGMA synchronous = FULL;
  PRAGMA foreign_keys = ON;
  PRAGMA busy_timeout = 5000;
  PRAGMA cache_size = -32000;
`;

let reader: sqlite3.Database | undefined;
let writer: sqlite3.Database | undefined;

function open(file: string, mode: number, done: Callback): sqlite3.Database {
  const database = new sqlite3.Database(file, mode, (error) => {
    if (error) done(error);
    else database.exec(PRAGMAS, done);
  });
  return database;
}

function keepOpen(database: sqlite3.Database): sqlite3.Database {
  const close = database.close.bind(database);
  Object.assign(database, {
    close: (done?: Callback) => done?.(null),
    closeForGood: close,
  });
  return database;
}

function Database(this: unknown, file: string, mode: number, done: Callback): sqlite3.Database {
  if (!reader) return (reader = keepOpen(open(file, mode, done)));
  if (!writer) return (writer = keepOpen(open(file, mode, done)));
  process.nextTick(done, null);
  return writer;
}

export const dialectModule = { ...sqlite3, Database };

/** Closes both connections for good; the next use opens them anew. Used at the end and between tests. */
export async function closeConnections(): Promise<void> {
  const open = [writer, reader].filter((database) => database !== undefined);
  reader = undefined;
  writer = undefined;
  for (const database of open) {
    const { closeForGood } = database as unknown as { closeForGood(done: Callback): void };
    await new Promise<void>((resolve, reject) =>
      closeForGood((error) => (error ? reject(error) : resolve())),
    );
  }
}
