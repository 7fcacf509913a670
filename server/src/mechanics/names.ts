/** Names as people and code spell them. */

const GREEK: Readonly<Record<string, string>> = {
  α: 'alpha', β: 'beta', γ: 'gamma', δ: 'delta', ε: 'epsilon', ϵ: 'epsilon', ζ: 'zeta', η: 'eta', θ: 'theta',
  ϑ: 'theta', ι: 'iota', κ: 'kappa', λ: 'lambda', μ: 'mu', µ: 'mu', ν: 'nu', ξ: 'xi', ο: 'omicron', π: 'pi',
  ρ: 'rho', σ: 'sigma', ς: 'sigma', τ: 'tau', υ: 'upsilon', φ: 'phi', ϕ: 'phi', χ: 'chi', ψ: 'psi', ω: 'omega',
  Α: 'Alpha', Β: 'Beta', Γ: 'Gamma', Δ: 'Delta', Ε: 'Epsilon', Ζ: 'Zeta', Η: 'Eta', Θ: 'Theta', Ι: 'Iota',
  Κ: 'Kappa', Λ: 'Lambda', Μ: 'Mu', Ν: 'Nu', Ξ: 'Xi', Ο: 'Omicron', Π: 'Pi', Ρ: 'Rho', Σ: 'Sigma', Τ: 'Tau',
  Υ: 'Upsilon', Φ: 'Phi', Χ: 'Chi', Ψ: 'Psi', Ω: 'Omega',
};

const SUBSCRIPTS = '₀₁₂₃₄₅₆₇₈₉';

/** One spelling for names that a reader takes for the same: NFC, Greek letters by name, subscript digits as digits. */
export function canonicalName(name: string): string {
  let plain = true;
  for (let i = 0; i < name.length; i++) if (name.charCodeAt(i) > 127) plain = false;
  if (plain) return name;
  let out = '';
  for (const c of name.normalize('NFC')) {
    const digit = SUBSCRIPTS.indexOf(c);
    out += digit >= 0 ? String(digit) : (GREEK[c] ?? c);
  }
  return out;
}
