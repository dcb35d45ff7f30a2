import { useState } from 'react';
import type { AwardLine, Fund } from '@shared/features/grants/grants.contract';
import type { BoardAward, GrantDetail } from '@shared/features/grants/grants-committee.contract';
import {
  amountOf,
  awardStateNames,
  costKindNames,
  formatGrant,
  refuseProposal,
  type FundRules,
} from '@shared/features/grants/grants.rules';
import { parseMinor } from '@shared/lib/money';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { toast } from '@/components/toast';
import { sentenceOf } from '@/lib/problem';
import { useProposeAward } from './grants.queries';

interface Props {
  event: string;
  detail: GrantDetail;
  fund: Fund;
  award: BoardAward | undefined;
}

/** What one fund pays for this person, by cost kind. The same rule as on the server answers while typing. */
export function AwardForm({ event, detail, fund, award }: Props) {
  const propose = useProposeAward(event, detail.row.id);
  const kinds = fund.covers.filter((kind) => amountOf(detail.row.requested, kind) > 0);
  const plain = (amount: number) =>
    amount > 0 ? formatGrant(amount, fund.currency, false).replace(/,/g, '') : '';
  const [typed, setTyped] = useState(() =>
    Object.fromEntries(kinds.map((kind) => [kind, plain(award ? amountOf(award.lines, kind) : 0)])),
  );
  const changeable = !award || ['proposed', 'queried'].includes(award.state);
  const parsed = kinds.map((kind) => ({
    kind,
    amount: typed[kind]?.trim() ? parseMinor(typed[kind], fund.currency) : 0,
  }));
  const unread = parsed.find((line) => line.amount === undefined || line.amount < 0);
  const lines = parsed.flatMap((line): AwardLine[] =>
    line.amount ? [{ kind: line.kind, amountMinor: line.amount }] : [],
  );
  const refusal = unread
    ? `${costKindNames[unread.kind]}: write a sum like 980 or 980.50.`
    : lines.length > 0
      ? reasonAgainst({ detail, fund, award }, lines)
      : undefined;
  const send = (next: AwardLine[], done: string) =>
    propose.mutate(
      { fund: fund.id, lines: next, version: award?.version ?? null },
      { onSuccess: () => toast(done) },
    );
  return (
    <form
      onSubmit={(submit) => {
        submit.preventDefault();
        if (!refusal && lines.length > 0) send(lines, `Proposed from fund ${fund.letter}.`);
      }}
    >
      <p className="flex justify-between gap-2">
        <span>
          <b>{fund.letter}</b> <span className="font-serif">{fund.name}</span>{' '}
          <span className="text-ink3">{formatGrant(fund.leftMinor, fund.currency, false)} left</span>
        </span>
        {award && (
          <b>
            {awardStateNames[award.state]}, {formatGrant(award.totalMinor, fund.currency)}
          </b>
        )}
      </p>
      {kinds.length === 0 && <p className="text-dense text-ink3">Pays none of the costs asked for.</p>}
      {changeable && kinds.length > 0 && (
        <>
          <div className="my-1.5 grid grid-cols-2 gap-2">
            {kinds.map((kind) => (
              <Input
                key={kind}
                dense
                inputMode="decimal"
                label={`${costKindNames[kind]}, ${fund.currency}`}
                hint={`asked: ${formatGrant(amountOf(detail.row.requested, kind), fund.currency, false)}`}
                value={typed[kind] ?? ''}
                onChange={(change) => setTyped({ ...typed, [kind]: change.target.value })}
              />
            ))}
          </div>
          {(refusal ?? (propose.error && sentenceOf(propose.error))) && (
            <p role="alert" className="mb-1.5 text-dense font-semibold text-alarm">
              {refusal ?? sentenceOf(propose.error)}
            </p>
          )}
          <div className="flex flex-wrap gap-2">
            <Button type="submit" busy={propose.isPending} disabled={Boolean(refusal) || lines.length === 0}>
              {award ? 'Change the award' : `Propose from fund ${fund.letter}`}
            </Button>
            {!award && (
              <Button
                variant="link"
                onClick={() =>
                  setTyped(
                    Object.fromEntries(
                      kinds.map((kind) => [kind, plain(amountOf(detail.row.requested, kind))]),
                    ),
                  )
                }
              >
                Fill in the request
              </Button>
            )}
            {award && (
              <Button
                variant="link"
                onClick={() => send([], `The award from fund ${fund.letter} is taken back.`)}
              >
                Take it back
              </Button>
            )}
          </div>
        </>
      )}
      {award?.state === 'approved' && (
        <p className="text-dense text-ink3">
          Approved by the funder. It can be changed when the funder undoes that.
        </p>
      )}
    </form>
  );
}

function reasonAgainst(
  { detail, fund, award }: Omit<Props, 'event'>,
  lines: AwardLine[],
): string | undefined {
  const { row } = detail;
  const others = new Map(
    row.awards
      .filter((other) => other.id !== award?.id)
      .flatMap((other) => other.lines.map((line) => [line.kind, 'Another fund'] as const)),
  );
  // Without sight of the mean, a minimum score can't be judged here; the server does.
  const rules: FundRules = {
    ...fund,
    eligibility: { ...fund.eligibility, minScore: row.score === null ? null : fund.eligibility.minScore },
  };
  const who = {
    stage: row.person?.stage ?? 'other',
    country: row.person?.country ?? null,
    flags: detail.flags,
    score: row.score,
    requested: row.requested,
  };
  return refuseProposal({
    fund: rules,
    who,
    lines,
    spentMinor: fund.awardedMinor - (award?.totalMinor ?? 0),
    paidElsewhere: others,
  });
}
