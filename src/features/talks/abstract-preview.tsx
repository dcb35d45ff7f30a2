import { useDeferredValue } from 'react';
import type { AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import { parseReference } from '@shared/features/talks/subjects.rules';
import { MathLine, MathText } from '@/components/math-text';

export interface Author {
  name: string;
  affiliation: string;
}

interface PrintedProps extends Pick<AbstractInput, 'title' | 'abstract' | 'msc' | 'references'> {
  authors: readonly Author[];
  /** Level of the title's heading on the page. */
  level?: 2 | 3;
}

/** Title, authors, abstract, subjects and references as they are printed. */
export function Printed({ title, authors, abstract, msc, references, level = 3 }: PrintedProps) {
  const Heading = level === 2 ? 'h2' : 'h3';
  const source = useDeferredValue(abstract);
  return (
    <article className="min-w-0">
      <Heading className="font-serif text-[18px] leading-6 font-semibold">
        {title.trim() === '' ? 'No title yet' : <MathLine source={title} />}
      </Heading>
      <p className="mb-2 font-serif text-[16px] italic">
        {authors.map((author) => [author.name, author.affiliation].filter(Boolean).join(', ')).join('; ')}
      </p>
      {abstract.trim() === '' ? (
        <p className="font-serif text-abstract text-ink3">No abstract yet.</p>
      ) : (
        <MathText source={source} />
      )}
      {msc.length > 0 && <p className="mt-3 text-dense text-ink2">MSC 2020: {msc.join(', ')}</p>}
      {references.length > 0 && (
        <ul className="mt-1 text-dense text-ink2">
          {references.map((text) => (
            <li key={text} className="break-all">
              <Reference text={text} />
            </li>
          ))}
        </ul>
      )}
    </article>
  );
}

function Reference({ text }: { text: string }) {
  const reference = parseReference(text);
  if (!reference) return text;
  return (
    <a href={reference.url} rel="noreferrer" target="_blank">
      {reference.kind === 'doi' ? `doi:${reference.id}` : `arXiv:${reference.id}`}
    </a>
  );
}

/** The pane beside the source. */
export function PreviewPane(props: PrintedProps) {
  return (
    <section aria-label="As printed" className="flex min-w-0 flex-col">
      <div className="mb-1 flex items-baseline justify-between gap-3">
        <h2 className="font-semibold">As printed</h2>
        <span className="text-dense text-ink3">in the programme and on the web page</span>
      </div>
      <div className="min-h-[340px] grow border-y border-ink px-1 py-3">
        <Printed {...props} />
      </div>
    </section>
  );
}
