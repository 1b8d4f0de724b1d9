import { afterEach, describe, expect, it } from 'vitest'
import * as encoding from 'lib0/encoding'
import * as Y from 'yjs'
import { RevisionUpdate } from '../../server/database'
import { CLOSE, MESSAGE_AWARENESS, SYNC_UPDATE } from '../../shared/collab/messages'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { createDraft, storedDocument, type Draft } from './support/drafts'
import { answer, closeRaw, EMPTY_UPDATE, frame, openRaw, openReady, question, update } from './support/raw'
import { closePages, openPage } from './support/sheet'

afterEach(() => {
  closePages()
  closeRaw()
})

const rows = (draft: Draft) => RevisionUpdate.count({ where: { revisionId: draft.revisionId } })

/** Updates that a document of its own emits while `work` is done to it. */
function updatesOf(doc: Y.Doc, work: () => void): Uint8Array[] {
  const emitted: Uint8Array[] = []
  const collect = (bytes: Uint8Array) => emitted.push(bytes)
  doc.on('update', collect)
  work()
  doc.off('update', collect)
  return emitted
}

const paragraph = (text: string) => {
  const element = new Y.XmlElement('paragraph')
  element.insert(0, [new Y.XmlText(text)])
  return element
}

/** One struct of an update: a run of deleted content (GC) under any client id. */
function gcUpdate(client: number, clock: number, length: number): Uint8Array {
  const encoder = encoding.createEncoder()
  for (const number of [1, 1, client, clock]) encoding.writeVarUint(encoder, number)
  encoding.writeUint8(encoder, 0)
  encoding.writeVarUint(encoder, length)
  encoding.writeVarUint(encoder, 0)
  return encoding.toUint8Array(encoder)
}

/** The others go on as if nothing had been. */
async function othersGoOn(draft: Draft, work: () => Promise<unknown>) {
  const colleague = await openPage(draft.members[1]!, draft)
  await colleague.saved()
  await work()
  colleague.write('undisturbed')
  await colleague.saved()
  expect(colleague.sheet.facts().closed).toBeNull()
  expect((await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()).toBe(colleague.plain())
}

describe('frames that are none', () => {
  it.each([
    ['nothing', new Uint8Array()],
    ['an unknown type', new Uint8Array([9, 1, 2])],
    ['an own message of the server’s', new Uint8Array([64, 2, 123, 125])],
    ['an unknown kind of sync', new Uint8Array([0, 7, 1, 0])],
    ['a length beyond the end', new Uint8Array([0, 2, 255, 255, 3, 1])],
    ['bytes after the end', new Uint8Array([0, 2, 2, 0, 0, 1])],
    ['an update that is none', frame(SYNC_UPDATE, new Uint8Array([1, 255, 255, 255, 255, 15, 1, 2, 3]))],
    ['a state vector that is none', question().slice(0, 2).length ? new Uint8Array([0, 0, 1, 200]) : new Uint8Array()],
    ['awareness that is none', new Uint8Array([MESSAGE_AWARENESS, 4, 1, 5, 1, 200])],
  ])('%s closes 4400 and leaves no trace', async (_what, bytes) => {
    const draft = await createDraft(2)
    await othersGoOn(draft, async () => {
      const { raw } = await openReady(draft.author, draft)
      raw.send(bytes)
      await raw.closedWith(CLOSE.malformed)
    })
    expect(await rows(draft)).toBe(2)
  })

  it('text closes 4400', async () => {
    const draft = await createDraft(1)
    const { raw } = await openReady(draft.author, draft)
    raw.send('hello')
    await raw.closedWith(CLOSE.malformed)
  })

  it('mutated and truncated ones neither stop the server nor damage the document', async () => {
    const draft = await createDraft(2)
    let seed = 20260401
    const random = (below: number) => {
      seed = (Math.imul(seed, 1103515245) + 12345) & 0x7fffffff
      return seed % below
    }
    await othersGoOn(draft, async () => {
      for (let round = 0; round < 60; round++) {
        const { raw, doc } = await openReady(draft.author, draft)
        const [good] = updatesOf(doc, () => doc.getXmlFragment('sheet').insert(random(2), [paragraph(`round ${round}`)]))
        const bytes = update(good!).slice()
        for (let i = 0; i <= random(4); i++) bytes[2 + random(bytes.length - 2)] = random(256)
        raw.send(random(4) === 0 ? bytes.slice(0, random(bytes.length)) : bytes)
        // Taken, asked for more, or refused: the socket answers one way or the other.
        raw.send(new Uint8Array([9]))
        await raw.closedWith(CLOSE.malformed, CLOSE.noRight, CLOSE.refused)
        raw.close()
      }
    })
    const stored = await storedDocument(draft.revisionId)
    expect(stored.store.pendingStructs).toBeNull()
    expect(stored.getXmlFragment('sheet').toString()).toContain('undisturbed')
  })
})

describe('updates that do what they may not', () => {
  it('writing under another person’s client id', async () => {
    const draft = await createDraft(2)
    const victim = await openPage(draft.author, draft)
    await victim.saved()
    victim.write('mine')
    await victim.saved()
    const { raw, doc } = await openReady(draft.members[1]!, draft)
    doc.clientID = victim.ydoc.clientID
    const [forged] = updatesOf(doc, () => doc.getXmlFragment('sheet').insert(0, [paragraph('forged')]))
    raw.send(update(forged!))
    await raw.refusedWith('not_yours')
    await raw.closedWith(CLOSE.noRight)

    const gap = await openReady(draft.members[1]!, draft)
    gap.raw.send(update(gcUpdate(victim.ydoc.clientID, Y.getState(victim.ydoc.store, victim.ydoc.clientID), 50)))
    await gap.raw.closedWith(CLOSE.noRight)

    victim.write('and mine still')
    await victim.saved()
    const stored = (await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()
    expect(stored).toContain('and mine still')
    expect(stored).not.toContain('forged')
  })

  it('taking a client id first does not take it from the one who comes with it later', async () => {
    const draft = await createDraft(2)
    const first = await openReady(draft.author, draft)
    const [bytes] = updatesOf(first.doc, () => first.doc.getXmlFragment('sheet').insert(0, [paragraph('first')]))
    first.raw.send(update(bytes!))
    await first.raw.done(2)
    // The same id under another name, also after the server has forgotten the room.
    const second = await openReady(draft.members[1]!, draft)
    second.raw.send(update(gcUpdate(first.doc.clientID, Y.getState(first.doc.store, first.doc.clientID), 3)))
    await second.raw.closedWith(CLOSE.noRight)
    expect(await rows(draft)).toBe(2)
  })

  it.each([
    ['a clock beyond all writing', () => gcUpdate(77, 0, COLLABORATION_LIMITS.clock + 1), 'malformed'],
    ['another shared type', () => updatesOf(new Y.Doc(), () => undefined).concat(Y.encodeStateAsUpdate(withMap()))[0]!, 'not_sheet'],
    ['a picture in the document itself', () => Y.encodeStateAsUpdate(withBinary()), 'not_sheet'],
    ['elements too deep', () => Y.encodeStateAsUpdate(nested(COLLABORATION_LIMITS.depth + 2)), 'too_deep'],
    ['elements so deep that reading them overflows', () => Y.encodeStateAsUpdate(nested(4000)), 'too_deep'],
  ])('%s', async (_what, make, code) => {
    const draft = await createDraft(2)
    await othersGoOn(draft, async () => {
      const { raw } = await openReady(draft.author, draft)
      raw.send(update(make()))
      await raw.refusedWith(code)
      await raw.closedWith(CLOSE.malformed, CLOSE.refused)
    })
    expect(await rows(draft)).toBe(2)
  })

  it('a gap is asked for once; the second one ends the connection, and none is kept', async () => {
    const draft = await createDraft(2)
    await othersGoOn(draft, async () => {
      const { raw, doc } = await openReady(draft.author, draft)
      const [, second, third] = updatesOf(doc, () => ['a', 'b', 'c'].forEach(text => doc.getXmlFragment('sheet').insert(0, [paragraph(text)])))
      raw.send(update(second!))
      await raw.asked(2)
      raw.send(update(third!))
      raw.send(answer(third!))
      await raw.closedWith(CLOSE.malformed)
      expect(raw.heard.upTo).toBe(1)
    })
    expect((await storedDocument(draft.revisionId)).store.pendingStructs).toBeNull()
    expect(await rows(draft)).toBe(2)
  })

  it('a gap that the answer fills is done with it', async () => {
    const draft = await createDraft(1)
    const { raw, doc } = await openReady(draft.author, draft)
    const [, second] = updatesOf(doc, () => ['a', 'b'].forEach(text => doc.getXmlFragment('sheet').insert(0, [paragraph(text)])))
    raw.send(update(second!))
    await raw.asked(2)
    raw.send(answer(Y.encodeStateAsUpdate(doc)))
    expect((await raw.done(3)).closed).toBeNull()
    expect((await storedDocument(draft.revisionId)).getXmlFragment('sheet').toString()).toBe(doc.getXmlFragment('sheet').toString())
  })

  it('holding a flood back before the answer ends the connection', async () => {
    const draft = await createDraft(1)
    const raw = await openRaw(draft.author, draft)
    await raw.asked()
    const doc = new Y.Doc()
    const [big] = updatesOf(doc, () => doc.getXmlFragment('sheet').insert(0, [paragraph('x'.repeat(300_000))]))
    for (let i = 0; i < 5; i++) raw.send(update(big!))
    await raw.closedWith(CLOSE.slowDown)
    expect(await rows(draft)).toBe(1)
  })

  it('a frame above the limit is refused in words, one far above by the socket itself', async () => {
    const draft = await createDraft(2)
    await othersGoOn(draft, async () => {
      const first = await openReady(draft.author, draft)
      first.raw.send(new Uint8Array(COLLABORATION_LIMITS.frame + 10).fill(0))
      await first.raw.refusedWith('too_large')
      await first.raw.closedWith(CLOSE.refused)
      const second = await openReady(draft.author, draft)
      second.raw.send(new Uint8Array(COLLABORATION_LIMITS.payload + 1))
      await second.raw.closedWith(CLOSE.tooLarge)
    })
  })

  it('a person cannot open without end', async () => {
    const draft = await createDraft(1)
    const raws = []
    for (let i = 0; i <= COLLABORATION_LIMITS.connectionsPerPersonAndSheet; i++) raws.push(await openRaw(draft.author, draft))
    await raws[0]!.asked()
    const ends = await Promise.all(raws.map(raw => raw.watch.wait(heard => heard.questions.length > 0 || heard.closed !== null, 'answered')))
    expect(ends.filter(heard => heard.closed === CLOSE.slowDown)).toHaveLength(1)
  })
})

function withMap(): Y.Doc {
  const doc = new Y.Doc()
  doc.getMap('elsewhere').set('a', 1)
  return doc
}

function withBinary(): Y.Doc {
  const doc = new Y.Doc()
  const element = new Y.XmlElement('figure')
  doc.getXmlFragment('sheet').insert(0, [element])
  element.setAttribute('src', new Uint8Array(10) as unknown as string)
  return doc
}

function nested(depth: number): Y.Doc {
  const doc = new Y.Doc()
  let at: Y.XmlFragment = doc.getXmlFragment('sheet')
  for (let i = 0; i < depth; i++) {
    const element = new Y.XmlElement('bulletList')
    at.insert(0, [element])
    at = element
  }
  return doc
}

it('what a client says of itself with nothing to say is acknowledged', async () => {
  const draft = await createDraft(1)
  const { raw } = await openReady(draft.author, draft)
  raw.send(answer(EMPTY_UPDATE))
  expect((await raw.done(2)).closed).toBeNull()
})
