import * as Y from 'yjs'
import { shallowReadonly, shallowRef, type Ref } from 'vue'
import { unsentEdits, unsentUpdate, type UnsentEdits } from '~~/shared/collab/unsent'
import { keepCopy, keptEpochs, removeCopy } from './collab/keptCopy'

export interface UnsentEditsView {
  /** What this person wrote before a freeze that did not make it into the submission; null when there is nothing. */
  unsent: Readonly<Ref<UnsentEdits | null>>
  /**
   * Looks through the copies that this device keeps. Copies whose every edit arrived are removed.
   * @param draft the document as the server holds it, when the revision is a draft again
   */
  look: (draft?: Y.Doc | null) => Promise<void>
  /** Puts the edits into a draft of the same revision, as new edits of this person. Only ever called on the person's word. */
  putBack: (draft: Y.Doc) => Promise<void>
  /** Removes them from this device. */
  discard: () => Promise<void>
}

interface Leftover { epoch: number, edits: Omit<UnsentEdits, 'epoch'>, update: Uint8Array }

/**
 * Reads one kept copy; null when nothing in it is unsent.
 * @param draft what the server holds now, if it is here; else what it had confirmed last decides
 */
async function readLeftover(revisionId: string, epoch: number, userId: string, draft: Y.Doc | null): Promise<Leftover | null> {
  const doc = new Y.Doc()
  const copy = keepCopy(doc, revisionId, epoch, userId, false)
  await copy.whenRead
  const since = draft ? Y.snapshot(draft) : await copy.confirmed()
  const edits = unsentEdits(doc, since, await copy.authors())
  const update = unsentUpdate(doc, since)
  await copy.close()
  doc.destroy()
  return edits.blocks.length > 0 || edits.removals > 0 ? { epoch, edits, update } : null
}

/**
 * Edits of this person that a freeze left behind on this device. Browser only.
 * @param epoch the revision's epoch now; copies of earlier ones are looked at
 */
export function useUnsentEdits(revisionId: string, epoch: number, userId: string): UnsentEditsView {
  const unsent = shallowRef<UnsentEdits | null>(null)
  let leftovers: Leftover[] = []

  function show() {
    const last = leftovers.at(-1)
    unsent.value = last
      ? {
          epoch: last.epoch,
          blocks: leftovers.flatMap(leftover => leftover.edits.blocks),
          removals: leftovers.reduce((sum, leftover) => sum + leftover.edits.removals, 0),
        }
      : null
  }

  async function discard() {
    const gone = leftovers
    leftovers = []
    show()
    for (const leftover of gone) await removeCopy(revisionId, leftover.epoch, userId, true)
  }

  return {
    unsent: shallowReadonly(unsent),
    look: async (draft = null) => {
      const found: Leftover[] = []
      for (const kept of await keptEpochs(revisionId, epoch, userId)) {
        const leftover = await readLeftover(revisionId, kept, userId, draft)
        if (leftover) found.push(leftover)
        else await removeCopy(revisionId, kept, userId, false)
      }
      leftovers = found
      show()
    },
    putBack: async (draft) => {
      for (const leftover of leftovers) Y.applyUpdate(draft, leftover.update, 'put-back')
      await discard()
    },
    discard,
  }
}
