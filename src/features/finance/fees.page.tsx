import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { useParams } from 'react-router-dom';
import { careerStages, type CareerStage } from '@shared/features/accounts/accounts.contract';
import { careerStageNames } from '@shared/features/accounts/accounts.rules';
import type { FeeTable } from '@shared/features/finance/finance.contract';
import { exponentOf, formatMoney, parseMinor } from '@shared/lib/money';
import { Button, LinkButton } from '@/components/button';
import { Checkbox, Input } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { Note, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { feesQuery, useReplaceFees } from './finance.queries';

interface CategoryDraft {
  id?: string;
  name: string;
  stages: CareerStage[];
  early: string;
  earlyUntil: string;
  regular: string;
  tax: string;
}
interface ExtraDraft {
  id?: string;
  name: string;
  price: string;
  capacity: string;
  until: string;
  tax: string;
  hint: string;
}

export function Component() {
  const { event = '' } = useParams();
  const query = useQuery(feesQuery(event));
  return (
    <>
      <PageBar
        title="Fees and extras"
        actions={<LinkButton to={`/organise/${event}/settings`}>Back to the settings</LinkButton>}
      />
      <div className="p-6 max-sm:p-4">
        <QueryView query={query} what="the fees">
          {(table) => <Editor event={event} table={table} />}
        </QueryView>
      </div>
    </>
  );
}

function Editor({ event, table }: { event: string; table: FeeTable }) {
  const text = (minor: number | null): string =>
    minor === null ? '' : formatMoney(minor, table.currency, false).replace(/,/g, '');
  const [categories, setCategories] = useState<CategoryDraft[]>(() =>
    table.categories.map((c) => ({
      id: c.id,
      name: c.name,
      stages: c.stages,
      early: text(c.earlyMinor),
      earlyUntil: c.earlyUntil ?? '',
      regular: text(c.regularMinor),
      tax: String(c.taxBasisPoints / 100),
    })),
  );
  const [extras, setExtras] = useState<ExtraDraft[]>(() =>
    table.extras.map((x) => ({
      id: x.id,
      name: x.name,
      price: text(x.priceMinor),
      capacity: x.capacity === null ? '' : String(x.capacity),
      until: x.until ?? '',
      tax: String(x.taxBasisPoints / 100),
      hint: x.hint,
    })),
  );
  const [taxNote, setTaxNote] = useState(table.taxNote);
  const [local, setLocal] = useState<Record<string, string>>({});
  const save = useReplaceFees(event);
  const errors = { ...fieldErrors(save.error), ...local };
  const submit = (e: FormEvent) => {
    e.preventDefault();
    const wrong: Record<string, string> = {};
    const amount = (value: string, path: string): number => {
      const minor = parseMinor(value, table.currency);
      if (minor === undefined || minor < 0)
        wrong[path] =
          `An amount in ${table.currency}, with at most ${exponentOf(table.currency)} digits after the point; this is “${value}”.`;
      return minor ?? 0;
    };
    const body = {
      taxNote,
      categories: categories.map((c, i) => ({
        id: c.id,
        name: c.name,
        stages: c.stages,
        earlyMinor: c.early === '' ? null : amount(c.early, `categories.${i}.earlyMinor`),
        earlyUntil: c.earlyUntil || null,
        regularMinor: amount(c.regular, `categories.${i}.regularMinor`),
        taxBasisPoints: Math.round(Number(c.tax || 0) * 100),
      })),
      extras: extras.map((x, i) => ({
        id: x.id,
        name: x.name,
        priceMinor: amount(x.price, `extras.${i}.priceMinor`),
        capacity: x.capacity === '' ? null : Number(x.capacity),
        until: x.until || null,
        taxBasisPoints: Math.round(Number(x.tax || 0) * 100),
        hint: x.hint,
      })),
    };
    setLocal(wrong);
    if (Object.keys(wrong).length === 0)
      save.mutate(body, { onSuccess: () => toast('Fees saved. What was ordered keeps its price.') });
  };
  const putC = (i: number, change: Partial<CategoryDraft>) =>
    setCategories(categories.map((c, k) => (k === i ? { ...c, ...change } : c)));
  const putX = (i: number, change: Partial<ExtraDraft>) =>
    setExtras(extras.map((x, k) => (k === i ? { ...x, ...change } : x)));
  return (
    <form noValidate onSubmit={submit} className="max-w-[1080px]">
      <Note>
        Amounts are in {table.currency}. Early fees end at 23:59 of their last day in {table.timeZone}.
        Whether tax is due depends on local law: the finance office confirms the rates.
      </Note>
      <h2 className="mt-6 border-t-[1.75px] border-ink pt-2 font-semibold">Fee categories</h2>
      {categories.map((c, i) => (
        <fieldset
          key={c.id ?? `c${i}`}
          className="grid grid-cols-[1.3fr_0.7fr_0.9fr_0.7fr_0.5fr_auto] items-start gap-3 border-b border-rule py-3 max-md:grid-cols-2"
        >
          <legend className="sr-only">Category {i + 1}</legend>
          <Input
            dense
            label="Name"
            value={c.name}
            onChange={(e) => putC(i, { name: e.target.value })}
            error={errors[`categories.${i}.name`]}
          />
          <Input
            dense
            label="Early"
            optional
            inputMode="decimal"
            value={c.early}
            onChange={(e) => putC(i, { early: e.target.value })}
            error={errors[`categories.${i}.earlyMinor`]}
          />
          <Input
            dense
            label="Early until"
            optional
            type="date"
            value={c.earlyUntil}
            onChange={(e) => putC(i, { earlyUntil: e.target.value })}
            error={errors[`categories.${i}.earlyUntil`]}
          />
          <Input
            dense
            label="Regular"
            inputMode="decimal"
            value={c.regular}
            onChange={(e) => putC(i, { regular: e.target.value })}
            error={errors[`categories.${i}.regularMinor`]}
          />
          <Input
            dense
            label="Tax %"
            inputMode="decimal"
            value={c.tax}
            onChange={(e) => putC(i, { tax: e.target.value })}
            error={errors[`categories.${i}.taxBasisPoints`]}
          />
          <Button
            variant="link"
            className="mt-6"
            aria-label={`Remove ${c.name}`}
            onClick={() => setCategories(categories.filter((_c, k) => k !== i))}
          >
            Remove
          </Button>
          <div className="col-span-full flex flex-wrap gap-x-5">
            <span className="text-ink3">For</span>
            {careerStages.map((stage) => (
              <Checkbox
                key={stage}
                label={careerStageNames[stage]}
                checked={c.stages.includes(stage)}
                onChange={(e) =>
                  putC(i, {
                    stages: e.target.checked ? [...c.stages, stage] : c.stages.filter((s) => s !== stage),
                  })
                }
              />
            ))}
            {c.stages.length === 0 && <span className="text-dense text-ink3">anybody may choose it</span>}
          </div>
        </fieldset>
      ))}
      <Button
        className="mt-3"
        onClick={() =>
          setCategories([
            ...categories,
            { name: '', stages: [], early: '', earlyUntil: '', regular: '', tax: '0' },
          ])
        }
      >
        Add a category
      </Button>
      <h2 className="mt-8 border-t-[1.75px] border-ink pt-2 font-semibold">Extras</h2>
      {extras.map((x, i) => (
        <fieldset
          key={x.id ?? `x${i}`}
          className="grid grid-cols-[1.3fr_0.6fr_0.6fr_0.9fr_0.4fr_1fr_auto] items-start gap-3 border-b border-rule py-3 max-md:grid-cols-2"
        >
          <legend className="sr-only">Extra {i + 1}</legend>
          <Input
            dense
            label="Name"
            value={x.name}
            onChange={(e) => putX(i, { name: e.target.value })}
            error={errors[`extras.${i}.name`]}
          />
          <Input
            dense
            label="Price"
            inputMode="decimal"
            value={x.price}
            onChange={(e) => putX(i, { price: e.target.value })}
            error={errors[`extras.${i}.priceMinor`]}
          />
          <Input
            dense
            label="Pieces"
            optional
            type="number"
            min={1}
            value={x.capacity}
            onChange={(e) => putX(i, { capacity: e.target.value })}
            error={errors[`extras.${i}.capacity`]}
          />
          <Input
            dense
            label="Until"
            optional
            type="date"
            value={x.until}
            onChange={(e) => putX(i, { until: e.target.value })}
            error={errors[`extras.${i}.until`]}
          />
          <Input
            dense
            label="Tax %"
            inputMode="decimal"
            value={x.tax}
            onChange={(e) => putX(i, { tax: e.target.value })}
          />
          <Input
            dense
            label="Hint"
            optional
            value={x.hint}
            onChange={(e) => putX(i, { hint: e.target.value })}
          />
          <Button
            variant="link"
            className="mt-6"
            aria-label={`Remove ${x.name}`}
            onClick={() => setExtras(extras.filter((_x, k) => k !== i))}
          >
            Remove
          </Button>
        </fieldset>
      ))}
      <Button
        className="mt-3"
        onClick={() =>
          setExtras([...extras, { name: '', price: '', capacity: '', until: '', tax: '0', hint: '' }])
        }
      >
        Add an extra
      </Button>
      <Input
        className="mt-8 max-w-[520px]"
        dense
        label="Sentence about tax"
        optional
        value={taxNote}
        onChange={(e) => setTaxNote(e.target.value)}
        hint="Printed where no tax is charged, e.g. why it is exempt."
      />
      {save.error && Object.keys(fieldErrors(save.error)).length === 0 && (
        <p role="alert" className="mt-3 font-semibold text-alarm">
          {sentenceOf(save.error)}
        </p>
      )}
      <div className="mt-6">
        <Button type="submit" variant="primary" busy={save.isPending}>
          Save the fees
        </Button>
      </div>
    </form>
  );
}
