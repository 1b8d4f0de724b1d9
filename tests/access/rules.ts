/** One rule for every route file. A route without one fails the check, and so does a rule without its route. */
import type { Rule } from './rule'
import { accounts } from './rules/accounts'
import { projects } from './rules/projects'
import { revisions } from './rules/revisions'

export const RULES: readonly Rule[] = [...accounts, ...projects, ...revisions]
