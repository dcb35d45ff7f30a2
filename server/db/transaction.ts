import { Transaction } from 'sequelize';
import { ambientTransaction, openDatabase, outsideTransaction, sequelize } from './connection';

let last: Promise<unknown> = Promise.resolve();

/** Work to be done after the ambient transaction has been committed, outside of it. */
export function afterCommit(work: () => void): void {
  const ambient = ambientTransaction();
  if (!ambient) throw new Error('afterCommit outside a transaction');
  ambient.afterCommit(() => outsideTransaction(work));
}

/**
 * Runs `work` in one IMMEDIATE transaction. Writers queue up in this process (SQLite has one writer; waiting here is
 * cheap, waiting inside SQLite occupies a thread). Inside another transaction it joins that one. Every model call
 * within finds the transaction by itself. Do nothing slow inside: no network, no mail, no solver.
 * @throws whatever `work` throws, after rolling back.
 */
export function transaction<T>(work: () => Promise<T>): Promise<T> {
  if (ambientTransaction()) return work();
  const run = last.then(async () => {
    await openDatabase();
    return sequelize.transaction({ type: Transaction.TYPES.IMMEDIATE }, work);
  });
  last = run.catch(() => undefined);
  return run;
}

/** Resolves when the writers that queue now are done (for a polite stop). */
export async function writersDone(): Promise<void> {
  await last;
}
