/** Initials in the margin of a row, and the place where slips hang; the same for lines and prose. */
import { element, mark } from './dom'
import type { RowState, SheetEditorHub } from '~/composables/useSheetEditorHub'

/** Follows one id of the hub; `follow` moves to another id after a split or a paste. */
export interface RowLink {
  follow: (id: string) => void
  destroy: () => void
}

/** Keeps `refresh` called with the state of whichever id the row bears now. */
export function linkRow(hub: SheetEditorHub, slot: HTMLElement, refresh: (state: RowState) => void): RowLink {
  let current = ''
  let leave = () => {}
  const release = () => {
    leave()
    if (hub.slots.get(current) === slot) hub.slots.delete(current)
  }
  return {
    follow(id) {
      if (id === current && id !== '') return
      release()
      current = id
      leave = hub.subscribe(id, () => refresh(hub.row(id)))
      if (id) hub.slots.set(id, slot)
      refresh(hub.row(id))
    },
    destroy: release,
  }
}

/** Initials of the colleagues at a row, one under another; the row with one's own caret is marked. */
export function showPeople(row: HTMLElement, host: HTMLElement, state: RowState): void {
  mark(row, 'data-here', state.here ? 'true' : null)
  host.replaceChildren(...state.people.map((person) => {
    const initials = element('span', { class: 'row-person', title: `${person.name} is here` }, person.initials)
    initials.style.setProperty('--person', person.colour)
    return initials
  }))
  mark(host, 'aria-label', state.people.length ? `Here: ${state.people.map(person => person.name).join(', ')}` : null)
}
