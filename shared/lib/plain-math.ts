const UNICODE: Record<string, string> = {
  alpha: 'α', beta: 'β', gamma: 'γ', delta: 'δ', epsilon: 'ε', varepsilon: 'ε', zeta: 'ζ', eta: 'η', theta: 'θ', iota: 'ι', kappa: 'κ', lambda: 'λ', mu: 'μ', nu: 'ν', xi: 'ξ', pi: 'π', rho: 'ρ', sigma: 'σ', tau: 'τ', phi: 'φ', varphi: 'φ', chi: 'χ', psi: 'ψ', omega: 'ω',
  Gamma: 'Γ', Delta: 'Δ', Theta: 'Θ', Lambda: 'Λ', Xi: 'Ξ', Pi: 'Π', Sigma: 'Σ', Phi: 'Φ', Psi: 'Ψ', Omega: 'Ω',
  infty: '∞', le: '≤', leq: '≤', ge: '≥', geq: '≥', ne: '≠', neq: '≠', to: '→', rightarrow: '→', mapsto: '↦', times: '×', cdot: '·', cdots: '⋯', ldots: '…', dots: '…', in: '∈', notin: '∉', subset: '⊂', subseteq: '⊆', cup: '∪', cap: '∩', emptyset: '∅', sum: '∑', prod: '∏', int: '∫', partial: '∂', nabla: '∇', cong: '≅', simeq: '≃', sim: '∼', equiv: '≡', approx: '≈', oplus: '⊕', otimes: '⊗', forall: '∀', exists: '∃', pm: '±', circ: '∘', ell: 'ℓ', langle: '⟨', rangle: '⟩', ast: '∗', star: '⋆', sqrt: '√', quad: ' ', log: 'log ', sin: 'sin ', cos: 'cos ', lim: 'lim ', max: 'max ', min: 'min ', dim: 'dim ', ker: 'ker ', deg: 'deg ', exp: 'exp ', det: 'det ', gcd: 'gcd ', mod: ' mod ', bmod: ' mod ',
  bigcup: '⋃', bigcap: '⋂', bigoplus: '⨁', bigotimes: '⨂', coprod: '∐', oint: '∮', wedge: '∧', vee: '∨', setminus: '∖', mid: '|', colon: ':', perp: '⊥', parallel: '∥', ll: '≪', gg: '≫', propto: '∝', Rightarrow: '⇒', implies: '⇒', iff: '⇔', Leftrightarrow: '⇔', leftarrow: '←', hookrightarrow: '↪', twoheadrightarrow: '↠', longrightarrow: '⟶', supset: '⊃', supseteq: '⊇', subsetneq: '⊊', lfloor: '⌊', rfloor: '⌋', lceil: '⌈', rceil: '⌉', lVert: '‖', rVert: '‖', Vert: '‖', lvert: '|', rvert: '|', prime: '′', aleph: 'ℵ', hbar: 'ℏ', Re: 'Re ', Im: 'Im ', top: '⊤', bot: '⊥', varnothing: '∅', rtimes: '⋊', ltimes: '⋉', triangle: '△', square: '□', bullet: '•', dagger: '†', mp: '∓', div: '÷', asymp: '≍', prec: '≺', succ: '≻', vdash: '⊢', models: '⊨', neg: '¬', qquad: '  ',
};
const DOUBLE_STRUCK: Record<string, string> = { C: 'ℂ', H: 'ℍ', N: 'ℕ', P: 'ℙ', Q: 'ℚ', R: 'ℝ', Z: 'ℤ', F: '𝔽' };
const SUPERSCRIPTS = Object.fromEntries([...'0123456789+-=()n'].map((c, i) => [c, [...'⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁼⁽⁾ⁿ'][i] as string]));
const SUBSCRIPTS = Object.fromEntries([...'0123456789+-=()aehijklmnoprstuvx'].map((c, i) => [c, [...'₀₁₂₃₄₅₆₇₈₉₊₋₌₍₎ₐₑₕᵢⱼₖₗₘₙₒₚᵣₛₜᵤᵥₓ'][i] as string]));

/** Mathematics as readable plain text: `\Delta \le 2^{-n}` -> `Δ ≤ 2⁻ⁿ`. For mails, calendars, titles of pages. */
export function plainMath(tex: string): string {
  let text = tex
    .slice(0, 2000)
    .replace(/\\(?:mathbb|Bbb)\s*\{?\s*([A-Z])\s*\}?/g, (_m, letter: string) => DOUBLE_STRUCK[letter] ?? letter)
    .replace(/\\(?:mathrm|mathbf|mathcal|mathfrak|mathsf|mathit|text|textrm|operatorname|boldsymbol|overline|widetilde|tilde|hat|widehat|check|bar|left|right|big|Big|bigl|bigr|displaystyle)(?![A-Za-z])\*?|\\[,;!:]/g, '')
    .replace(/\\[dt]?frac\s*\{([^{}]*)\}\s*\{([^{}]*)\}/g, (_m, a: string, b: string) => `${wrap(a)}/${wrap(b)}`)
    .replace(/\\([A-Za-z]+) ?/g, (whole, name: string) => UNICODE[name] ?? (whole.length > 2 ? `${name} ` : ''))
    .replace(/\\\|/g, '‖')
    .replace(/\\([{}%&$#_ ])/g, '$1');
  text = text.replace(/([≤≥≠→↦∈∉⊂⊆≅≃∼≡≈≫≪⇒⇔])/gu, ' $1 ').replace(/\s+([⌋⌉⟩)\]])/gu, '$1');
  text = script(text, '^', SUPERSCRIPTS);
  text = script(text, '_', SUBSCRIPTS);
  return text.replace(/[{}]/g, '').replace(/\s+/g, ' ').trim();
}

const wrap = (part: string): string => (/^[\p{L}\d]*$/u.test(part.trim()) ? part.trim() : `(${part.trim()})`);

function script(text: string, sign: '^' | '_', table: Record<string, string>): string {
  const pattern = sign === '^' ? /\^(?:\{([^{}]*)\}|(\S))/gu : /_(?:\{([^{}]*)\}|(\S))/gu;
  return text.replace(pattern, (_m, group: string | undefined, single: string | undefined) => {
    const inner = group ?? single ?? '';
    const set = [...inner].map((char) => table[char]);
    if (set.every((char) => char !== undefined)) return set.join('');
    return [...inner].length === 1 ? `${sign}${inner}` : `${sign}(${inner})`;
  });
}
