/**
 * The row in hand on a sheet that is read, not edited: chosen by pointer or by going from line to line.
 * The focus goes along, onto the row's tick where it has one.
 */
export function useRowInHand(order: Ref<readonly string[]>) {
  const selected = ref<string | null>(null)

  /** A row's id, or an event from inside a row. */
  function select(from: string | Event | null) {
    if (from === null || typeof from === 'string') selected.value = from
    else if (from.target instanceof Element) selected.value = from.target.closest('[data-row]')?.getAttribute('data-row') ?? selected.value
  }

  /** Goes `by` rows on, staying on the sheet. */
  function next(by: 1 | -1) {
    const at = selected.value === null ? -1 : order.value.indexOf(selected.value)
    const to = at < 0 ? (by === 1 ? 0 : order.value.length - 1) : Math.min(Math.max(at + by, 0), order.value.length - 1)
    selected.value = order.value[to] ?? null
    nextTick(reach)
  }

  function reach() {
    const row = document.querySelector(`[data-row="${CSS.escape(selected.value ?? '')}"]`)
    if (!(row instanceof HTMLElement)) return
    row.scrollIntoView({ block: 'nearest' })
    const tick = row.querySelector('[data-tick]')
    if (tick instanceof HTMLElement) return tick.focus({ preventScroll: true })
    row.tabIndex = -1
    row.focus({ preventScroll: true })
  }

  return { selected: readonly(selected), select, next }
}
