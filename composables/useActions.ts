/**
 * Actions: everything that can be done on the page, each with its name and its key.
 * A component offers its actions while it is mounted; the list (Alt+M) shows them all, and their keys work without it.
 */
export interface Action {
  id: string
  label: string
  group?: string
  /** Written as it is shown: `Ctrl+Enter`, `Alt+N`, `T`. Single letters do not fire while someone is typing. */
  keys?: string
  /** The reason why it cannot be done now, in words. */
  why?: string | null
  run: () => void
}

const offers = shallowRef<readonly (() => readonly Action[])[]>([])
const opened = ref(false)

const isTyping = (target: EventTarget | null) =>
  target instanceof HTMLElement && (target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName))

/** Whether a key press is the one written as `keys`. */
export function pressMatches(event: KeyboardEvent, keys: string): boolean {
  const parts = keys.split('+')
  const key = parts.pop() ?? ''
  const plain = key.length === 1
  const pressed = plain && event.code === `Key${key.toUpperCase()}` ? key.toUpperCase() : event.key
  return event.altKey === parts.includes('Alt')
    && (event.ctrlKey || event.metaKey) === parts.includes('Ctrl')
    && (event.shiftKey === parts.includes('Shift') || (plain && !/[a-z]/i.test(key)))
    && (plain ? pressed.toUpperCase() === key.toUpperCase() : pressed === key)
}

/**
 * Offers the actions of `list` until the component leaves. The getter is read each time, so reasons and labels stay true.
 * Those `everywhere` stand below the ones of the page, which are what one usually looks for.
 */
export function useActions(list: () => readonly Action[], { everywhere = false } = {}) {
  onMounted(() => { offers.value = everywhere ? [...offers.value, list] : [list, ...offers.value] })
  onBeforeUnmount(() => { offers.value = offers.value.filter(offer => offer !== list) })
}

/** The list itself, for the layout: what is offered now, whether it is open, and the handler of keys. */
export function useActionList() {
  const actions = computed(() => offers.value.flatMap(offer => [...offer()]))

  function onKey(event: KeyboardEvent) {
    if (event.defaultPrevented || event.isComposing) return
    if (pressMatches(event, 'Alt+M')) {
      event.preventDefault()
      opened.value = !opened.value
      return
    }
    if (opened.value || document.querySelector('[role="dialog"]')) return
    const action = actions.value.find(one => one.keys && pressMatches(event, one.keys) && (one.keys.includes('+') || !isTyping(event.target)))
    if (!action || action.why) return
    event.preventDefault()
    action.run()
  }

  return { actions, opened, onKey }
}
