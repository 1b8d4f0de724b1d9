/** The editor of one sheet, and what follows from each change of text or caret. */
import type { EditorOptions } from '@tiptap/core'
import { Editor } from '@tiptap/vue-3'
import type { Awareness } from 'y-protocols/awareness'
import type { XmlFragment } from 'yjs'
import BlockFigure from '../block/Figure.vue'
import BlockResponse from '../block/Response.vue'
import { sheetExtensions } from './extensions'
import { rowIdAt } from './extensions/place'
import { linesOf } from './linesOf'
import { imageFiles } from './pictures'
import { spokenResult } from './views/output'
import type { SheetEngineClient } from '~/composables/useEngine'
import type { SheetEditorHub } from '~/composables/useSheetEditorHub'
import type { SheetDocument } from '#shared/document/types'

export interface PadEditorOptions {
  fragment: XmlFragment
  awareness: Awareness
  user: { name: string, initials: string, color: string }
  hub: SheetEditorHub
  engine: SheetEngineClient
  editable: () => boolean
  /** Significant digits shown. */
  digits: () => number
  openInsert: () => void
  /** Takes pictures that were pasted or dropped at a position; false where there are none. */
  takePictures: (files: File[], at?: number) => boolean
  onDocument: (document: SheetDocument) => void
  onStand: (row: string | null) => void
}

/** How often at most the whole document is read for the head of the sheet, in milliseconds. */
const DOCUMENT_EVERY = 250

/** The schema is that of a sheet (its round trip is tested), so that its JSON is a sheet's. */
const documentOf = (editor: Editor) => editor.getJSON() as unknown as SheetDocument

function makeEditor(options: PadEditorOptions, events: Partial<EditorOptions>): Editor {
  return new Editor({
    ...events,
    injectCSS: false,
    editable: options.editable(),
    extensions: sheetExtensions({ ...options, responseView: BlockResponse, figureView: BlockFigure }),
    editorProps: {
      attributes: { 'class': 'pad-editor', 'aria-label': 'Sheet', 'aria-multiline': 'true', 'role': 'textbox' },
      handlePaste: (_view, event) => options.takePictures(imageFiles(event.clipboardData)),
      handleDrop: (view, event, _slice, moved) => !moved && options.takePictures(
        imageFiles(event.dataTransfer), view.posAtCoords({ left: event.clientX, top: event.clientY })?.pos),
    },
  })
}

export function usePadEditor(options: PadEditorOptions) {
  const { hub, engine } = options
  const empty = ref(false)
  const spoken = ref('')

  const tellDocument = useThrottleFn((editor: Editor) => {
    if (!editor.isDestroyed) options.onDocument(documentOf(editor))
  }, DOCUMENT_EVERY, true)

  /** Reads out what became of the line one is at, once typing pauses. */
  const speak = useDebounceFn((editor: Editor) => {
    const id = editor.isDestroyed ? null : rowIdAt(editor.state)
    const result = id ? hub.row(id).result : null
    spoken.value = result ? spokenResult(result) : ''
  }, 900)

  function changed(editor: Editor) {
    const { doc } = editor.state
    empty.value = doc.childCount === 0
    engine.evaluate({ lines: linesOf(doc), settings: { significantDigits: options.digits() } })
    void tellDocument(editor)
  }

  function stand(editor: Editor) {
    const row = editor.isFocused ? rowIdAt(editor.state) : null
    hub.standAt(row)
    options.onStand(row)
    void speak(editor)
  }

  const editor = makeEditor(options, {
    onTransaction: ({ editor: at, transaction }) => { if (transaction.docChanged) changed(at as Editor) },
    onSelectionUpdate: ({ editor: at }) => stand(at as Editor),
    onFocus: ({ editor: at }) => stand(at as Editor),
    onBlur: ({ editor: at }) => stand(at as Editor),
  })

  watch(hub.results, () => { void speak(editor) })
  watch(options.editable, (now) => {
    hub.editable.value = now
    editor.setEditable(now)
  }, { immediate: true })
  watch(options.digits, () => changed(editor))
  onMounted(() => changed(editor))
  onBeforeUnmount(() => editor.destroy())

  return { editor, empty: readonly(empty), spoken: readonly(spoken) }
}
