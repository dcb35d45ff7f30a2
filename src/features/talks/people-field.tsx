import { useState } from 'react';
import { talkParts, type TalkPart } from '@shared/features/talks/talks.contract';
import { Button } from '@/components/button';
import { Input, Select } from '@/components/field';

export interface PersonEntry {
  accountId?: string;
  email?: string;
  givenName?: string;
  familyName?: string;
  part: TalkPart;
  /** For showing only. */
  printedName: string;
}

export const partOptions: { value: TalkPart; label: string }[] = talkParts.map((value) => ({
  value,
  label: { speaker: 'Speaker', chair: 'Chair', tutor: 'Tutor' }[value],
}));
const blank = { email: '', givenName: '', familyName: '' };

/** Who has which part; somebody new is named by address and name. */
export function PeopleField({
  people,
  onChange,
  errors,
  parts = partOptions,
}: {
  people: PersonEntry[];
  onChange: (people: PersonEntry[]) => void;
  errors: Record<string, string>;
  parts?: typeof partOptions;
}) {
  const [entry, setEntry] = useState(blank);
  const [part, setPart] = useState<TalkPart>(parts[0]?.value ?? 'speaker');
  const complete =
    entry.email.trim() !== '' && entry.givenName.trim() !== '' && entry.familyName.trim() !== '';
  const add = () => {
    onChange([...people, { ...entry, part, printedName: `${entry.givenName} ${entry.familyName}` }]);
    setEntry(blank);
  };
  return (
    <fieldset>
      <legend className="mb-1 font-semibold">People</legend>
      <ul className="border-y border-ink text-dense">
        {people.map((person, index) => (
          <li
            key={`${person.accountId ?? person.email}${person.part}`}
            className="border-b border-rule py-1 last:border-b-0"
          >
            <div className="flex items-center gap-3">
              <span className="min-w-0 grow">
                <b className="font-semibold">{person.printedName}</b>{' '}
                {person.email && <span className="text-ink3">{person.email}</span>}
              </span>
              <select
                aria-label={`Part of ${person.printedName}`}
                className="min-h-[28px] rounded-field border border-field bg-sheet px-1"
                value={person.part}
                onChange={(e) =>
                  onChange(
                    people.map((other, at) =>
                      at === index ? { ...other, part: e.target.value as TalkPart } : other,
                    ),
                  )
                }
              >
                {parts.map((option) => (
                  <option key={option.value} value={option.value}>
                    {option.label}
                  </option>
                ))}
              </select>
              <Button
                variant="link"
                aria-label={`Remove ${person.printedName}`}
                onClick={() => onChange(people.filter((_, at) => at !== index))}
              >
                Remove
              </Button>
            </div>
            {(errors[`people.${index}.email`] ?? errors[`people.${index}.accountId`]) && (
              <p className="font-semibold text-alarm">
                {errors[`people.${index}.email`] ?? errors[`people.${index}.accountId`]}
              </p>
            )}
          </li>
        ))}
        {people.length === 0 && <li className="py-1 text-ink3">Nobody yet.</li>}
      </ul>
      {errors.people && <p className="mt-1 text-dense font-semibold text-alarm">{errors.people}</p>}
      <div className="mt-2 grid items-end gap-2 sm:grid-cols-[1fr_1fr_1.4fr_auto]">
        <Input
          dense
          label="Given name"
          value={entry.givenName}
          onChange={(e) => setEntry({ ...entry, givenName: e.target.value })}
        />
        <Input
          dense
          label="Family name"
          value={entry.familyName}
          onChange={(e) => setEntry({ ...entry, familyName: e.target.value })}
        />
        <Input
          dense
          label="E-mail address"
          type="email"
          value={entry.email}
          onChange={(e) => setEntry({ ...entry, email: e.target.value })}
        />
        <Select
          dense
          label="Part"
          options={parts}
          value={part}
          onChange={(e) => setPart(e.target.value as TalkPart)}
        />
      </div>
      <Button className="mt-2" disabled={!complete} onClick={add}>
        Add the person
      </Button>
    </fieldset>
  );
}
