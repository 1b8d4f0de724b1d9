/** Runs in the browser: the composable of the sheet page without the page around it. */
import { effectScope } from 'vue'
import * as Y from 'yjs'
import { useSheetDocument, type LiveSheet } from '../../../composables/useSheetDocument'

const page = {
  live: null as LiveSheet | null,
  open(revision: { id: string, epoch: number }, userId: string) {
    page.live = effectScope().run(() => useSheetDocument(revision, userId)) ?? null
  },
  write(text: string) {
    page.live?.ydoc.transact(() => {
      const paragraph = new Y.XmlElement('paragraph')
      paragraph.insert(0, [new Y.XmlText(text)])
      page.live?.ydoc.getXmlFragment('sheet').push([paragraph])
    })
  },
  plain: () => page.live?.ydoc.getXmlFragment('sheet').toString() ?? '',
  kind: () => page.live?.state.value.kind ?? 'none',
  label: () => page.live?.state.value.label ?? '',
  ready: () => page.live?.ready.value ?? false,
  unsent: () => page.live?.unsent.value ?? null,
  kept: async () => (await indexedDB.databases()).map(database => database.name).filter(name => name?.includes('/')).sort(),
}
export type SheetOnly = typeof page

Object.assign(window, { sheetOnly: page })
