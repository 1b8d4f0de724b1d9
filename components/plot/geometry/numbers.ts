/** Numbers as they are written on a plot. */

const PREFIXES: readonly [number, string][] = [
  [1e12, 'T'], [1e9, 'G'], [1e6, 'M'], [1e3, 'k'], [1, ''], [1e-3, 'm'], [1e-6, 'µ'], [1e-9, 'n'], [1e-12, 'p'],
]

const trimZeros = (text: string) => text.includes('.') ? text.replace(/\.?0+$/, '') : text
export const withMinus = (text: string) => text.replace('-', '−')

/** `value` with `digits` significant digits and no exponent: 0.001234, 3 → `0.00123`. */
export function plainNumber(value: number, digits = 4): string {
  if (value === 0 || !Number.isFinite(value)) return value === 0 ? '0' : withMinus(String(value))
  const decimals = Math.min(12, Math.max(0, digits - 1 - Math.floor(Math.log10(Math.abs(value)))))
  return withMinus(trimZeros(value.toFixed(decimals)))
}

/** With an SI prefix: 13710, `Hz` → `13.71 kHz`. */
export function engineering(value: number, unit: string, digits = 4): string {
  if (value === 0) return `0 ${unit}`
  const size = Math.abs(value)
  const [factor, prefix] = PREFIXES.find(([one]) => size >= one * (1 - 1e-9)) ?? PREFIXES[PREFIXES.length - 1]!
  return `${plainNumber(value / factor, digits)} ${prefix}${unit}`
}

/** A gain or phase read off a curve: one decimal below 100, none above. */
export const readOff = (value: number) => withMinus(value.toFixed(Math.abs(value) < 99.95 ? 2 : 1))
