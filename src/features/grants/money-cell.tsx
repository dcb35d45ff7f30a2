import { amountOf, formatGrant } from '@shared/features/grants/grants.rules';
import type { AwardLine, CostKind } from '@shared/features/grants/grants.contract';

/** A sum in whole units; a dash means that nothing was asked for. */
export function MoneyCell({
  lines,
  kind,
  currency,
}: {
  lines: readonly AwardLine[];
  kind: CostKind;
  currency: string;
}) {
  const amount = amountOf(lines, kind);
  return amount > 0 ? formatGrant(amount, currency, false) : <span aria-label="nothing">–</span>;
}

/** What is given, of what there is. Ink on wash; zero and the whole are always visible. */
export function FundBar({
  givenMinor,
  budgetMinor,
  label,
}: {
  givenMinor: number;
  budgetMinor: number;
  label: string;
}) {
  const share = budgetMinor > 0 ? Math.min(100, (100 * givenMinor) / budgetMinor) : 0;
  return (
    <div role="img" aria-label={label} className="h-2.5 border border-ink2 bg-sheet">
      <div className="h-full bg-ink2" style={{ width: `${share}%` }} />
    </div>
  );
}
