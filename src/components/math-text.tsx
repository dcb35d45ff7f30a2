import { useMemo } from 'react';
import { parseLatex, type Segment } from '@shared/lib/latex';
import { plainMath } from '@shared/lib/plain-math';
import { setFormula, useKatex, type Katex } from './katex';

/** An abstract as printed: paragraphs, typeset mathematics, and whatever is not understood marked where it stands. */
export function MathText({ source, className = '' }: { source: string; className?: string }) {
  const { paragraphs } = useMemo(() => parseLatex(source), [source]);
  const katex = useKatex(paragraphs.some(hasMath));
  return (
    <div className={`font-serif text-abstract [&>p]:mb-2 [&>p]:text-justify [&>p]:hyphens-auto ${className}`}>
      {paragraphs.map((segments, index) => (
        <p key={index}>
          <Segments segments={segments} katex={katex} />
        </p>
      ))}
    </div>
  );
}

/** A title with mathematics, in the line it stands in. Displayed formulas are set in the line, too. */
export function MathLine({ source }: { source: string }) {
  const segments = useMemo(() => parseLatex(source).paragraphs.flat(), [source]);
  const katex = useKatex(hasMath(segments));
  return <Segments segments={segments} katex={katex} inline />;
}

const hasMath = (segments: Segment[]): boolean => segments.some((segment) => segment.type === 'math');

function Segments({
  segments,
  katex,
  inline = false,
}: {
  segments: Segment[];
  katex: Katex | undefined;
  inline?: boolean;
}) {
  return segments.map((segment, index) => {
    if (segment.type === 'math')
      return <Formula key={index} tex={segment.tex} display={segment.display && !inline} katex={katex} />;
    if (segment.type === 'unknown')
      return <Unknown key={index} source={segment.source} why="Not known here" />;
    if (segment.style === 'emph') return <em key={index}>{segment.text}</em>;
    if (segment.style === 'bold')
      return (
        <strong key={index} className="font-semibold">
          {segment.text}
        </strong>
      );
    if (segment.style === 'code')
      return (
        <code key={index} className="font-mono text-[0.86em]">
          {segment.text}
        </code>
      );
    return <span key={index}>{segment.text}</span>;
  });
}

function Unknown({ source, why }: { source: string; why: string }) {
  return (
    <code
      title={why}
      className="bg-alarmwash px-1 font-mono text-[0.86em] [overflow-wrap:anywhere] text-alarm"
    >
      {source}
    </code>
  );
}

/** Until KaTeX is there the formula stands as plain text, so that nothing jumps in from emptiness. */
function Formula({ tex, display, katex }: { tex: string; display: boolean; katex: Katex | undefined }) {
  const result = useMemo(() => (katex ? setFormula(katex, tex, display) : undefined), [katex, tex, display]);
  if (!result)
    return <span className={display ? 'my-2 block text-center italic' : 'italic'}>{plainMath(tex)}</span>;
  if ('problem' in result) return <Unknown source={tex} why={result.problem} />;
  // KaTeX escapes what it is given; with `trust: false` it writes neither links nor attributes of the author's choice.
  return (
    <span
      className={display ? 'block overflow-x-auto overflow-y-hidden' : 'whitespace-nowrap'}
      dangerouslySetInnerHTML={{ __html: result.html }}
    />
  );
}
