/** A colleague's caret: a thin bar with the initials over it, in the colour of the margin mark. */
import type { DecorationAttrs } from '@tiptap/pm/view'
import { element } from './dom'
import { text } from '../extensions/attributes'

const COLOUR = /^#[0-9a-f]{6}$/i

/** A colour that came from another browser, or a neutral one. */
export function safeColour(value: unknown): string {
  return typeof value === 'string' && COLOUR.test(value) ? value : '#5d6b70'
}

export function caretElement(user: Record<string, unknown>): HTMLElement {
  const name = text(user.name, 80) || 'A colleague'
  const caret = element('span', { 'class': 'caret', 'data-caret': '', 'title': name }, element('span', { class: 'caret-flag' }, text(user.initials, 4) || name.slice(0, 2)))
  caret.style.setProperty('--person', safeColour(user.color ?? user.colour))
  return caret
}

export function caretSelection(user: Record<string, unknown>): DecorationAttrs {
  return { class: 'caret-selection', style: `--person: ${safeColour(user.color ?? user.colour)}` }
}
