import { useState } from 'react';
import { parseReference } from '@shared/features/talks/subjects.rules';
import { Button } from '@/components/button';
import { Input } from '@/components/field';

/** References by DOI or arXiv identifier, checked by their pattern. */
export function ReferencesField({
  references,
  onChange,
  disabled,
}: {
  references: string[];
  onChange: (references: string[]) => void;
  disabled?: boolean;
}) {
  const [typed, setTyped] = useState('');
  const [wrong, setWrong] = useState<string>();
  const add = () => {
    const found = parseReference(typed);
    const taken = found && references.some((text) => parseReference(text)?.id === found.id);
    setWrong(
      found
        ? taken
          ? 'This reference is in the list.'
          : undefined
        : `“${typed}” is neither a DOI (10.1000/xyz) nor an arXiv identifier (2101.01234).`,
    );
    if (!found || taken) return;
    onChange([...references, found.id]);
    setTyped('');
  };
  return (
    <section>
      <h2 className="mb-1 font-semibold">
        References <span className="font-normal text-ink3">optional</span>
      </h2>
      <ul className="border-y border-ink text-dense">
        {references.map((text) => (
          <li key={text} className="flex items-baseline gap-3 border-b border-rule py-1.5 last:border-b-0">
            <span className="min-w-0 grow break-all">
              {parseReference(text)?.kind === 'doi' ? 'doi:' : 'arXiv:'}
              {text}
            </span>
            {!disabled && (
              <Button
                variant="link"
                aria-label={`Remove ${text}`}
                onClick={() => onChange(references.filter((other) => other !== text))}
              >
                Remove
              </Button>
            )}
          </li>
        ))}
        {references.length === 0 && <li className="py-1.5 text-ink3">None.</li>}
      </ul>
      {!disabled && references.length < 20 && (
        <div className="mt-2 flex items-end gap-2">
          <Input
            className="grow"
            dense
            label="Add a DOI or arXiv identifier"
            value={typed}
            error={wrong}
            onChange={(event) => {
              setTyped(event.target.value);
              setWrong(undefined);
            }}
            onKeyDown={(event) => {
              if (event.key !== 'Enter') return;
              event.preventDefault();
              add();
            }}
          />
          <Button className="min-h-[30px]" disabled={typed.trim() === ''} onClick={add}>
            Add the reference
          </Button>
        </div>
      )}
    </section>
  );
}
