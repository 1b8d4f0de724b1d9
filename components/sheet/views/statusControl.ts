/** The small control that says how an input is known: given, assumed, or a hold. */
import { element, mark } from './dom'

const CHOICES = [
  ['', 'mark input'],
  ['given', 'given'],
  ['assumed', 'assumed'],
  ['hold', 'hold'],
] as const

export interface StatusControl {
  dom: HTMLElement
  show: (status: unknown, applies: boolean, editable: boolean) => void
}

export function createStatusControl(choose: (status: string | null) => void): StatusControl {
  const select = element('select', { 'class': 'row-status line-status', 'aria-label': 'How this input is known', 'tabindex': '-1' },
    ...CHOICES.map(([value, label]) => element('option', { value }, label)))
  select.addEventListener('change', () => choose(select.value || null))
  return {
    dom: select,
    show(status, applies, editable) {
      const value = CHOICES.some(([known]) => known === status) ? String(status) : ''
      if (select.value !== value) select.value = value
      mark(select, 'data-status', value)
      select.hidden = !value && !(applies && editable)
      select.disabled = !editable
    },
  }
}
