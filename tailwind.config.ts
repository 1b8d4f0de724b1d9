import type { Config } from 'tailwindcss'

/** Every colour is a variable of assets/css/tokens.css, so that both variants come from one place. */
const inks = ['desk', 'bar', 'paper', 'raised', 'head', 'slip', 'well', 'marked', 'edge', 'rule', 'hair', 'column', 'control', 'ink', 'soft', 'accent', 'accent-deep', 'on-accent', 'pencil', 'graphite', 'reply', 'ok', 'warn']

export default {
  darkMode: ['selector', '[data-theme="dark"]'],
  content: [
    './components/**/*.vue',
    './layouts/**/*.vue',
    './pages/**/*.vue',
    './composables/**/*.ts',
    './plugins/**/*.ts',
    './app.vue',
    './error.vue',
  ],
  theme: {
    extend: {
      colors: Object.fromEntries(inks.map(name => [name, `var(--${name})`])),
      fontFamily: {
        sans: ['Barlow', 'system-ui', 'sans-serif'],
        title: ['"Barlow Semi Condensed"', 'Barlow', 'sans-serif'],
        mono: ['"JetBrains Mono"', 'ui-monospace', 'monospace'],
      },
      screens: { desk: '801px' },
      boxShadow: { sheet: 'var(--shadow-sheet)', lift: 'var(--shadow-lift)' },
    },
  },
} satisfies Config
