/** Everything that makes the editor of a sheet, in one list. */
import type { Extensions } from '@tiptap/core'
import { Collaboration } from '@tiptap/extension-collaboration'
import { CollaborationCaret } from '@tiptap/extension-collaboration-caret'
import { StarterKit } from '@tiptap/starter-kit'
import type { Awareness } from 'y-protocols/awareness'
import type { XmlFragment } from 'yjs'
import type { Component } from 'vue'
import { Blocks } from './blocks'
import { Figure, Response } from './atoms'
import { Identity, OnlyRead } from './identity'
import { InlineMath } from './inlineMath'
import { LineKeys } from './lineKeys'
import { lineExtensions } from './lines'
import { PasteLines } from './pasteLines'
import { proseExtensions, SheetRoot } from './prose'
import { caretElement, caretSelection } from '../views/caret'
import type { SheetEditorHub } from '~/composables/useSheetEditorHub'

export interface SheetExtensionOptions {
  hub: SheetEditorHub
  fragment: XmlFragment
  awareness: Awareness
  /** Name, initials and colour under which colleagues see the caret. */
  user: Record<string, string>
  responseView: Component
  figureView: Component
  openInsert: () => void
}

/** Nodes and marks only: what a document may hold. */
export function documentExtensions(hub: SheetEditorHub, views: { response: Component, figure: Component }): Extensions {
  return [
    SheetRoot,
    StarterKit.configure({
      document: false, heading: false, paragraph: false, bulletList: false, orderedList: false, listItem: false, listKeymap: false, link: false,
      undoRedo: false, trailingNode: false, blockquote: false, code: false, codeBlock: false, horizontalRule: false, strike: false, underline: false,
    }),
    ...proseExtensions(hub),
    ...lineExtensions(hub),
    Response(views.response),
    Figure(views.figure),
    InlineMath(hub),
  ]
}

export function sheetExtensions(options: SheetExtensionOptions): Extensions {
  return [
    ...documentExtensions(options.hub, { response: options.responseView, figure: options.figureView }),
    Identity,
    OnlyRead,
    LineKeys,
    PasteLines,
    Blocks.configure({ openInsert: options.openInsert }),

    Collaboration.configure({ fragment: options.fragment }),
    CollaborationCaret.configure({
      provider: { awareness: options.awareness },
      user: options.user,
      render: caretElement,
      selectionRender: caretSelection,
    }),
  ]
}
