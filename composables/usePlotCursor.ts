/**
 * Reading values off a curve: by pointer, or by arrow keys (Shift for larger steps, Home, End,
 * and Up or Down to the next called-out point). Escape puts the cursor away.
 */
export function usePlotCursor(options: {
  /** Points on the curve. */
  count: () => number
  /** Indices of the called-out points, ascending. */
  marks: () => readonly number[]
  /** Index under a place in the drawing, px from its left. */
  indexAt: (x: number) => number
  /** Width in which the drawing was made, px. */
  width: () => number
}) {
  const index = ref<number | null>(null)
  const clamp = (value: number) => Math.min(Math.max(0, value), options.count() - 1)

  function toMark(direction: 1 | -1) {
    const from = index.value ?? -1
    const marks = options.marks()
    const next = direction === 1 ? marks.find(one => one > from) : [...marks].reverse().find(one => one < from)
    index.value = next ?? (direction === 1 ? options.count() - 1 : 0)
  }

  function onKeydown(event: KeyboardEvent) {
    if (event.altKey || event.ctrlKey || event.metaKey) return
    const step = event.shiftKey ? 10 : 1
    const here = index.value ?? -1
    switch (event.key) {
      case 'ArrowRight': index.value = clamp(here + step); break
      case 'ArrowLeft': index.value = clamp(here - step); break
      case 'ArrowUp': toMark(1); break
      case 'ArrowDown': toMark(-1); break
      case 'PageUp': index.value = clamp(here + 10); break
      case 'PageDown': index.value = clamp(here - 10); break
      case 'Home': index.value = 0; break
      case 'End': index.value = options.count() - 1; break
      case 'Escape': index.value = null; break
      default: return
    }
    event.preventDefault()
    event.stopPropagation()
  }

  function onPointer(event: PointerEvent) {
    const box = (event.currentTarget as Element).getBoundingClientRect()
    index.value = clamp(options.indexAt((event.clientX - box.left) * options.width() / box.width))
  }

  const leave = () => { index.value = null }
  return { index: readonly(index), onKeydown, onPointer, leave }
}
