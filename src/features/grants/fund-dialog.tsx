import { useState } from 'react';
import type { Fund, FundInput } from '@shared/features/grants/grants.contract';
import { parseMinor } from '@shared/lib/money';
import { formatGrant } from '@shared/features/grants/grants.rules';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Checkbox, Input } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure } from '@/lib/problem';
import { FundRulesFields, type FundDraft } from './fund-rules-fields';
import { useSaveFund } from './grants.queries';

const codes = (text: string): string[] => [
  ...new Set(
    text
      .toUpperCase()
      .split(/[\s,;]+/)
      .filter(Boolean),
  ),
];

function draftOf(fund: Fund | null): FundDraft {
  const plain = (amount: number | null) =>
    amount === null || !fund ? '' : formatGrant(amount, fund.currency, false).replace(/,/g, '');
  return {
    name: fund?.name ?? '',
    funder: fund?.funder ?? '',
    budget: plain(fund?.budgetMinor ?? null),
    cap: plain(fund?.capPerPersonMinor ?? null),
    covers: fund?.covers ?? ['travel', 'accommodation', 'subsistence'],
    stages: fund?.eligibility.stages ?? [],
    flagsAny: fund?.eligibility.flagsAny ?? [],
    countries: fund?.eligibility.countries.join(' ') ?? '',
    notCountries: fund?.eligibility.notCountries.join(' ') ?? '',
    minScore: fund?.eligibility.minScore?.toString() ?? '',
    floors: fund?.floors ?? [],
    showScores: fund?.showScores ?? false,
  };
}

/** Amounts that can't be read become field errors here; everything else is the server's to check. */
function bodyOf(draft: FundDraft, currency: string): { body: FundInput; errors: Record<string, string> } {
  const errors: Record<string, string> = {};
  const amount = (text: string, field: string): number | undefined => {
    const minor = parseMinor(text, currency);
    if (minor === undefined || minor <= 0) errors[field] = 'Write a sum like 6000 or 6000.50.';
    return minor;
  };
  const { name, funder, covers, stages, flagsAny, floors, showScores } = draft;
  const body: FundInput = {
    name,
    funder,
    covers,
    floors,
    showScores,
    currency,
    budgetMinor: amount(draft.budget, 'budgetMinor') ?? 0,
    capPerPersonMinor: draft.cap.trim() ? (amount(draft.cap, 'capPerPersonMinor') ?? 0) : null,
    eligibility: {
      stages,
      flagsAny,
      countries: codes(draft.countries),
      notCountries: codes(draft.notCountries),
      minScore: draft.minScore ? Number(draft.minScore) : null,
    },
  };
  return { body, errors };
}

/** Adds or changes a fund: budget, what it pays, for whom. */
export function FundDialog({
  event,
  currency,
  fund,
  onClose,
}: {
  event: string;
  currency: string;
  fund: Fund | null;
  onClose: () => void;
}) {
  const [draft, setDraft] = useState(() => draftOf(fund));
  const [own, setOwn] = useState<Record<string, string>>({});
  const save = useSaveFund(event);
  const errors = { ...fieldErrors(save.error), ...own };
  const set = (change: Partial<FundDraft>) => setDraft({ ...draft, ...change });
  const submit = (submitted: React.FormEvent) => {
    submitted.preventDefault();
    const { body, errors: found } = bodyOf(draft, currency);
    setOwn(found);
    if (Object.keys(found).length > 0) return;
    save.mutate(
      { fund: fund?.id ?? null, version: fund?.version ?? 0, body },
      {
        onSuccess: () => {
          toast('Fund saved.');
          onClose();
        },
        onError: (error) => Object.keys(fieldErrors(error)).length === 0 && sayFailure(error),
      },
    );
  };
  return (
    <Dialog open onClose={onClose} title={fund ? `Change fund ${fund.letter}` : 'Add a fund'} width={640}>
      <form className="grid gap-3" onSubmit={submit}>
        <div className="grid grid-cols-2 gap-3 max-sm:grid-cols-1">
          <Input
            label="Name"
            value={draft.name}
            maxLength={80}
            onChange={(change) => set({ name: change.target.value })}
            error={errors.name}
          />
          <Input
            label="Given by"
            value={draft.funder}
            maxLength={120}
            onChange={(change) => set({ funder: change.target.value })}
            error={errors.funder}
          />
          <Input
            label={`Budget, ${currency}`}
            inputMode="decimal"
            value={draft.budget}
            onChange={(change) => set({ budget: change.target.value })}
            error={errors.budgetMinor ?? errors.currency}
          />
          <Input
            label={`At most to one person, ${currency}`}
            optional
            inputMode="decimal"
            value={draft.cap}
            onChange={(change) => set({ cap: change.target.value })}
            error={errors.capPerPersonMinor}
          />
        </div>
        <FundRulesFields draft={draft} onChange={set} errors={errors} />
        <Checkbox
          label="The funder sees the committee’s mean scores"
          checked={draft.showScores}
          onChange={(change) => set({ showScores: change.target.checked })}
        />
        <div className="flex gap-2">
          <Button type="submit" variant="primary" busy={save.isPending}>
            Save the fund
          </Button>
          <Button onClick={onClose}>Leave it</Button>
        </div>
      </form>
    </Dialog>
  );
}
