/** The block that a new one would be put below: the one under the pointer, else the one with the caret. */
import type { Editor } from '@tiptap/core'

export interface ActiveBlock {
  pos: number
  /** Its lower edge, in pixels from the top of the pad. */
  bottom: number
}

function lowerEdge(editor: Editor, pos: number, wrapper: HTMLElement): ActiveBlock | null {
  const dom = editor.view.nodeDOM(pos)
  if (!(dom instanceof HTMLElement)) return null
  return { pos, bottom: dom.getBoundingClientRect().bottom - wrapper.getBoundingClientRect().top }
}

/** Position of the top-level block that an element of the editor belongs to. */
function blockOf(editor: Editor, target: Element): number | null {
  const root = editor.view.dom
  let element: Element | null = target
  while (element && element.parentElement !== root) element = element.parentElement
  if (!element) return null
  const index = [...root.children].filter(child => !child.classList.contains('ProseMirror-widget')).indexOf(element)
  const { doc } = editor.state
  if (index < 0 || index >= doc.childCount) return null
  let pos = 0
  for (let i = 0; i < index; i += 1) pos += doc.child(i).nodeSize
  return pos
}

export function useSheetActiveBlock(editor: Editor, wrapper: Readonly<Ref<HTMLElement | null>>) {
  const active = shallowRef<ActiveBlock | null>(null)
  let frame = 0

  function place(pos: number | null) {
    cancelAnimationFrame(frame)
    frame = requestAnimationFrame(() => {
      if (editor.isDestroyed || !wrapper.value) return
      const next = pos === null ? null : lowerEdge(editor, pos, wrapper.value)
      if (next?.pos !== active.value?.pos || next?.bottom !== active.value?.bottom) active.value = next
    })
  }

  /** With a pointer event the block under it, without the block at the caret. */
  function follow(event?: PointerEvent) {
    if (event && event.pointerType !== 'mouse') return
    const target = event?.target
    if (target instanceof Element && target.closest('.pad-insert, .insert-menu')) return
    const hovered = target instanceof Element ? blockOf(editor, target) : null
    if (event && hovered === null) return
    const { $from } = editor.state.selection
    place(hovered ?? (editor.state.doc.childCount === 0 ? null : $from.depth === 0 ? $from.pos : $from.before(1)))
  }
  const atCaret = () => follow()
  editor.on('selectionUpdate', atCaret)
  onBeforeUnmount(() => {
    cancelAnimationFrame(frame)
    editor.off('selectionUpdate', atCaret)
  })

  return { active: shallowReadonly(active), follow }
}
