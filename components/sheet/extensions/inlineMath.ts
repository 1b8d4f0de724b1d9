import { InputRule, Node } from '@tiptap/core'
import { NodeSelection } from '@tiptap/pm/state'
import { textAttribute } from './attributes'
import { EDIT_EVENT, inlineMathView } from '../views/inlineMathView'
import type { SheetEditorHub } from '~/composables/useSheetEditorHub'

declare module '@tiptap/core' {
  interface Commands<ReturnType> {
    inlineMath: {
      /** Puts an empty formula at the caret and opens it for typing. */
      insertInlineMath: () => ReturnType
    }
  }
}

/** Mathematics within prose; `$…$` typed in prose becomes one. */
export const InlineMath = (hub: SheetEditorHub) => Node.create({
  name: 'inlineMath',
  group: 'inline',
  inline: true,
  atom: true,
  selectable: true,
  addAttributes: () => ({ source: textAttribute('source') }),
  parseHTML: () => [{ tag: 'span[data-inline-math]' }],
  renderHTML: ({ HTMLAttributes }) => ['span', { ...HTMLAttributes, 'data-inline-math': '' }],
  renderText: ({ node }) => `$${node.attrs.source}$`,
  addNodeView: () => inlineMathView(hub),
  addInputRules() {
    return [new InputRule({
      find: /\$([^$\n]{1,500})\$$/,
      handler: ({ state, range, match }) => {
        const source = match[1]?.trim()
        if (source) state.tr.replaceWith(range.from, range.to, this.type.create({ source }))
      },
    })]
  },
  addCommands() {
    return {
      insertInlineMath: () => ({ tr, state, dispatch }) => {
        if (!state.selection.$from.parent.inlineContent || state.selection.$from.parent.type.spec.code || state.selection.$from.parent.type.name === 'reference') return false
        if (!dispatch) return true
        tr.replaceSelectionWith(this.type.create({ source: '' }), false)
        tr.setSelection(NodeSelection.create(tr.doc, tr.selection.from - 1))
        return true
      },
    }
  },
  addKeyboardShortcuts() {
    return {
      'Alt-i': () => this.editor.commands.insertInlineMath(),
      'Enter': ({ editor }) => {
        const { selection } = editor.state
        if (!(selection instanceof NodeSelection) || selection.node.type !== this.type) return false
        editor.view.nodeDOM(selection.from)?.dispatchEvent(new Event(EDIT_EVENT))
        return true
      },
    }
  },
})
