/**
 * Labels of revisions. `letters`: P1, P2 … before construction, then A, B, C … without I and O, after Z AA;
 * `numbers`: 0, 1, 2 … Pure.
 */
export type RevisionScheme = 'letters' | 'numbers'

/** I and O are left out: they read as 1 and 0. */
const LETTERS = 'ABCDEFGHJKLMNPQRSTUVWXYZ'

/** The letter label after `label`: A → B, H → J, Z → AA, AZ → BA. */
export function nextLetters(label: string): string {
  const digits = [...label].map(letter => LETTERS.indexOf(letter))
  if (label === '' || digits.includes(-1)) throw new Error(`${label} is not a letter label.`)
  for (let i = digits.length - 1; i >= 0; i--) {
    if (digits[i]! < LETTERS.length - 1) {
      digits[i] = digits[i]! + 1
      return digits.map(digit => LETTERS[digit]).join('')
    }
    digits[i] = 0
  }
  return LETTERS[0] + digits.map(digit => LETTERS[digit]).join('')
}

/** The label of a sheet's first revision. */
export const firstLabel = (scheme: RevisionScheme): string => (scheme === 'letters' ? 'P1' : '0')

/**
 * The label that follows `used`, the labels of all earlier revisions in order, cancelled ones among them: a label is never given twice.
 * Under `letters` the P numbers end once a revision has been issued for construction or as built.
 */
export function nextLabel(scheme: RevisionScheme, used: readonly string[], pastConstruction: boolean): string {
  if (used.length === 0) return firstLabel(scheme)
  if (scheme === 'numbers') {
    const numbers = used.map(Number).filter(Number.isInteger)
    return String(Math.max(-1, ...numbers) + 1)
  }
  const letters = used.filter(label => /^[A-HJ-NP-Z]+$/.test(label))
  if (letters.length > 0) return nextLetters(letters.at(-1)!)
  if (pastConstruction) return 'A'
  const preliminary = used.map(label => /^P([1-9]\d*)$/.exec(label)).filter(match => match !== null).map(match => Number(match[1]))
  return `P${Math.max(0, ...preliminary) + 1}`
}
