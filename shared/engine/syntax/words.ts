/** Words with a meaning of their own. */

/** Functions a line may use (the public vocabulary). */
export const FUNCTION_NAMES: readonly string[] = [
  'magnitude', 'gain', 'phase', 'attenuation', 'band', 'insertionLoss', 'poles', 'zeros',
  'naturalFrequency', 'dampingRatio', 'qualityFactor', 'dampingClass', 'cornerFrequency', 'cutoffFrequency', 'bandwidth',
  'resonanceFrequency', 'resonancePeak', 'highSlope', 'lowSlope',
  'stepResponse', 'impulseResponse', 'overshoot', 'riseTime', 'settlingTime', 'groupDelay', 'gainMargin', 'phaseMargin',
  'parallel', 'preferred', 'preferredAbove', 'preferredBelow',
  'ratio', 'powerRatio', 'level', 'powerLevel', 'low', 'high', 'nominal', 'between',
  'sqrt', 'cbrt', 'abs', 'sign', 'floor', 'ceil', 'round', 'min', 'max', 'exp', 'log', 'log10', 'log2',
  'sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'atan2', 'sinh', 'cosh', 'tanh', 're', 'im', 'arg', 'conj', 'hypot', 'sum', 'mean',
]

const functionSet = new Set(FUNCTION_NAMES)
export function isFunctionName(word: string): boolean {
  return functionSet.has(word)
}

export const CONSTANT_NAMES: readonly string[] = ['pi', 'e', 'i', 's']
const constantSet = new Set(CONSTANT_NAMES)
export function isReserved(word: string): boolean {
  return constantSet.has(word) || functionSet.has(word)
}

/** Words that mathjs reads as operators or constants, and what to write instead. */
export const FORBIDDEN_WORDS: ReadonlyMap<string, string> = new Map([
  ['mod', 'There is no remainder operator; write it out with floor: `a - b*floor(a/b)`.'],
  ['in', 'For the unit write `inch`; to convert write `to`.'],
  ['and', 'Write two requirement lines, or a chain such as `1 V <= x <= 2 V`.'],
  ['or', 'Write two lines, or a choice `condition ? a : b`.'],
  ['xor', 'Write two lines, or a choice `condition ? a : b`.'],
  ['not', 'Turn the comparison round.'],
  ['true', 'Write a comparison, such as `x > 0`.'],
  ['false', 'Write a comparison, such as `x > 0`.'],
  ['null', 'Give it a value.'],
  ['undefined', 'Give it a value.'],
  ['NaN', 'Only finite numbers may be written.'],
  ['Infinity', 'Only finite numbers may be written.'],
  ['end', '`end` has no meaning here; choose another name.'],
])

/** Characters that have no meaning in a line, and what to write instead. */
export const FORBIDDEN_CHARACTERS: ReadonlyMap<string, string> = new Map([
  [';', 'Put each statement on a line of its own.'],
  ['{', 'Use round brackets for grouping and `[a, b]` for a list.'],
  ['}', 'Use round brackets for grouping and `[a, b]` for a list.'],
  ['"', 'Text belongs in the prose beside the line, or after `#`.'],
  ['\'', 'Text belongs in the prose beside the line, or after `#`; a conjugate is `conj(x)`.'],
  ['`', 'Text belongs in the prose beside the line, or after `#`.'],
  ['!', 'There is no factorial; `!=` is not a requirement.'],
  ['&', 'Write two requirement lines, or a chain such as `1 V <= x <= 2 V`.'],
  ['|', 'For a modulus write `abs(x)`; for parallel parts `parallel(a, b)`.'],
  ['~', 'There are no bit operators.'],
  ['\\', 'A division is written `/`.'],
  ['$', 'Names are letters, digits and `_`.'],
  ['@', 'Names are letters, digits and `_`.'],
  ['÷', 'A division is written `/`.'],
  ['√', 'A root is written `sqrt(x)`.'],
  ['∞', 'Only finite numbers may be written.'],
  ['≠', 'A requirement is `<`, `<=`, `>` or `>=`.'],
  ['≈', 'A requirement is `<`, `<=`, `>` or `>=`; a tolerance is `±`.'],
])
