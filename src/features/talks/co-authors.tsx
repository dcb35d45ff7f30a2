import { useState } from 'react';
import type { AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import { Button } from '@/components/button';
import { Input } from '@/components/field';

type CoAuthor = AbstractInput['coAuthors'][number];

/** Names as printed, with a small form that opens on demand. */
export function CoAuthors({
  coAuthors,
  onChange,
  disabled,
}: {
  coAuthors: CoAuthor[];
  onChange: (coAuthors: CoAuthor[]) => void;
  disabled?: boolean;
}) {
  const [open, setOpen] = useState(false);
  const [name, setName] = useState('');
  const [affiliation, setAffiliation] = useState('');
  const add = () => {
    if (name.trim() === '') return;
    onChange([...coAuthors, { name: name.trim(), affiliation: affiliation.trim() }]);
    setName('');
    setAffiliation('');
    setOpen(false);
  };
  return (
    <div className="text-ui text-ink2">
      <span>{coAuthors.length > 0 ? 'with ' : ''}</span>
      {coAuthors.map((author, index) => (
        <span key={`${author.name}${index}`}>
          {index > 0 && ', '}
          {author.name}
          {author.affiliation && ` (${author.affiliation})`}
          {!disabled && (
            <button
              type="button"
              className="ml-1 min-h-[24px] min-w-[24px] text-act"
              aria-label={`Remove co-author ${author.name}`}
              onClick={() => onChange(coAuthors.filter((_, at) => at !== index))}
            >
              ×
            </button>
          )}
        </span>
      ))}{' '}
      {!disabled && !open && coAuthors.length < 20 && (
        <Button variant="link" onClick={() => setOpen(true)}>
          Add a co-author
        </Button>
      )}
      {open && (
        <div className="mt-2 flex flex-wrap items-end gap-2">
          <Input
            dense
            autoFocus
            label="Name as printed"
            value={name}
            maxLength={120}
            onChange={(event) => setName(event.target.value)}
          />
          <Input
            dense
            optional
            label="Institute"
            value={affiliation}
            maxLength={200}
            onChange={(event) => setAffiliation(event.target.value)}
          />
          <Button className="min-h-[30px]" disabled={name.trim() === ''} onClick={add}>
            Add the co-author
          </Button>
          <Button variant="link" onClick={() => setOpen(false)}>
            Leave it
          </Button>
        </div>
      )}
    </div>
  );
}
