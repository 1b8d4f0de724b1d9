/** Built-in functions as LaTeX. */

const OPERATORS: Record<string, string> = {
  sin: '\\sin', cos: '\\cos', tan: '\\tan', asin: '\\arcsin', acos: '\\arccos', atan: '\\arctan',
  sinh: '\\sinh', cosh: '\\cosh', tanh: '\\tanh', exp: '\\exp', log: '\\ln', log10: '\\log_{10}', log2: '\\log_{2}',
  min: '\\min', max: '\\max', arg: '\\arg', re: '\\operatorname{Re}', im: '\\operatorname{Im}',
}

const ENCLOSING: Record<string, readonly [string, string]> = {
  sqrt: ['\\sqrt{', '}'],
  cbrt: ['\\sqrt[3]{', '}'],
  abs: ['\\left|', '\\right|'],
  floor: ['\\left\\lfloor ', '\\right\\rfloor '],
  ceil: ['\\left\\lceil ', '\\right\\rceil '],
  conj: ['\\overline{', '}'],
}

const WORDS = new Set([
  'magnitude', 'gain', 'phase', 'attenuation', 'band', 'insertionLoss', 'poles', 'zeros',
  'naturalFrequency', 'dampingRatio', 'qualityFactor', 'dampingClass', 'cornerFrequency', 'cutoffFrequency', 'bandwidth',
  'resonanceFrequency', 'resonancePeak', 'highSlope', 'lowSlope', 'stepResponse', 'impulseResponse', 'overshoot', 'riseTime', 'settlingTime',
  'groupDelay', 'gainMargin', 'phaseMargin', 'preferred', 'preferredAbove', 'preferredBelow', 'ratio', 'powerRatio', 'level', 'powerLevel',
  'low', 'high', 'nominal', 'between', 'sign', 'round', 'atan2', 'hypot', 'sum', 'mean',
])

/** Undefined for a function of the sheet's own. */
export function functionLatex(name: string, args: readonly string[]): string | undefined {
  const around = ENCLOSING[name]
  if (around && args.length === 1) return `${around[0]}${args.join('')}${around[1]}`
  if (name === 'parallel' && args.length > 1) return args.join(' \\parallel ')
  if (name === 'log' && args.length === 2) return `\\log_{${args[1]}}\\left(${args[0]}\\right)`
  const operator = OPERATORS[name] ?? (WORDS.has(name) ? `\\operatorname{${spaced(name)}}` : undefined)
  return operator === undefined ? undefined : `${operator}\\left(${args.join(',\\ ')}\\right)`
}

/** `cornerFrequency` in words: the trade writes them apart. */
function spaced(name: string): string {
  return name.replace(/[A-Z]/g, letter => `\\ ${letter.toLowerCase()}`)
}
