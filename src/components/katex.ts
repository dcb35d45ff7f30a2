import { useEffect, useState } from 'react';

export type Katex = (typeof import('katex'))['default'];

let loaded: Katex | undefined;
let loading: Promise<Katex> | undefined;

/** KaTeX with its style sheet, fetched when the first formula is shown: most pages need neither. */
export function loadKatex(): Promise<Katex> {
  loading ??= Promise.all([import('katex'), import('katex/dist/katex.min.css')]).then(
    ([module]) => (loaded = module.default),
  );
  return loading;
}

/** KaTeX, or undefined until it is there. `wanted` false asks for nothing. */
export function useKatex(wanted = true): Katex | undefined {
  const [katex, setKatex] = useState<Katex | undefined>(() => loaded);
  useEffect(() => {
    if (!wanted || katex) return;
    let gone = false;
    loadKatex().then(
      (value) => !gone && setKatex(() => value),
      () => undefined, // without it formulas stay readable as plain text
    );
    return () => {
      gone = true;
    };
  }, [wanted, katex]);
  return katex;
}

/** Limits for text that anybody may have written: no links, no images, no raw HTML, bounded macros and sizes. */
export const formulaOptions = {
  trust: false,
  strict: 'ignore',
  maxExpand: 200,
  maxSize: 20,
  output: 'htmlAndMathml',
} as const;

export type SetFormula = { html: string } | { problem: string };

/** A formula as HTML with MathML beside it, or why it can't be set. */
export function setFormula(katex: Katex, tex: string, display: boolean): SetFormula {
  try {
    return {
      html: katex.renderToString(tex, { ...formulaOptions, displayMode: display, throwOnError: true }),
    };
  } catch (error) {
    const words =
      error instanceof Error
        ? error.message.replace(/^KaTeX parse error: /, '').replace(/ at position \d+:[\s\S]*$/, '')
        : 'it is not understood';
    return { problem: `The formula can’t be set: ${words}.` };
  }
}
