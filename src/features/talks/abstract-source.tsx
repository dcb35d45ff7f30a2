import '@fontsource/ibm-plex-mono/400.css';
import { useId, useMemo, useState } from 'react';
import { MAX_ABSTRACT, wordCount, type LatexMark } from '@shared/lib/latex';
import { count } from '@shared/lib/text';
import type { AbstractProblem } from './use-abstract-problems';

interface Props {
  value: string;
  onChange: (value: string) => void;
  marks: LatexMark[];
  problems: AbstractProblem[];
  disabled?: boolean;
  error?: string;
}

/** Numbers, colours and underlines lie under a plain text area with the same measure: typing stays the browser's own. */
export function AbstractSource({ value, onChange, marks, problems, disabled, error }: Props) {
  const id = useId();
  const [line, setLine] = useState(0);
  const rows = useMemo(() => colouredLines(value, marks), [value, marks]);
  const follow = (area: HTMLTextAreaElement) =>
    setLine(area.value.slice(0, area.selectionStart).split('\n').length);
  const text =
    'font-mono text-[13px] leading-[21px] whitespace-pre-wrap break-words [overflow-wrap:anywhere]';
  const described = problems.length > 0 || error ? `${id}-problems` : undefined;
  return (
    <div className="flex min-w-0 flex-col">
      <div className="mb-1 flex items-baseline justify-between gap-3">
        <label htmlFor={id} className="font-semibold">
          Abstract, LaTeX
        </label>
        <span className="text-dense text-ink3">
          {count(wordCount(value), 'word')}, {value.length} of {MAX_ABSTRACT} characters
        </span>
      </div>
      <div className="relative min-h-[340px] grow rounded-field border border-field bg-sheet focus-within:outline-2 focus-within:outline-offset-2 focus-within:outline-act">
        <div aria-hidden="true" className={`py-3 ${text}`}>
          {rows.map((pieces, index) => (
            <div
              key={index}
              className={`grid grid-cols-[40px_1fr] pr-3 ${line === index + 1 ? 'bg-actwash' : ''}`}
            >
              <span className="pr-3 text-right text-tile leading-[21px] text-ink3 select-none">
                {index + 1}
              </span>
              <span className="min-w-0">
                {pieces.map((piece, at) => (
                  <span key={at} className={LOOK[piece.kind]}>
                    {piece.text}
                  </span>
                ))}
                {'\u200b'}
              </span>
            </div>
          ))}
        </div>
        <textarea
          id={id}
          value={value}
          disabled={disabled}
          spellCheck
          lang="en"
          maxLength={MAX_ABSTRACT}
          aria-describedby={described}
          aria-invalid={described ? true : undefined}
          onChange={(event) => onChange(event.target.value)}
          onSelect={(event) => follow(event.currentTarget)}
          onBlur={() => setLine(0)}
          className={`absolute inset-0 size-full resize-none overflow-hidden bg-transparent py-3 pr-3 pl-[40px] text-ink caret-ink outline-none [-webkit-text-fill-color:transparent] ${text}`}
        />
      </div>
      <div id={`${id}-problems`} role="status" className="mt-1 text-dense text-alarm">
        {problems.slice(0, 4).map((problem, index) => (
          <p key={index}>
            <b className="font-semibold">Line {problem.line}:</b> {problem.sentence}
          </p>
        ))}
        {problems.length > 4 && <p>And {problems.length - 4} more.</p>}
        {problems.length === 0 && error && <p className="font-semibold">{error}</p>}
      </div>
    </div>
  );
}

type Kind = LatexMark['kind'] | 'plain';
const LOOK: Record<Kind, string> = {
  plain: '',
  math: 'text-act',
  unknown: 'underline decoration-alarm decoration-wavy underline-offset-4',
};

/** The source by lines, each in pieces of one colour. Marks are in order and don't overlap. */
export function colouredLines(source: string, marks: readonly LatexMark[]): { text: string; kind: Kind }[][] {
  const lines: { text: string; kind: Kind }[][] = [[]];
  const add = (text: string, kind: Kind) =>
    text.split('\n').forEach((part, index) => {
      if (index > 0) lines.push([]);
      if (part) lines[lines.length - 1]?.push({ text: part, kind });
    });
  let at = 0;
  for (const mark of marks) {
    if (mark.from < at) continue;
    add(source.slice(at, mark.from), 'plain');
    add(source.slice(mark.from, mark.to), mark.kind);
    at = mark.to;
  }
  add(source.slice(at), 'plain');
  return lines;
}
