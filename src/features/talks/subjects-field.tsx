import { useId, useState, type KeyboardEvent } from 'react';
import { findClasses, mscClasses, mscProblem } from '@shared/features/talks/subjects.rules';
import { Button } from '@/components/button';
import { Input } from '@/components/field';

const MOST = 4;
const classOf = (code: string): string => mscClasses[code.slice(0, 2)] ?? '';

/** MSC 2020 codes: the first is the main one. Typing words finds the class; the code itself is typed. */
export function SubjectsField({
  codes,
  onChange,
  disabled,
  error,
}: {
  codes: string[];
  onChange: (codes: string[]) => void;
  disabled?: boolean;
  error?: string;
}) {
  const [typed, setTyped] = useState('');
  const [wrong, setWrong] = useState<string>();
  const listId = useId();
  const add = () => {
    const code = typed.trim();
    if (code === '') return;
    const problem = codes.includes(code) ? `${code} is in the list.` : mscProblem(code);
    setWrong(problem);
    if (problem) return;
    onChange([...codes, code]);
    setTyped('');
  };
  const found = typed.trim().length > 1 && mscProblem(typed.trim()) ? findClasses(typed, 4) : [];
  return (
    <section>
      <div className="mb-1 flex items-baseline justify-between gap-3">
        <h2 className="font-semibold">Subjects, MSC 2020</h2>
        <span className="text-dense text-ink3">1 to {MOST}, the main one first</span>
      </div>
      <ul className="border-y border-ink text-dense">
        {codes.map((code, index) => (
          <li key={code} className="flex items-baseline gap-3 border-b border-rule py-1.5 last:border-b-0">
            <b className="w-12 shrink-0 font-semibold">{code}</b>
            <span className="min-w-0 grow text-ink2">{classOf(code)}</span>
            {index === 0 ? (
              <b className="font-semibold">first</b>
            ) : (
              !disabled && (
                <Button
                  variant="link"
                  onClick={() => onChange([code, ...codes.filter((other) => other !== code)])}
                >
                  Make first
                </Button>
              )
            )}
            {!disabled && (
              <Button
                variant="link"
                aria-label={`Remove ${code}`}
                onClick={() => onChange(codes.filter((other) => other !== code))}
              >
                Remove
              </Button>
            )}
          </li>
        ))}
        {codes.length === 0 && <li className="py-1.5 text-ink3">No subject yet.</li>}
      </ul>
      {!disabled && codes.length < MOST && (
        <div className="mt-2">
          <div className="flex items-end gap-2">
            <Input
              className="grow"
              dense
              label="Add a code"
              placeholder="37E05, or a word"
              value={typed}
              aria-controls={found.length > 0 ? listId : undefined}
              error={wrong ?? error}
              onChange={(event) => {
                setTyped(event.target.value);
                setWrong(undefined);
              }}
              onKeyDown={(event: KeyboardEvent) => {
                if (event.key !== 'Enter') return;
                event.preventDefault();
                add();
              }}
            />
            <Button className="min-h-[30px]" onClick={add}>
              Add the code
            </Button>
          </div>
          {found.length > 0 && (
            <ul id={listId} className="mt-1 border border-field text-dense shadow-float">
              {found.map(({ code, title }) => (
                <li key={code}>
                  <button
                    type="button"
                    className="flex min-h-[28px] w-full gap-3 px-2 py-1 text-left hover:bg-actwash"
                    onClick={() => setTyped(code)}
                  >
                    <b className="w-8 font-semibold">{code}</b> {title}
                  </button>
                </li>
              ))}
            </ul>
          )}
        </div>
      )}
      <p className="mt-1 text-dense text-ink3">
        Classes of the Mathematics Subject Classification 2020 by Mathematical Reviews and zbMATH Open, CC
        BY-NC-SA; finer codes are checked by their form only.
      </p>
    </section>
  );
}
