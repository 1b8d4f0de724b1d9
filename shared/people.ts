/** What people are called, where they land, and which passwords are refused. */
import { LIMITS } from './limits'
import type { Role } from './types/api'

export const ROLES = ['engineer', 'checker', 'manager', 'client'] as const satisfies readonly Role[]

export const ROLE_LABELS: Record<Role, string> = { engineer: 'Engineer', checker: 'Checker', manager: 'Manager', client: 'Client' }

const HOMES: Record<Role, string> = { engineer: '/work', checker: '/queue', manager: '/board', client: '/issued' }

/** The work list of the role that a person has first. */
export const homeOf = (roles: readonly Role[]): string => HOMES[roles[0] ?? 'client']

/** Two letters that stand for a name: "Ines Varga" is IV, "Ruth de Osei" is RO. */
export function initialsOf(name: string): string {
  const words = name.trim().split(/\s+/).filter(word => /^\p{Lu}/u.test(word))
  const chosen = words.length > 1 ? [words[0]!, words[words.length - 1]!] : words
  return chosen.map(word => [...word][0]!).join('').toUpperCase()
}

const OBVIOUS = ['password', 'passwort', 'polewright', 'qwertyuiop', '123456789', 'letmein', 'iloveyou', 'changeme', 'administrator']

/** Why `password` is refused, in words; null when it is good. Length is what makes a password strong, so nothing else is demanded of its characters. */
export function passwordProblem(password: string, email = ''): string | null {
  const { min, max } = LIMITS.passwordLength
  if (password.length < min) return `Use at least ${min} characters. Several words make a good password.`
  if (password.length > max) return `Use at most ${max} characters.`
  const plain = password.toLowerCase()
  const name = email.split('@')[0]?.toLowerCase() ?? ''
  if (name.length > 3 && plain.includes(name)) return 'Leave your e-mail name out of the password.'
  if (new Set(plain).size < 5) return 'Use more than a few different characters.'
  const rest = OBVIOUS.reduce((text, word) => text.replaceAll(word, ''), plain)
  return rest.length < 6 ? 'That is among the first passwords that anyone would try. Use several words.' : null
}
