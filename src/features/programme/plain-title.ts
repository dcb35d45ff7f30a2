import { plainLatex } from '@shared/lib/latex';

const known = new Map<string, string>();

/** A title without LaTeX, for tiles: five hundred typeset formulas would make a drag stumble. Read once per title. */
export function plainTitle(title: string): string {
  const plain = known.get(title) ?? plainLatex(title).replace(/\n/g, ' ');
  known.set(title, plain);
  return plain;
}
