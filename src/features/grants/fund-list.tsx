import { useState } from 'react';
import type { Fund } from '@shared/features/grants/grants.contract';
import {
  costKindNames,
  eligibilityWords,
  formatGrant,
  groupName,
} from '@shared/features/grants/grants.rules';
import { count, listInWords } from '@shared/lib/text';
import { Button } from '@/components/button';
import { SectionHead } from '@/components/page-bar';
import { FunderInvitation } from './funder-invitation';
import { FundBar } from './money-cell';

/** The funds with what is given and left, and their rules in words. */
export function FundList({ funds, onEdit }: { funds: readonly Fund[]; onEdit: (fund: Fund) => void }) {
  const [inviting, setInviting] = useState<Fund>();
  return (
    <section aria-label="Funds">
      <SectionHead title="Funds" />
      {funds.length === 0 && (
        <p className="text-ink3">No fund yet. Awards can be proposed when there is one.</p>
      )}
      {funds.map((fund) => (
        <FundEntry key={fund.id} fund={fund} onEdit={() => onEdit(fund)} onInvite={() => setInviting(fund)} />
      ))}
      {inviting && <FunderInvitation fund={inviting} onClose={() => setInviting(undefined)} />}
    </section>
  );
}

function FundEntry({ fund, onEdit, onInvite }: { fund: Fund; onEdit: () => void; onInvite: () => void }) {
  const money = (amount: number, withCode = false) => formatGrant(amount, fund.currency, withCode);
  const rules = [
    eligibilityWords(fund.eligibility) || 'Anyone',
    fund.capPerPersonMinor !== null && `at most ${money(fund.capPerPersonMinor)} each`,
    `pays ${listInWords(fund.covers.map((kind) => costKindNames[kind].toLowerCase()))}`,
    ...fund.floors.map(
      (floor) =>
        `at least ${floor.percent} % of ${floor.of === 'budget' ? 'the budget' : 'what is awarded'} to ${groupName(floor.group).toLowerCase()}`,
    ),
  ].filter(Boolean);
  return (
    <div className="border-t border-rule py-3">
      <p className="flex items-baseline justify-between gap-2">
        <span>
          <b>Fund {fund.letter}</b> <span className="font-serif text-[15px]">{fund.name}</span>
        </span>
        <span className="text-ink3">{count(fund.awards, 'award')}</span>
      </p>
      <div className="my-1.5">
        <FundBar
          givenMinor={fund.awardedMinor}
          budgetMinor={fund.budgetMinor}
          label={`Fund ${fund.letter}: ${money(fund.awardedMinor)} of ${money(fund.budgetMinor, true)} awarded`}
        />
      </div>
      <p className="flex flex-wrap justify-between gap-x-3">
        <span>
          <b>{money(fund.awardedMinor)}</b> awarded <b className="ml-2">{money(fund.leftMinor)}</b> left
        </span>
        <span className="text-ink3">of {money(fund.budgetMinor, true)}</span>
      </p>
      <p className="text-dense text-ink3">{rules.join('; ')}.</p>
      <p className="text-dense text-ink3">
        {fund.funders.length > 0
          ? `Decides: ${fund.funders.join(', ')}`
          : 'Nobody decides for this fund yet.'}
      </p>
      <div className="mt-1 flex gap-3">
        {fund.can.edit && (
          <Button variant="link" onClick={onEdit} aria-label={`Change fund ${fund.letter}`}>
            Change…
          </Button>
        )}
        {fund.can.inviteFunder && (
          <Button variant="link" onClick={onInvite} aria-label={`Invite a funder to fund ${fund.letter}`}>
            Invite a funder…
          </Button>
        )}
      </div>
    </div>
  );
}
