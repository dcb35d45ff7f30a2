/**
 * The 63 two-digit classes of the Mathematics Subject Classification 2020, by Mathematical Reviews and zbMATH Open
 * (msc2020.org, CC BY-NC-SA). Only these short titles are shipped; finer codes are typed by authors and checked by form.
 */
export const mscClasses: Record<string, string> = Object.fromEntries(
  `00 General and overarching topics; collections|01 History and biography|03 Mathematical logic and foundations|05 Combinatorics|06 Order, lattices, ordered algebraic structures|08 General algebraic systems|11 Number theory|12 Field theory and polynomials|13 Commutative algebra|14 Algebraic geometry|15 Linear and multilinear algebra; matrix theory|16 Associative rings and algebras|17 Nonassociative rings and algebras|18 Category theory; homological algebra|19 K-theory|20 Group theory and generalizations|22 Topological groups, Lie groups|26 Real functions|28 Measure and integration|30 Functions of a complex variable|31 Potential theory|32 Several complex variables and analytic spaces|33 Special functions|34 Ordinary differential equations|35 Partial differential equations|37 Dynamical systems and ergodic theory|39 Difference and functional equations|40 Sequences, series, summability|41 Approximations and expansions|42 Harmonic analysis on Euclidean spaces|43 Abstract harmonic analysis|44 Integral transforms, operational calculus|45 Integral equations|46 Functional analysis|47 Operator theory|49 Calculus of variations and optimal control; optimization|51 Geometry|52 Convex and discrete geometry|53 Differential geometry|54 General topology|55 Algebraic topology|57 Manifolds and cell complexes|58 Global analysis, analysis on manifolds|60 Probability theory and stochastic processes|62 Statistics|65 Numerical analysis|68 Computer science|70 Mechanics of particles and systems|74 Mechanics of deformable solids|76 Fluid mechanics|78 Optics, electromagnetic theory|80 Classical thermodynamics, heat transfer|81 Quantum theory|82 Statistical mechanics, structure of matter|83 Relativity and gravitational theory|85 Astronomy and astrophysics|86 Geophysics|90 Operations research, mathematical programming|91 Game theory, economics, finance, and other social and behavioral sciences|92 Biology and other natural sciences|93 Systems theory; control|94 Information and communication theory, circuits|97 Mathematics education`
    .split('|')
    .map((row) => [row.slice(0, 2), row.slice(3)]),
);

/** Form of a five-character code, e.g. 05C15, 37-02 (msc2020.org: `\d\d(-(XX|\d\d)|[A-Z](xx|\d\d))`). */
const MSC = /^(\d\d)(?:-(?:XX|\d\d)|[A-Z](?:xx|\d\d))$/;

/** What is wrong with a code, in a sentence; undefined when its form is right and its class exists. */
export function mscProblem(code: string): string | undefined {
  const match = MSC.exec(code);
  if (!match) return `An MSC 2020 code looks like 05C15; this is ${code || 'empty'}.`;
  return mscClasses[match[1] as string] ? undefined : `There is no class ${match[1]} in MSC 2020.`;
}

/** Classes whose number or title begins with, or contains, the words typed. */
export function findClasses(typed: string, limit = 6): { code: string; title: string }[] {
  const words = typed.toLowerCase().split(/\s+/).filter(Boolean);
  return Object.entries(mscClasses)
    .filter(([code, title]) =>
      words.every((word) =>
        code.startsWith(word.slice(0, 2)) && /^\d/.test(word) ? true : title.toLowerCase().includes(word),
      ),
    )
    .map(([code, title]) => ({ code, title }))
    .sort((a, b) => a.code.localeCompare(b.code))
    .slice(0, limit);
}

/** Crossref's recommended pattern (blog "DOIs and matching regular expressions", 2015-08-11), the dot escaped. */
const DOI = /^10\.\d{4,9}\/[-._;()/:A-Z0-9]+$/i;
/** arXiv identifier scheme (info.arxiv.org, "Understanding the arXiv identifier"): YYMM.NNNN(N)vV, or archive/YYMMNNN before April 2007. */
const ARXIV_NEW = /^(\d{2})(\d{2})\.(\d{4,5})(v[1-9]\d*)?$/;
const ARXIV_OLD = /^[a-z-]+(\.[A-Z]{2})?\/\d{2}(0[1-9]|1[0-2])\d{3}(v[1-9]\d*)?$/;

export type Reference = { kind: 'doi' | 'arxiv'; id: string; url: string };

/** A DOI or arXiv identifier, bare or as an address; undefined when it is neither. */
export function parseReference(text: string): Reference | undefined {
  const bare = text
    .trim()
    .replace(/^(https?:\/\/(dx\.)?doi\.org\/|doi:\s*)/i, '')
    .replace(/^(https?:\/\/arxiv\.org\/(abs|pdf)\/|arxiv:\s*)/i, '');
  if (DOI.test(bare)) return { kind: 'doi', id: bare, url: `https://doi.org/${bare}` };
  const match = ARXIV_NEW.exec(bare);
  const five = match && Number(match[1]) >= 15;
  const fits =
    match &&
    Number(match[2]) >= 1 &&
    Number(match[2]) <= 12 &&
    (match[3] as string).length === (five ? 5 : 4);
  if (fits || ARXIV_OLD.test(bare)) return { kind: 'arxiv', id: bare, url: `https://arxiv.org/abs/${bare}` };
  return undefined;
}
