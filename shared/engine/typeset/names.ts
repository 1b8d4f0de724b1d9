/** Names of values and functions as LaTeX. */

const GREEK = new Set([
  'alpha', 'beta', 'gamma', 'delta', 'epsilon', 'zeta', 'eta', 'theta', 'iota', 'kappa', 'lambda', 'mu', 'nu', 'xi', 'rho', 'sigma', 'tau', 'upsilon', 'phi', 'chi', 'psi', 'omega',
  'Gamma', 'Delta', 'Theta', 'Lambda', 'Xi', 'Pi', 'Sigma', 'Upsilon', 'Phi', 'Psi', 'Omega',
])
const LETTERS: Record<string, string> = {
  α: 'alpha', β: 'beta', γ: 'gamma', δ: 'delta', ε: 'varepsilon', ζ: 'zeta', η: 'eta', θ: 'theta', ι: 'iota', κ: 'kappa', λ: 'lambda', μ: 'mu', ν: 'nu', ξ: 'xi', π: 'pi', ρ: 'rho', σ: 'sigma', τ: 'tau', υ: 'upsilon', φ: 'varphi', χ: 'chi', ψ: 'psi', ω: 'omega', ϕ: 'phi', ϑ: 'vartheta',
  Γ: 'Gamma', Δ: 'Delta', Θ: 'Theta', Λ: 'Lambda', Ξ: 'Xi', Π: 'Pi', Σ: 'Sigma', Υ: 'Upsilon', Φ: 'Phi', Ψ: 'Psi', Ω: 'Omega',
}

/** `L_1`, `R_{\mathrm{load}}`, `\omega_0`, `C_{12}`. */
export function nameLatex(name: string): string {
  const [first = '', ...rest] = name.split('_').filter(part => part !== '')
  if (first === '') return '\\_'
  const numbered = /^(\p{L}+?)(\d+)$/u.exec(first)
  const subscripts = numbered?.[2] !== undefined ? [numbered[2], ...rest] : rest
  const base = baseLatex(numbered?.[1] ?? first)
  if (subscripts.length === 0) return base
  const subscript = subscripts.map(subscriptLatex).join(',')
  return `${base}_${/^[a-zA-Z0-9]$/.test(subscript) ? subscript : `{${subscript}}`}`
}

function baseLatex(base: string): string {
  if (GREEK.has(base)) return `\\${base}`
  const letters = [...base]
  if (letters.length === 1) return letterLatex(base)
  if (/^Delta[A-Za-z]$/.test(base)) return `\\Delta ${base.slice(5)}`
  return `\\mathit{${letters.map(letterLatex).join('')}}`
}

function letterLatex(letter: string): string {
  const greek = LETTERS[letter]
  return greek ? `\\${greek} ` : letter
}

function subscriptLatex(part: string): string {
  if (/^\d+$/.test(part) || /^[A-Za-z]$/.test(part)) return part
  if (GREEK.has(part)) return `\\${part}`
  return `\\mathrm{${[...part].map(letterLatex).join('')}}`
}
