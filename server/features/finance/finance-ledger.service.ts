import { QueryTypes } from 'sequelize';
import type { JournalLine } from '@shared/features/finance/finance.rules';
import { sequelize } from '@server/db/connection';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import { JournalEntryRow, JournalLineRow } from './finance.model';

/**
 * Posts one balanced entry with its voucher, in the ambient transaction. The same voucher is posted once. The database
 * itself refuses an entry that is not balanced, and any later change.
 */
export function postJournalEntry(entry: {
  voucher: string;
  memo: string;
  currency: string;
  lines: JournalLine[];
  at: Date;
}): Promise<void> {
  return transaction(async () => {
    if (
      entry.lines.length === 0 ||
      (await JournalEntryRow.findOne({ where: { voucher: entry.voucher }, attributes: ['id'] }))
    )
      return;
    const { lines, ...fields } = entry;
    const row = await JournalEntryRow.create({ id: newId(), ...fields, posted: 0 });
    for (const line of lines) await JournalLineRow.create({ id: newId(), entryId: row.id, ...line });
    await row.update({ posted: 1 });
  });
}

/** Sum of debits and credits per account and currency, posted entries only. */
export function trialBalance(): Promise<
  { account: string; debitMinor: number; creditMinor: number; currency: string }[]
> {
  return sequelize.query(
    `SELECT l.account, e.currency, sum(l.debit_minor) AS debitMinor, sum(l.credit_minor) AS creditMinor
     FROM journal_lines l JOIN journal_entries e ON e.id = l.entry_id WHERE e.posted = 1 GROUP BY l.account, e.currency ORDER BY l.account`,
    { type: QueryTypes.SELECT },
  );
}
