// @ts-check
import withNuxt from './.nuxt/eslint.config.mjs'
import { walls } from './scripts/lint/walls.mjs'

const SAFE_MATH = ['sqrt', 'abs', 'floor', 'ceil', 'round', 'trunc', 'min', 'max', 'sign', 'PI']

/** What differs from one JavaScript engine, clock or locale to another, or reaches outside. */
const impure = [
  { selector: `MemberExpression[object.name='Math'][computed=false]:not([property.name=/^(${SAFE_MATH.join('|')})$/])`, message: `Only Math.${SAFE_MATH.join('/')} give the same bits everywhere; take shared/engine/numeric/math.` },
  { selector: 'MemberExpression[object.name=\'Math\'][computed=true]', message: 'Name the function of Math.' },
  { selector: 'BinaryExpression[operator=\'**\'], AssignmentExpression[operator=\'**=\']', message: '`**` differs between JavaScript engines; multiply, or take pow of shared/engine/numeric/math.' },
  { selector: 'MemberExpression[property.name=/^toLocale/]', message: 'The engine knows no locale.' },
]

export default withNuxt(
  { ignores: ['.build/**', '.data/**', '.test/**', '.bench/**', '**/*.md'] },
  {
    name: 'polewright/all',
    files: ['**/*.{ts,mts,mjs,vue}'],
    linterOptions: { noInlineConfig: true },
    plugins: { polewright: { rules: { walls } } },
    rules: {
      'polewright/walls': 'error',
      'max-lines': ['error', { max: 300 }],
      'max-lines-per-function': ['error', { max: 45, skipBlankLines: true, skipComments: true }],
      'no-console': 'error',
      'vue/max-attributes-per-line': ['error', { singleline: 4 }],
      'vue/multi-word-component-names': 'off',
      '@stylistic/max-statements-per-line': ['error', { max: 2 }],
      '@stylistic/member-delimiter-style': 'off',
      '@stylistic/operator-linebreak': ['error', 'before', { overrides: { '=': 'ignore' } }],
    },
  },
  {
    name: 'polewright/types',
    files: ['**/*.{ts,mts,vue}'],
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/ban-ts-comment': ['error', { 'ts-ignore': true, 'ts-expect-error': true, 'ts-nocheck': true }],
    },
  },
  {
    // A store or a composable is one function that holds its verbs.
    name: 'polewright/closures',
    files: ['stores/**', 'composables/**'],
    rules: { 'max-lines-per-function': ['error', { max: 160, skipBlankLines: true, skipComments: true }] },
  },
  {
    name: 'polewright/engine',
    files: ['shared/engine/**/*.ts'],
    rules: {
      'no-restricted-syntax': ['error', ...impure],
      'no-restricted-globals': ['error', 'Intl', 'Date', 'performance', 'process', 'window', 'document', 'self', 'globalThis', 'fetch', 'setTimeout', 'setInterval', 'crypto'],
    },
  },
  {
    name: 'polewright/long-by-nature',
    files: ['tests/**', 'server/database/migrations/**', 'server/database/seed/**'],
    rules: { 'max-lines': 'off', 'max-lines-per-function': 'off' },
  },
  {
    name: 'polewright/command-line',
    files: ['scripts/**', 'tests/access/**'],
    rules: { 'no-console': 'off' },
  },
)
