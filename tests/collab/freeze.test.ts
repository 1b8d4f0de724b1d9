import { afterEach, describe, expect, it } from 'vitest'
import * as Y from 'yjs'
import { Revision, RevisionDoc, RevisionUpdate } from '../../server/database'
import { CLOSE } from '../../shared/collab/messages'
import { unsentEdits, unsentUpdate } from '../../shared/collab/unsent'
import { createDraft, freeze, storedDocument } from './support/drafts'
import { closePages, openPage } from './support/sheet'
import { expectAllSaved, randomFrom, Writer } from './support/tokens'

afterEach(closePages)

describe('a freeze', () => {
  it.each([1, 2, 3, 4, 5])('amid writing lets nothing in after it, and all that was called saved was before it (seed %i)', async (seed) => {
    const draft = await createDraft(3)
    const pages = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all(pages.map(page => page.saved()))
    const random = randomFrom(seed)
    const writers = pages.map((page, i) => new Writer(page, `w${i}-`, random))
    for (const writer of writers) writer.page.facts.wait(() => (writer.note(), false), '').catch(() => undefined)

    for (let i = 0; i < 40; i++) writers[i % 3]!.step()
    await pages[0]!.facts.wait(({ upTo }) => upTo > 3, 'some of it is committed')
    const frozen = freeze(draft.revisionId)
    for (let i = 0; i < 40; i++) {
      writers[i % 3]!.step()
      if (i % 10 === 0) await RevisionDoc.count()
    }
    const nextSeq = await frozen
    await Promise.all(pages.map(page => page.facts.wait(({ closed }) => closed === CLOSE.frozen, 'closed as frozen')))

    expect(await RevisionUpdate.count({ where: { revisionId: draft.revisionId } })).toBe(nextSeq - 1)
    const submitted = (await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()
    expectAllSaved(submitted, writers)
    expect(writers.some(writer => writer.saved.size > 0)).toBe(true)
    expect(writers.some(writer => writer.saved.size < writer.written.length)).toBe(true)
    for (const page of pages) expect(page.state().kind).toBe('frozen')
  })

  it('leaves unsent edits with their author, who can put them into the draft that comes back', async () => {
    const draft = await createDraft(2)
    const [ines, tomas] = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all([ines!.saved(), tomas!.saved()])
    ines!.write('sent in time')
    await ines!.saved()
    const confirmed = Y.snapshot(ines!.ydoc)
    ines!.disconnect()
    ines!.write('typed offline')
    ines!.texts().find(text => text.toJSON() === 'R = 47 ohm')!.insert(4, '(')
    ines!.fragment.delete(0, 1)
    await freeze(draft.revisionId)
    ines!.sheet.connect()
    await ines!.facts.wait(({ closed }) => closed === CLOSE.frozen, 'frozen')

    const authors = new Set([ines!.ydoc.clientID])
    expect(unsentEdits(ines!.ydoc, confirmed, authors)).toEqual({
      blocks: [
        { blockId: 'b1', lineId: 'l1', kind: 'calculation', text: 'R = (47 ohm' },
        { blockId: null, lineId: null, kind: 'paragraph', text: 'typed offline' },
      ],
      removals: 1,
    })
    expect((await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()).not.toContain('typed offline')

    // Returned: the same document under a new epoch. Nothing comes in by itself.
    await Revision.update({ state: 'draft' }, { where: { id: draft.revisionId } })
    await RevisionDoc.update({ state: 'draft' }, { where: { revisionId: draft.revisionId } })
    const again = await openPage(draft.author, { ...draft, epoch: 2 })
    await again.saved()
    expect(again.plain()).not.toContain('typed offline')
    Y.applyUpdate(again.ydoc, unsentUpdate(ines!.ydoc, confirmed), 'put-back')
    await again.saved()
    const stored = (await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()
    expect(stored).toContain('typed offline')
    expect(stored).toContain('R = (47 ohm')
    expect(stored).not.toContain('Input filter')
    expect(again.sheet.facts().refused).toBeNull()
  })

  it('closes the pages that the same process told of it', async () => {
    const draft = await createDraft(1)
    const page = await openPage(draft.author, draft)
    await page.saved()
    await freeze(draft.revisionId)
    page.write('one letter later')
    expect((await page.facts.wait(({ closed }) => closed !== null, 'closed')).closed).toBe(CLOSE.frozen)
    expect(await RevisionUpdate.count({ where: { revisionId: draft.revisionId } })).toBe(1)
  })
})
