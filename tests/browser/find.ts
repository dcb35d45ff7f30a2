import { AccountRow } from '../../server/features/accounts/accounts.model';

/** The id of a demo account. */
export async function accountByEmail(email: string): Promise<string> {
  const row = await AccountRow.findOne({ where: { email } });
  if (!row) throw new Error(`no account ${email}`);
  return row.id;
}
