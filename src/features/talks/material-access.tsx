import { useState } from 'react';
import type { Material, Talk } from '@shared/features/talks/talks.contract';
import { formatDate } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Input, Select } from '@/components/field';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure } from '@/lib/problem';
import { licenceOptions, visibilityOptions } from './material-words';
import { useMaterialAccess } from './talks.queries';

const labelOf = (options: readonly { value: string; label: string }[], value: string): string =>
  options.find((option) => option.value === value)?.label ?? value;

/** Who may see a material, from when, under which licence; one line until it is to be changed. */
export function MaterialAccess({ talk, material }: { talk: Talk; material: Material }) {
  const [open, setOpen] = useState(false);
  const [draft, setDraft] = useState({
    visibility: material.visibility,
    visibleFrom: material.visibleFrom,
    licence: material.licence,
  });
  const save = useMaterialAccess();
  const errors = fieldErrors(save.error);
  if (!open) {
    return (
      <p className="mt-2 text-dense text-ink2">
        Seen by:{' '}
        <b className="font-semibold">{labelOf(visibilityOptions, material.visibility).toLowerCase()}</b>
        {material.visibleFrom && `, from ${formatDate(material.visibleFrom)}`}. Licence:{' '}
        {labelOf(licenceOptions, material.licence)}.{' '}
        <Button variant="link" onClick={() => setOpen(true)}>
          Change this
        </Button>
      </p>
    );
  }
  const submit = () =>
    save.mutate(
      { talk, material: material.id, version: material.version, body: draft },
      {
        onSuccess: () => {
          toast('Saved who may see it.');
          setOpen(false);
        },
        onError: (error) => Object.keys(fieldErrors(error)).length === 0 && sayFailure(error),
      },
    );
  return (
    <div className="mt-2 grid gap-2 bg-wash p-3">
      <Select
        dense
        label="Who may see it"
        options={visibilityOptions}
        value={draft.visibility}
        onChange={(event) => setDraft({ ...draft, visibility: event.target.value as Material['visibility'] })}
      />
      <Input
        dense
        optional
        label="From which day"
        type="date"
        hint="Empty: at once."
        value={draft.visibleFrom ?? ''}
        error={errors.visibleFrom}
        onChange={(event) => setDraft({ ...draft, visibleFrom: event.target.value || null })}
      />
      <Select
        dense
        label="Licence"
        options={licenceOptions}
        value={draft.licence}
        onChange={(event) => setDraft({ ...draft, licence: event.target.value as Material['licence'] })}
      />
      <div className="flex gap-2">
        <Button busy={save.isPending} onClick={submit}>
          Save who may see it
        </Button>
        <Button variant="link" onClick={() => setOpen(false)}>
          Leave it
        </Button>
      </div>
    </div>
  );
}
