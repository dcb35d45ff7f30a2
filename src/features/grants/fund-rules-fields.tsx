import { careerStages, type CareerStage } from '@shared/features/accounts/accounts.contract';
import {
  costKinds,
  grantFlags,
  type CostKind,
  type FloorShare,
  type GrantFlag,
} from '@shared/features/grants/grants.contract';
import { costKindNames, flagNames, groupName, stageNames } from '@shared/features/grants/grants.rules';
import { Button } from '@/components/button';
import { Checkbox, Input, Select } from '@/components/field';

export interface FundDraft {
  name: string;
  funder: string;
  budget: string;
  cap: string;
  covers: CostKind[];
  stages: CareerStage[];
  flagsAny: GrantFlag[];
  countries: string;
  notCountries: string;
  minScore: string;
  floors: FloorShare[];
  showScores: boolean;
}

interface Props {
  draft: FundDraft;
  onChange: (change: Partial<FundDraft>) => void;
  errors: Record<string, string>;
}

function Ticks<V extends string>({
  legend,
  hint,
  options,
  names,
  value,
  onChange,
  error,
}: {
  legend: string;
  hint?: string;
  options: readonly V[];
  names: Record<string, string>;
  value: readonly V[];
  onChange: (value: V[]) => void;
  error?: string;
}) {
  return (
    <fieldset>
      <legend className="mb-1 font-semibold">{legend}</legend>
      <div className="flex flex-wrap gap-x-4">
        {options.map((option) => (
          <Checkbox
            key={option}
            label={names[option]}
            checked={value.includes(option)}
            onChange={(change) =>
              onChange(change.target.checked ? [...value, option] : value.filter((other) => other !== option))
            }
          />
        ))}
      </div>
      {hint && <p className="text-dense text-ink3">{hint}</p>}
      {error && <p className="text-dense font-semibold text-alarm">{error}</p>}
    </fieldset>
  );
}

/** What a fund pays and for whom; empty means everybody. */
export function FundRulesFields({ draft, onChange, errors }: Props) {
  return (
    <>
      <Ticks
        legend="Pays"
        options={costKinds}
        names={costKindNames}
        value={draft.covers}
        onChange={(covers) => onChange({ covers })}
        error={errors.covers}
      />
      <Ticks
        legend="For these stages"
        hint="None ticked: for every stage."
        options={careerStages}
        names={stageNames}
        value={draft.stages}
        onChange={(stages) => onChange({ stages })}
      />
      <Ticks
        legend="For people to whom one of these applies"
        hint="None ticked: no such condition."
        options={grantFlags}
        names={flagNames}
        value={draft.flagsAny}
        onChange={(flagsAny) => onChange({ flagsAny })}
      />
      <div className="grid grid-cols-3 gap-3 max-sm:grid-cols-1">
        <Input
          label="Only these countries"
          optional
          hint="Two-letter codes: NO SE DK"
          value={draft.countries}
          onChange={(change) => onChange({ countries: change.target.value })}
          error={firstBelow(errors, 'eligibility.countries')}
        />
        <Input
          label="Not these countries"
          optional
          hint="Two-letter codes"
          value={draft.notCountries}
          onChange={(change) => onChange({ notCountries: change.target.value })}
          error={firstBelow(errors, 'eligibility.notCountries')}
        />
        <Input
          label="Score at least"
          optional
          hint="1 to 10, one decimal"
          inputMode="decimal"
          value={draft.minScore}
          onChange={(change) => onChange({ minScore: change.target.value })}
          error={errors['eligibility.minScore']}
        />
      </div>
      <Floors floors={draft.floors} onChange={(floors) => onChange({ floors })} />
    </>
  );
}

/** The error of a list or of any of its entries. */
const firstBelow = (errors: Record<string, string>, path: string): string | undefined =>
  Object.entries(errors).find(([key]) => key === path || key.startsWith(`${path}.`))?.[1];

const groups = [...careerStages, ...grantFlags].map((value) => ({ value, label: groupName(value) }));

function Floors({ floors, onChange }: { floors: FloorShare[]; onChange: (floors: FloorShare[]) => void }) {
  const set = (index: number, change: Partial<FloorShare>) =>
    onChange(floors.map((floor, n) => (n === index ? { ...floor, ...change } : floor)));
  return (
    <fieldset>
      <legend className="mb-1 font-semibold">Shares that must go to a group</legend>
      {floors.map((floor, index) => (
        <div key={index} className="mb-2 flex flex-wrap items-end gap-2">
          <Input
            className="w-20"
            label="At least, %"
            type="number"
            min={1}
            max={100}
            value={floor.percent}
            onChange={(change) =>
              set(index, { percent: Math.min(100, Math.max(1, Math.round(Number(change.target.value)))) })
            }
          />
          <Select
            label="of"
            options={[
              { value: 'budget', label: 'the budget' },
              { value: 'awarded', label: 'what is awarded' },
            ]}
            value={floor.of}
            onChange={(change) => set(index, { of: change.target.value as FloorShare['of'] })}
          />
          <Select
            label="to"
            options={groups}
            value={floor.group}
            onChange={(change) => set(index, { group: change.target.value as FloorShare['group'] })}
          />
          <Button
            variant="link"
            onClick={() => onChange(floors.filter((_, n) => n !== index))}
            aria-label={`Remove share ${index + 1}`}
          >
            Remove
          </Button>
        </div>
      ))}
      {floors.length < 6 && (
        <Button onClick={() => onChange([...floors, { percent: 50, of: 'awarded', group: 'doctoral' }])}>
          Add a share
        </Button>
      )}
      <p className="mt-1 text-dense text-ink3">
        Shares do not stop an award; the funder’s page shows whether they are met.
      </p>
    </fieldset>
  );
}
