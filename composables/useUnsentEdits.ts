import * as Y from 'yjs'
import type { Ref } from 'vue'
import { unsentEdits, unsentUpdate, type UnsentEdits } from '~~/shared/collab/unsent'
import { keepCopy, keptEpochs } from './collab/keptCopy'

export interface UnsentEditsView {
  /** What this person wrote before a freeze that did not make it into the submission; null when there is nothing. */
  unsent: Readonly<Ref<UnsentEdits | null>>
  /** Looks through the copies that this device keeps. Copies whose every edit was confirmed are removed. */
  look: () => Promise<void>
  /** Puts the edits into a draft of the same revision, as new edits of this person. Only ever called on the person's word. */
  putBack: (draft: Y.Doc) => Promise<void>
  /** Removes them from this device. */
  discard: () => Promise<void>
}

interface Leftover { epoch: number, edits: Omit<UnsentEdits, 'epoch'>, update: Uint8Array, remove: () => Promise<void> }

/** Reads one kept copy; null (and the copy removed) when all in it was confirmed. */
async function readLeftover(revisionId: string, epoch: number, userId: string): Promise<Leftover | null> {
  const doc = new Y.Doc()
  const copy = keepCopy(doc, revisionId, epoch, userId, false)
  await copy.whenRead
  const confirmed = await copy.confirmed()
  const edits = unsentEdits(doc, confirmed, await copy.authors())
  const update = unsentUpdate(doc, confirmed)
  await copy.close()
  doc.destroy()

  const remove = async () => {
    const again = keepCopy(new Y.Doc(), revisionId, epoch, userId, false)
    await again.whenRead
    await again.remove()
  }
  if (edits.blocks.length > 0 || edits.removals > 0) return { epoch, edits, update, remove }
  await remove()
  return null
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
    for (const leftover of gone) await leftover.remove()
  }

  return {
    unsent: shallowReadonly(unsent),
    look: async () => {
      const found: Leftover[] = []
      for (const kept of await keptEpochs(revisionId, epoch, userId)) {
        const leftover = await readLeftover(revisionId, kept, userId)
        if (leftover) found.push(leftover)
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
