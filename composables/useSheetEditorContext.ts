/** What the blocks of one editor share: its engine, its hub, and what a plot needs to know of the sheet. */
import type { InjectionKey } from 'vue'
import type { SheetEngineClient } from './useEngine'
import type { SheetEditorHub } from './useSheetEditorHub'

export interface SheetEditorContext {
  hub: SheetEditorHub
  engine: SheetEngineClient
  /** Puts a picture into the project and answers its id. */
  upload: (file: File) => Promise<string | null>
}

const KEY: InjectionKey<SheetEditorContext> = Symbol('sheet editor')

export function provideSheetEditor(context: SheetEditorContext): void {
  provide(KEY, context)
}

/** The context of the editor that a block stands in. */
export function useSheetEditorContext(): SheetEditorContext {
  const context = inject(KEY)
  if (!context) throw new Error('A block of a sheet stands only in its editor.')
  return context
}
