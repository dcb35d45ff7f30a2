import { useId, useRef, useState } from 'react';
import {
  downloadEvidence,
  MAX_EVIDENCE,
  type CostKind,
  type MyGrant,
} from '@shared/features/grants/grants.contract';
import { costKindNames } from '@shared/features/grants/grants.rules';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { fileAddress } from '@/lib/api';
import { formatBytes } from '@/lib/format';
import { fieldErrors, sayFailure, sentenceOf } from '@/lib/problem';
import { countedIn, type CostFields } from './grant-fields';
import { useAddEvidence, useRemoveEvidence } from './grants.queries';

interface Props {
  kind: CostKind;
  mine: MyGrant;
  fields: CostFields;
  errors: Record<string, string>;
  onChange: (change: Partial<CostFields>) => void;
  /** Documents hang on a saved draft. */
  beforeUpload: () => Promise<number | undefined>;
}

const placeholders: Record<CostKind, string> = {
  travel: 'From where, by what',
  accommodation: 'Where',
  subsistence: 'How it is reckoned',
  fee: 'Fee category',
};

/** One cost: sum, nights or days, how it comes about, documents. */
export function CostRow({ kind, mine, fields, errors, onChange, beforeUpload }: Props) {
  const name = costKindNames[kind];
  const covered = mine.coveredKinds.length === 0 || mine.coveredKinds.includes(kind);
  if (!covered)
    return <p className="border-t border-rule py-3 text-ink3">{name}: no fund of this event pays it.</p>;
  return (
    <div role="group" aria-label={`${name}, with documents`} className="border-t border-rule py-3">
      <div className="grid grid-cols-[140px_88px_1fr] items-start gap-3 max-sm:grid-cols-2">
        <Input
          label={name}
          inputMode="decimal"
          value={fields.amount}
          onChange={(event) => onChange({ amount: event.target.value })}
          error={errors[`${kind}.amount`]}
        />
        {countedIn[kind] ? (
          <Input
            label={countedIn[kind]}
            inputMode="numeric"
            value={fields.quantity}
            onChange={(event) => onChange({ quantity: event.target.value })}
            error={errors[`${kind}.quantity`]}
          />
        ) : (
          <span />
        )}
        <div className="max-sm:col-span-2">
          <Input
            label="How it comes about"
            optional
            maxLength={300}
            placeholder={placeholders[kind]}
            value={fields.note}
            onChange={(event) => onChange({ note: event.target.value })}
            error={errors[`${kind}.note`]}
          />
        </div>
      </div>
      <Documents kind={kind} mine={mine} beforeUpload={beforeUpload} />
    </div>
  );
}

function Documents({ kind, mine, beforeUpload }: Pick<Props, 'kind' | 'mine' | 'beforeUpload'>) {
  const add = useAddEvidence(mine.eventSlug);
  const remove = useRemoveEvidence(mine.eventSlug);
  const [share, setShare] = useState<number>();
  const [error, setError] = useState<string>();
  const id = useId();
  const picker = useRef<HTMLInputElement>(null);
  const files = mine.application?.evidence.filter((file) => file.kind === kind) ?? [];
  const upload = async (file: File) => {
    if (file.size > MAX_EVIDENCE)
      return setError(
        `${file.name} has ${formatBytes(file.size)}; at most ${formatBytes(MAX_EVIDENCE)} are taken.`,
      );
    setError(undefined);
    if ((await beforeUpload()) === undefined)
      return setError('Save the draft first; a field above needs another look.');
    setShare(0);
    add.mutate(
      { kind, file, onProgress: setShare },
      {
        onError: (failure) => setError(fieldErrors(failure).file ?? sentenceOf(failure)),
        onSettled: () => setShare(undefined),
      },
    );
  };
  return (
    <div className="mt-2 text-dense">
      {files.map((file) => (
        <p key={file.id} className="flex flex-wrap items-baseline gap-2">
          <a
            className="break-all"
            href={fileAddress(downloadEvidence, { event: mine.eventSlug, evidence: file.id })}
            target="_blank"
            rel="noreferrer"
          >
            {file.fileName}
          </a>
          <span className="text-ink3">{formatBytes(file.bytes)}</span>
          <Button
            variant="link"
            busy={remove.isPending}
            aria-label={`Remove ${file.fileName}`}
            onClick={() => remove.mutate(file.id, { onError: sayFailure })}
          >
            Remove
          </Button>
        </p>
      ))}
      <input
        ref={picker}
        id={id}
        type="file"
        accept=".pdf,.png,.jpg,.jpeg"
        className="sr-only"
        tabIndex={-1}
        aria-label={`${costKindNames[kind]}: file`}
        aria-describedby={error ? `${id}-error` : undefined}
        onChange={(event) => {
          const [file] = event.target.files ?? [];
          if (file) void upload(file);
          event.target.value = '';
        }}
      />
      <Button
        variant="link"
        disabled={share !== undefined}
        onClick={() => picker.current?.click()}
        aria-label={`Add a document for ${costKindNames[kind].toLowerCase()}`}
      >
        Add a document…
      </Button>
      <span className="ml-2 text-ink3">
        {share !== undefined ? `${Math.round(share * 100)} % sent` : 'PDF, PNG or JPEG, at most 10 MB'}
      </span>
      {error && (
        <p id={`${id}-error`} role="alert" className="font-semibold text-alarm">
          {error}
        </p>
      )}
    </div>
  );
}
