import { ACCENTS, STYLES, SYMBOLS, type Style } from './latex-signs';
import { plainMath } from './plain-math';

/**
 * The part of LaTeX that titles and abstracts may use: paragraphs, mathematics between $ $, \( \), \[ \], $$ $$, and a
 * few commands for text. Pure and linear in the length of the source; mathematics itself is left to KaTeX.
 */
export type Segment =
  | { type: 'text'; text: string; style: Style }
  | { type: 'math'; tex: string; display: boolean; line: number }
  | { type: 'unknown'; source: string };

export interface LatexProblem {
  /** From 1. */
  line: number;
  /** The piece of source that is meant. */
  found: string;
  /** What is wrong and what to do. */
  sentence: string;
}

/** Where mathematics and things not understood stand in the source, for colouring; offsets in UTF-16 units, `to` excluded. */
export interface LatexMark {
  from: number;
  to: number;
  kind: 'math' | 'unknown';
}

export interface LatexDocument {
  paragraphs: Segment[][];
  problems: LatexProblem[];
  marks: LatexMark[];
}

export const MAX_ABSTRACT = 8000;

/** Reads the source into paragraphs; whatever is not understood is named with its line and a remedy. */
export function parseLatex(source: string): LatexDocument {
  const reader = new Reader(source.slice(0, MAX_ABSTRACT * 2));
  return { paragraphs: reader.read(), problems: reader.problems, marks: reader.marks };
}

class Reader {
  readonly problems: LatexProblem[] = [];
  readonly marks: LatexMark[] = [];
  private at = 0;
  private line = 1;
  private paragraphs: Segment[][] = [];
  private current: Segment[] = [];
  private text = '';
  private styles: Style[] = ['plain'];

  constructor(private readonly source: string) {}

  read(): Segment[][] {
    while (this.at < this.source.length) this.step();
    if (this.styles.length > 1) this.problem('{', 'A brace { is not closed. Add } where the group ends.');
    this.endParagraph();
    return this.paragraphs;
  }

  private step(): void {
    const char = this.source[this.at] as string;
    if (char === '\\') return this.command();
    if (char === '$') return this.dollar();
    if (char === '%') return this.comment();
    if (char === '{') return this.open('plain', 1);
    if (char === '}') return this.close();
    if (char === '\n') return this.newline();
    if (char === '~') return this.put('\u00A0', 1);
    if (char === '-') return this.dashes();
    if (char === '`' || char === "'") return this.quotes(char);
    this.put(char === '\t' || char === '\r' ? ' ' : char, 1);
  }

  private put(text: string, advance: number): void {
    this.text += text;
    this.at += advance;
  }

  private style(): Style {
    return this.styles[this.styles.length - 1] as Style;
  }

  private endText(): void {
    if (this.text) this.current.push({ type: 'text', text: this.text, style: this.style() });
    this.text = '';
  }

  private endParagraph(): void {
    this.endText();
    const visible = this.current.some((segment) => segment.type !== 'text' || segment.text.trim() !== '');
    if (visible) this.paragraphs.push(this.current);
    this.current = [];
  }

  private newline(): void {
    const blank = /^\n[ \t\r]*\n\s*/.exec(this.source.slice(this.at, this.at + 400));
    if (blank) {
      this.line += (blank[0].match(/\n/g) ?? []).length;
      this.at += blank[0].length;
      this.endParagraph();
      return;
    }
    this.line += 1;
    this.put(' ', 1);
  }

  private comment(): void {
    while (this.at < this.source.length && this.source[this.at] !== '\n') this.at += 1;
  }

  private dashes(): void {
    if (this.source.startsWith('---', this.at)) this.put('—', 3);
    else if (this.source.startsWith('--', this.at)) this.put('–', 2);
    else this.put('-', 1);
  }

  private quotes(char: string): void {
    const double = this.source[this.at + 1] === char;
    if (char === '`') this.put(double ? '“' : '‘', double ? 2 : 1);
    else this.put(double ? '”' : '’', double ? 2 : 1);
  }

  private open(style: Style, advance: number): void {
    this.endText();
    if (this.styles.length > 40) this.problem('{', 'Groups are nested too deeply.');
    else this.styles.push(style);
    this.at += advance;
  }

  private close(): void {
    this.endText();
    if (this.styles.length === 1)
      this.problem('}', 'A brace } closes nothing. Remove it, or write \\} for the sign itself.');
    else this.styles.pop();
    this.at += 1;
  }

  private dollar(): void {
    const fence = this.source.startsWith('$$', this.at) ? '$$' : '$';
    this.math(fence, fence, fence === '$$');
  }

  private math(open: string, shut: string, display: boolean): void {
    let end = this.at + open.length;
    while (end < this.source.length && !this.source.startsWith(shut, end))
      end += this.source[end] === '\\' && shut !== '\\)' && shut !== '\\]' ? 2 : 1;
    this.endText();
    if (end >= this.source.length) {
      this.problem(open, `Mathematics begins with ${open} and does not end. Add ${shut} where it ends.`);
      this.current.push({ type: 'unknown', source: this.source.slice(this.at, this.at + 60) });
      this.marks.push({ from: this.at, to: this.source.length, kind: 'unknown' });
      this.at = this.source.length;
      return;
    }
    const tex = this.source.slice(this.at + open.length, end);
    if (tex.trim() === '') this.problem(open + shut, 'There is nothing between the signs of mathematics.');
    else this.current.push({ type: 'math', tex, display, line: this.line });
    this.marks.push({ from: this.at, to: end + shut.length, kind: 'math' });
    this.line += (tex.match(/\n/g) ?? []).length;
    this.at = end + shut.length;
  }

  private command(): void {
    if (this.source.startsWith('\\(', this.at)) return this.math('\\(', '\\)', false);
    if (this.source.startsWith('\\[', this.at)) return this.math('\\[', '\\]', true);
    if (this.source.startsWith('\\\\', this.at)) return this.put(' ', 2);
    const name =
      /^\\([A-Za-z]+)\*?/.exec(this.source.slice(this.at, this.at + 60))?.[1] ??
      this.source[this.at + 1] ??
      '';
    const length = 1 + name.length;
    const accent = ACCENTS[name];
    if (accent && this.accent(accent, length, name)) return;
    const style = STYLES[name];
    if (style && this.source[this.at + length] === '{') return this.open(style, length + 1);
    if (name in SYMBOLS) return this.symbol(name, length);
    if (name === 'par') {
      this.at += length;
      return this.endParagraph();
    }
    this.unknown(name, length);
  }

  private symbol(name: string, length: number): void {
    this.put(SYMBOLS[name] as string, length);
    // Letters swallow the space that ends them, as in LaTeX; \LaTeX{} closes with an empty group.
    if (/[A-Za-z]/.test(name)) {
      if (this.source.startsWith('{}', this.at)) this.at += 2;
      else while (this.source[this.at] === ' ') this.at += 1;
    }
  }

  private accent(mark: string, length: number, name: string): boolean {
    const letter = /[A-Za-z]/.test(name);
    const rest = this.source.slice(this.at + length, this.at + length + 8);
    const match =
      /^\{\\?(\p{L})\}/u.exec(rest) ?? (letter ? /^ +(\p{L})/u.exec(rest) : /^\\?(\p{L})/u.exec(rest));
    if (!match) return false;
    const base = match[1] === 'ı' || match[0].includes('\\i') ? 'i' : (match[1] as string);
    this.put((base + mark).normalize('NFC'), length + match[0].length);
    return true;
  }

  private unknown(name: string, length: number): void {
    this.endText();
    const argument =
      /^\{[^{}\n]{0,60}\}/.exec(this.source.slice(this.at + length, this.at + length + 64))?.[0] ?? '';
    const source = this.source.slice(this.at, this.at + length + argument.length);
    this.problem(`\\${name}`, remedy(name));
    this.current.push({ type: 'unknown', source });
    this.marks.push({ from: this.at, to: this.at + Math.max(1, length + argument.length), kind: 'unknown' });
    this.at += Math.max(1, length + argument.length);
  }

  private problem(found: string, sentence: string): void {
    if (this.problems.length < 20) this.problems.push({ line: this.line, found, sentence });
  }
}

function remedy(name: string): string {
  const known = `\\${name} is not known here.`;
  if (['textsc', 'textsl', 'underline'].includes(name))
    return `${known} Use \\emph, or write the word plainly.`;
  if (['begin', 'end'].includes(name))
    return `${known} Write paragraphs with a blank line between them, and displayed mathematics between \\[ and \\].`;
  if (['cite', 'ref', 'label', 'bibitem', 'footnote'].includes(name))
    return `${known} Put references in the field below the abstract.`;
  if (['newcommand', 'def', 'input', 'include', 'usepackage'].includes(name))
    return `${known} Write the text out; definitions and files are not read.`;
  return `${known} If it is mathematics, put it between $ and $; else write the word plainly.`;
}

/** Title or abstract as plain text, one line per paragraph. */
export function plainLatex(source: string): string {
  return parseLatex(source)
    .paragraphs.map((segments) =>
      segments
        .map((segment) =>
          segment.type === 'math'
            ? plainMath(segment.tex)
            : segment.type === 'text'
              ? segment.text
              : segment.source,
        )
        .join('')
        .replace(/\s+/g, ' ')
        .trim(),
    )
    .join('\n');
}

/** Words as a reader counts them; a formula counts as one. */
export function wordCount(source: string): number {
  const text = parseLatex(source)
    .paragraphs.map((segments) =>
      segments.map((segment) => (segment.type === 'text' ? segment.text : ' x ')).join(''),
    )
    .join(' ');
  return text.split(/[\s\u00A0]+/).filter((word) => /[\p{L}\d]/u.test(word)).length;
}
