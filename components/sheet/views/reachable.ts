/** A formula too long for its column scrolls; it can then be reached by keyboard, and only then. */
const observer = import.meta.client
  ? new ResizeObserver(entries => entries.forEach(entry => mark(entry.target as HTMLElement)))
  : null

function mark(box: HTMLElement): void {
  const scrolls = box.scrollWidth > box.clientWidth + 1
  if (scrolls === box.hasAttribute('tabindex')) return
  if (!scrolls) {
    for (const name of ['tabindex', 'role', 'aria-label']) box.removeAttribute(name)
    return
  }
  box.tabIndex = 0
  box.setAttribute('role', 'group')
  box.setAttribute('aria-label', 'Formula, scrolls')
}

/** Marks the box now and whenever its width changes; call it again after its content changed. */
export function keepReachable(box: HTMLElement): void {
  mark(box)
  observer?.observe(box)
}

export const releaseReachable = (box: HTMLElement): void => observer?.unobserve(box)
