import type { Rule } from 'eslint'

export const walls: Rule.RuleModule
