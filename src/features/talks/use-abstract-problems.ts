import { useDeferredValue, useMemo } from 'react';
import { parseLatex, type LatexMark } from '@shared/lib/latex';
import { setFormula, useKatex } from '@/components/katex';

export interface AbstractProblem {
  line: number;
  sentence: string;
}

/** What is not understood in a source, and the formulas that can't be set, in the order of lines; with marks for colouring. */
export function useAbstractProblems(source: string): { problems: AbstractProblem[]; marks: LatexMark[] } {
  const parsed = useMemo(() => parseLatex(source), [source]);
  // Setting every formula takes longer than a key stroke may: it follows when there is time.
  const later = useDeferredValue(parsed);
  const formulas = useMemo(
    () => later.paragraphs.flat().filter((segment) => segment.type === 'math'),
    [later],
  );
  const katex = useKatex(formulas.length > 0);
  const unset = useMemo(() => {
    if (!katex) return [];
    return formulas.flatMap(({ tex, display, line }) => {
      const result = setFormula(katex, tex, display);
      return 'problem' in result ? [{ line, sentence: result.problem }] : [];
    });
  }, [katex, formulas]);
  return useMemo(
    () => ({ problems: [...parsed.problems, ...unset].sort((a, b) => a.line - b.line), marks: parsed.marks }),
    [parsed, unset],
  );
}
