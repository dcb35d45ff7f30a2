import katex from 'katex';
import { parseLatex, type LatexDocument } from '@shared/lib/latex';

export interface AbstractText {
  title: string;
  abstract: string;
  msc: string[];
}

/** What keeps title and abstract from being printed, by field; empty when nothing does. */
export function abstractErrors(input: AbstractText): Record<string, string> {
  const errors: Record<string, string> = {};
  const title = sourceProblem(input.title);
  if (title) errors.title = title.sentence;
  const abstract = sourceProblem(input.abstract);
  if (input.abstract.trim() === '') errors.abstract = 'Write the abstract first.';
  else if (abstract) errors.abstract = `Line ${abstract.line}: ${abstract.sentence}`;
  if (input.msc.length === 0) errors.msc = 'Give at least one MSC 2020 code.';
  return errors;
}

function sourceProblem(source: string): { line: number; sentence: string } | undefined {
  const document = parseLatex(source);
  return document.problems[0] ?? formulaProblem(document);
}

/** The first formula that can't be typeset: the same program with the same limits as in the reader's browser. */
function formulaProblem({ paragraphs }: LatexDocument): { line: number; sentence: string } | undefined {
  for (const segment of paragraphs.flat()) {
    if (segment.type !== 'math') continue;
    try {
      katex.renderToString(segment.tex, {
        displayMode: segment.display,
        throwOnError: true,
        trust: false,
        strict: 'ignore',
        maxExpand: 200,
        maxSize: 20,
      });
    } catch (error) {
      return { line: segment.line, sentence: formulaSentence(error) };
    }
  }
  return undefined;
}

function formulaSentence(error: unknown): string {
  const words =
    error instanceof Error
      ? error.message.replace(/^KaTeX parse error: /, '').replace(/ at position \d+:.*$/s, '')
      : 'it is not understood';
  return `The formula can’t be set: ${words}.`;
}
