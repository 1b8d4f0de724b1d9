import { afterEach, describe, expect, it } from 'vitest'
import * as Y from 'yjs'
import { Contributor, RevisionUpdate } from '../../server/database'
import { plainText } from '../../shared/collab/unsent'
import { createDraft, storedDocument } from './support/drafts'
import { closePages, openPage } from './support/sheet'

afterEach(closePages)

const stored = async (revisionId: string) => (await storedDocument(revisionId)).getXmlFragment('sheet').toString()

describe('two people in one draft', () => {
  it('see each other’s edits, and what is called saved is in the log', async () => {
    const draft = await createDraft()
    const [ines, tomas] = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all([ines!.saved(), tomas!.saved()])
    expect(ines!.plain()).toContain('R = 47 ohm')

    ines!.write('from Ines')
    tomas!.write('from Tomas')
    await Promise.all([ines!.saved(), tomas!.saved(), ines!.shows('from Tomas'), tomas!.shows('from Ines')])
    expect(ines!.state().kind).toBe('saved')
    expect(ines!.plain()).toBe(tomas!.plain())
    expect(await stored(draft.revisionId)).toBe(ines!.plain())
  })

  it('keep both their characters in one line', async () => {
    const draft = await createDraft()
    const [ines, tomas] = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all([ines!.saved(), tomas!.saved()])
    const line = (page: typeof ines) => page!.texts().find(text => plainText(text).includes('47 ohm'))!
    line(ines).insert(0, 'abc')
    line(tomas).insert(10, 'xyz')
    await Promise.all([ines!.shows('xyz'), tomas!.shows('abc'), ines!.saved(), tomas!.saved()])
    expect(plainText(line(ines))).toBe('abcR = 47 ohmxyz')
    expect(await stored(draft.revisionId)).toBe(tomas!.plain())
  })
})

describe('an edit', () => {
  it('that only deletes is acknowledged and stored', async () => {
    const draft = await createDraft(1)
    const page = await openPage(draft.author, draft)
    await page.saved()
    const before = page.sheet.facts().upTo
    page.fragment.delete(0, 1)
    const facts = await page.facts.wait(({ upTo }) => upTo > before, 'the deletion is committed')
    expect(facts.upTo).toBe(facts.sent)
    expect(await stored(draft.revisionId)).not.toContain('Input filter')
  })

  it('made offline comes back, deletions among them', async () => {
    const draft = await createDraft(2)
    const page = await openPage(draft.author, draft)
    await page.saved()
    page.disconnect()
    page.write('written on the train')
    page.fragment.delete(0, 1)
    expect(page.state().kind).toBe('offline')

    page.sheet.connect()
    await page.saved()
    const after = await stored(draft.revisionId)
    expect(after).toContain('written on the train')
    expect(after).not.toContain('Input filter')
  })

  it('made between opening and the server’s question is not lost', async () => {
    const draft = await createDraft(1)
    const first = await openPage(draft.author, draft)
    await first.saved()
    first.disconnect()
    first.write('one')
    // The provider sends this at once, ahead of its answer, and it builds on what only the answer brings.
    first.sheet.provider.once('status', () => undefined)
    first.sheet.provider.on('status', ({ status }) => {
      if (status === 'connected') first.write('two')
    })
    first.sheet.connect()
    await first.saved()
    const after = await stored(draft.revisionId)
    expect(after.indexOf('one')).toBeGreaterThan(0)
    expect(after.indexOf('two')).toBeGreaterThan(after.indexOf('one'))
  })

  it('makes its author a contributor in the same moment; one who only reads stays none', async () => {
    const draft = await createDraft(2)
    const [author, reader] = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all([author!.saved(), reader!.saved()])
    const of = (userId: string) => Contributor.findOne({ where: { revisionId: draft.revisionId, userId } })
    expect((await of(draft.author.id))?.inherited).toBe(true)

    author!.write('mine')
    await Promise.all([author!.saved(), reader!.shows('mine')])
    expect((await of(draft.author.id))?.inherited).toBe(false)
    expect(await of(draft.members[1]!.id)).toBeNull()
  })
})

describe('the log', () => {
  it('numbers its rows without gaps, whoever writes', async () => {
    const draft = await createDraft(3)
    const pages = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all(pages.map(page => page.saved()))
    for (let i = 0; i < 20; i++) pages[i % 3]!.write(`row ${i}`)
    await Promise.all(pages.map(page => page.saved()))
    const rows = await RevisionUpdate.findAll({ where: { revisionId: draft.revisionId }, order: [['seq', 'ASC']] })
    expect(rows.map(row => row.seq)).toEqual(rows.map((_, i) => i + 1))
    const authors = new Set(rows.slice(1).map(row => row.userId))
    expect(authors.size).toBe(3)
  })

  it('holds each edit under its own author’s name', async () => {
    const draft = await createDraft(2)
    const [ines, tomas] = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all([ines!.saved(), tomas!.saved()])
    ines!.write('by Ines')
    await Promise.all([ines!.saved(), tomas!.shows('by Ines')])
    // Coming again brings the whole document up, with what others wrote in it.
    tomas!.disconnect()
    tomas!.sheet.connect()
    await tomas!.saved()
    const rows = await RevisionUpdate.findAll({ where: { revisionId: draft.revisionId, userId: draft.members[1]!.id } })
    expect(rows).toHaveLength(0)
    expect(Y.parseUpdateMeta(new Uint8Array((await RevisionUpdate.findOne({ where: { revisionId: draft.revisionId, userId: draft.members[0]!.id }, order: [['seq', 'DESC']] }))!.bytes)).from.has(ines!.ydoc.clientID)).toBe(true)
  })
})
