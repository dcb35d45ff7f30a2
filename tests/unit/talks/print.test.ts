import fc from 'fast-check';
import katex from 'katex';
import { describe, expect, it } from 'vitest';
import { parseLatex, plainLatex } from '../../../shared/lib/latex';
import { abstractErrors } from '../../../server/features/talks/talks-print.service';
import { formulaOptions, setFormula } from '../../../src/components/katex';

const good = { title: 'Kites', abstract: 'About $x$.', msc: ['52C20'] };

describe('what can be printed', () => {
  it.each([
    [{}, {}],
    [{ abstract: '   ' }, { abstract: 'Write the abstract first.' }],
    [{ msc: [] }, { msc: 'Give at least one MSC 2020 code.' }],
    [
      { abstract: 'One\ntwo \\textsc{x}' },
      { abstract: 'Line 2: \\textsc is not known here. Use \\emph, or write the word plainly.' },
    ],
    [
      { abstract: 'One\n\ntwo $\\foo$' },
      { abstract: 'Line 3: The formula can’t be set: Undefined control sequence: \\foo.' },
    ],
    [{ title: 'On $\\frac{1}$' }, { title: expect.stringMatching(/^The formula can’t be set: /) as string }],
  ])('%j', (over, errors) => expect(abstractErrors({ ...good, ...over })).toEqual(errors));

  it.each([
    ['a macro that grows without end', '$\\def\\a{\\a\\a}\\a$'],
    [
      'a macro that doubles',
      '$\\def\\a{xx}\\def\\b{\\a\\a}\\def\\c{\\b\\b}\\def\\d{\\c\\c}\\def\\e{\\d\\d}\\def\\f{\\e\\e}\\def\\g{\\f\\f}\\def\\h{\\g\\g}\\def\\i{\\h\\h}\\i\\i\\i\\i$',
    ],
  ])('refuses %s within a second', (_name, abstract) => {
    const started = performance.now();
    expect(abstractErrors({ ...good, abstract })).toHaveProperty('abstract');
    expect(performance.now() - started).toBeLessThan(1000);
  });
});

describe('what is set in the browser', () => {
  it.each([
    '\\href{javascript:alert(1)}{x}',
    '\\url{javascript:alert(1)}',
    '\\includegraphics{https://example.org/x.png}',
    '\\htmlClass{x}{y}',
    '\\htmlStyle{color:red}{y}',
    '\\htmlData{a=b}{y}',
  ])('%s gives no link, image or attribute', (tex) => {
    const result = setFormula(katex, tex, false);
    const html = 'html' in result ? result.html.replace(/<annotation[\s\S]*?<\/annotation>/g, '') : '';
    expect(html).not.toMatch(/<a |<img|javascript:|class="x"|data-a|color:red;"/);
  });

  it('escapes every text and holds sizes down', () => {
    const result = setFormula(katex, '\\text{<img src=x onerror=alert(1)>}\\rule{9999em}{9999em}', true);
    if (!('html' in result)) throw new Error(result.problem);
    expect(result.html).not.toContain('<img');
    for (const [, width] of result.html.matchAll(/width:([\d.]+)em/g))
      expect(Number(width)).toBeLessThanOrEqual(formulaOptions.maxSize * 1.3);
    expect(result.html).toContain('<math');
  });

  it('ends on any text, and what comes out holds no tag that went in', () => {
    const piece = fc.constantFrom(
      '\\',
      '{',
      '}',
      '$',
      '^',
      '_',
      '&',
      '\\frac',
      '\\sqrt',
      '\\begin{matrix}',
      '\\end{matrix}',
      '\\left(',
      '\\right)',
      '<script>',
      '"',
      "'",
      '\n',
      'x',
      '\\def\\a',
      '\\a',
      '#1',
      '\\text{',
      '∑',
    );
    fc.assert(
      fc.property(
        fc.array(piece, { maxLength: 60 }).map((pieces) => pieces.join('')),
        (tex) => {
          const result = setFormula(katex, tex, false);
          return 'problem' in result ? result.problem.length > 0 : !result.html.includes('<script');
        },
      ),
      { numRuns: 300 },
    );
  });
});

describe('marks for colouring', () => {
  it('point at the mathematics and at what is not understood', () => {
    const source = 'Let $x$ and \\textsc{y} be\n\\[ z \\] or \\(w\\) $open';
    const { marks } = parseLatex(source);
    expect(marks.map((mark) => [mark.kind, source.slice(mark.from, mark.to)])).toEqual([
      ['math', '$x$'],
      ['unknown', '\\textsc{y}'],
      ['math', '\\[ z \\]'],
      ['math', '\\(w\\)'],
      ['unknown', '$open'],
    ]);
  });
  it('are in order, do not overlap and stay inside any text', () => {
    const nasty = fc
      .array(
        fc.constantFrom('\\', '{', '}', '$', '$$', '\\[', '\\]', '\n', '%', 'a', '\\emph{', '\\nope{x}', '𝔽'),
        { maxLength: 200 },
      )
      .map((parts) => parts.join(''));
    fc.assert(
      fc.property(nasty, (source) => {
        let at = 0;
        for (const mark of parseLatex(source).marks) {
          if (mark.from < at || mark.to <= mark.from || mark.to > source.length) return false;
          at = mark.to;
        }
        return true;
      }),
    );
  });
});

it('plain text of any source is one line per paragraph, without control characters of LaTeX that were understood', () => {
  expect(plainLatex('A \\emph{kite} is\n$\\Delta$.\n\n$\\bigcup_i A_i \\le \\overline{B}$')).toBe(
    'A kite is Δ.\n⋃ᵢ Aᵢ ≤ B',
  );
});
