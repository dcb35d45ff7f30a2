import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseLatex, plainLatex, wordCount } from '../../../shared/lib/latex';
import { plainMath } from '../../../shared/lib/plain-math';
import { mscClasses, mscProblem, parseReference } from '../../../shared/features/talks/subjects.rules';

describe('parseLatex', () => {
  it.each([
    ['a -- b --- c', 'a – b — c'],
    ["``so'' and `so'", '“so” and ‘so’'],
    ['Erd\\H{o}s, \\\'Etale, G\\"odel, \\o re, \\v{S}', 'Erdős, Étale, Gödel, øre, Š'],
    ['50\\% of A\\&B~% a comment', '50% of A&B\u00A0'],
    ['\\emph{one} \\textbf{two}', 'one two'],
  ])('reads %s', (source, text) => {
    const { paragraphs, problems } = parseLatex(source);
    expect(problems).toEqual([]);
    expect(
      paragraphs
        .flat()
        .map((s) => (s.type === 'text' ? s.text : '?'))
        .join(''),
    ).toBe(text);
  });

  it('finds mathematics in line and displayed', () => {
    const { paragraphs } = parseLatex('Let $x$ be\n\\[ y \\]\n\nNew \\(z\\).');
    expect(paragraphs).toHaveLength(2);
    expect(paragraphs.flat().filter((s) => s.type === 'math')).toEqual([
      { type: 'math', tex: 'x', display: false, line: 1 },
      { type: 'math', tex: ' y ', display: true, line: 2 },
      { type: 'math', tex: 'z', display: false, line: 4 },
    ]);
  });

  it.each([
    ['a\nb \\textsc{hand}', 2, '\\textsc', 'Use \\emph'],
    ['$x', 1, '$', 'does not end'],
    ['a}', 1, '}', 'closes nothing'],
    ['\\begin{x}', 1, '\\begin', 'blank line'],
    ['\\input{/etc/passwd}', 1, '\\input', 'not read'],
  ])('names the problem in %j', (source, line, found, words) => {
    const problem = parseLatex(source).problems[0];
    expect(problem).toMatchObject({ line, found });
    expect(problem?.sentence).toContain(words);
  });

  it('ends on any text, in linear time, and never invents line numbers', () => {
    const nasty = fc
      .array(
        fc.constantFrom(
          '\\',
          '{',
          '}',
          '$',
          '$$',
          '\\[',
          '\\]',
          '\\(',
          '\n',
          '\n\n',
          '%',
          'a',
          '\\emph{',
          '\\H',
          '~',
          '-',
          'é',
          '𝔽',
        ),
        { maxLength: 300 },
      )
      .map((parts) => parts.join(''));
    fc.assert(
      fc.property(nasty, (source) => {
        const { problems } = parseLatex(source);
        const lines = source.split('\n').length;
        return problems.every((problem) => problem.line >= 1 && problem.line <= lines);
      }),
    );
    const started = performance.now();
    parseLatex('{'.repeat(16_000));
    parseLatex('\\'.repeat(16_000));
    parseLatex('$'.repeat(15_999));
    expect(performance.now() - started).toBeLessThan(2000);
  });
});

describe('plain text', () => {
  it.each([
    ['\\Delta \\le 2^{-n}', 'Δ ≤ 2⁻ⁿ'],
    ['F \\subset S^4', 'F ⊂ S⁴'],
    ['\\mathbb{Z}^5', 'ℤ⁵'],
    ['\\frac{1}{n}\\log', '1/nlog'],
    ['h^*', 'h^*'],
    ['x_{ij}', 'xᵢⱼ'],
    ['x_{iq}', 'x_(iq)'],
    ['\\|A_n\\| \\gg \\lfloor x \\rfloor', '‖Aₙ‖ ≫ ⌊x⌋'],
    ['\\unheardof + 1', 'unheardof + 1'],
  ])('%s', (tex, plain) => expect(plainMath(tex)).toBe(plain));

  it('keeps a title readable', () => {
    expect(plainLatex('The group $\\check H^1(\\Omega; \\mathbb{Z}) \\cong \\mathbb{Z}^5$')).toBe(
      'The group H¹(Ω; ℤ) ≅ ℤ⁵',
    );
    expect(wordCount('We show that $a$ is \\emph{very} small -- or not.')).toBe(9);
  });
});

describe('MSC 2020 (msc2020.org, notation pattern; class list in the official CSV)', () => {
  it('knows the 63 classes', () => expect(Object.keys(mscClasses)).toHaveLength(63));
  it.each(['05C15', '11G05', '52C17', '57K10', '03E05', '22E50', '00B20', '37-02', '05-XX', '05Cxx'])(
    '%s is well formed',
    (code) => expect(mscProblem(code)).toBeUndefined(),
  );
  it.each(['5C15', '05c15', '05C1', '02A10', '', '3.00E+05'])('%s is refused', (code) =>
    expect(mscProblem(code)).toMatch(/MSC 2020/),
  );
});

describe('references', () => {
  // arXiv: samples of info.arxiv.org "Understanding the arXiv identifier"; DOI: Crossref blog 2015-08-11.
  it.each([
    'hep-th/9901001',
    'hep-th/9901001v1',
    'math.CA/0611800v2',
    '0704.0001',
    '0704.0001v1',
    '1412.7878',
    '1501.00001',
    '9912.12345v2',
  ])('arXiv %s', (id) => expect(parseReference(`arXiv:${id}`)).toMatchObject({ kind: 'arxiv', id }));
  it.each(['10.1007/s10479-015-2094-z', '10.3390/math10213976', '10.7717/peerj-cs.234'])('DOI %s', (id) =>
    expect(parseReference(`https://doi.org/${id}`)).toMatchObject({ kind: 'doi', id }),
  );
  it.each(['1501.0001', '1413.00001', '10.1/x', 'javascript:alert(1)', '0704.0001v0'])('refuses %s', (text) =>
    expect(parseReference(text)).toBeUndefined(),
  );
});
