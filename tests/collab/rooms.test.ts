import { afterEach, describe, expect, it, vi } from 'vitest'
import * as Y from 'yjs'
import { RevisionDoc, RevisionSnapshot, RevisionUpdate, sequelize } from '../../server/database'
import { createSheetLog, DamagedLog, type SheetLog } from '../../server/collab/log'
import type { Rooms } from '../../server/collab/rooms'
import { CLOSE } from '../../shared/collab/messages'
import { COLLABORATION_LIMITS } from '../../shared/limits'
import { createDraft, freeze, storedDocument } from './support/drafts'
import { createRooms, LocalClient, logWith } from './support/inProcess'
import { randomFrom } from './support/tokens'

const running: Rooms[] = []
const rooms = (log?: SheetLog) => {
  const made = createRooms(log)
  running.push(made)
  return made
}
afterEach(async () => {
  vi.useRealTimers()
  await Promise.all(running.splice(0).map(one => one.close()))
})

const stored = async (revisionId: string) => (await storedDocument(revisionId)).getXmlFragment('sheet').toString()

/** Something that happens when a test says so. */
function gate() {
  let open = () => {}
  let reached = () => {}
  const opened = new Promise<void>(resolve => open = resolve)
  const arrived = new Promise<void>(resolve => reached = resolve)
  return { open, arrived, pass: () => (reached(), opened) }
}

describe('putting a document away', () => {
  it('waits for its last commit, and whoever comes meanwhile joins the same one', async () => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] })
    const draft = await createDraft(2)
    const slow = gate()
    let commits = 0
    const all = rooms(logWith(real => ({
      append: async (...given) => {
        if (commits++ === 0) await slow.pass()
        return real.append(...given)
      },
    })))
    const first = new LocalClient(all, draft, draft.author)
    await first.watch.wait(({ asked }) => asked > 0, 'asked')
    first.write('last words')
    await slow.arrived
    first.leave()
    await vi.advanceTimersByTimeAsync(COLLABORATION_LIMITS.idle * 2)
    expect(all.counts.documents).toBe(1)

    const second = new LocalClient(all, draft, draft.members[1]!)
    slow.open()
    await second.watch.wait(() => second.plain().includes('last words'), 'the second sees the last words')
    expect(await stored(draft.revisionId)).toContain('last words')
    expect(all.counts.documents).toBe(1)
  })

  it('leaves nothing behind after hundreds of openings and closings', async () => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] })
    const draft = await createDraft(1)
    const all = rooms()
    for (let round = 0; round < 20; round++) {
      const clients = Array.from({ length: 10 }, () => new LocalClient(all, draft, draft.author))
      await Promise.all(clients.map(client => client.saved()))
      clients.forEach(client => client.leave())
      if (round % 4 === 0) {
        await vi.advanceTimersByTimeAsync(COLLABORATION_LIMITS.idle + 1)
        await vi.waitFor(() => expect(all.counts).toEqual({ documents: 0, connections: 0 }))
      }
    }
    await vi.advanceTimersByTimeAsync(COLLABORATION_LIMITS.idle + 1)
    await vi.waitFor(() => expect(all.counts).toEqual({ documents: 0, connections: 0 }))
  })

  it('folds a long log on the way', async () => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] })
    const draft = await createDraft(1)
    const all = rooms()
    const client = new LocalClient(all, draft, draft.author)
    await client.saved()
    for (let i = 0; i < COLLABORATION_LIMITS.foldAtRestRows; i++) client.write(`${i}`)
    await client.saved()
    const before = client.plain()
    client.leave()
    await vi.advanceTimersByTimeAsync(COLLABORATION_LIMITS.idle + 1)
    await vi.waitFor(() => expect(all.counts.documents).toBe(0))
    expect(await RevisionUpdate.count({ where: { revisionId: draft.revisionId } })).toBe(0)
    expect(await RevisionSnapshot.count({ where: { revisionId: draft.revisionId } })).toBe(1)
    expect(await stored(draft.revisionId)).toBe(before)
  })
})

describe('a log that fails', () => {
  it('at reading opens no document, and the next attempt reads it anew', async () => {
    const draft = await createDraft(1)
    let fails = true
    const all = rooms(logWith(real => ({ load: id => fails ? Promise.reject(new Error('away')) : real.load(id) })))
    const first = new LocalClient(all, draft, draft.author)
    expect((await first.closed()).closed).toBe(CLOSE.tryAgain)
    expect(first.plain()).toBe('')
    fails = false
    const second = new LocalClient(all, draft, draft.author)
    await second.saved()
    expect(second.plain()).toContain('R = 47 ohm')
  })

  it('at writing acknowledges nothing and relays nothing until it is written', async () => {
    const draft = await createDraft(2)
    let failures = 3
    const all = rooms(logWith(real => ({
      append: (...given) => failures-- > 0 ? Promise.reject(new Error('away')) : real.append(...given),
    })))
    const [ines, tomas] = draft.members.map(person => new LocalClient(all, draft, person))
    await Promise.all([ines!.saved(), tomas!.saved()])
    ines!.write('patience')
    expect(ines!.heard.upTo).toBeLessThan(ines!.sent)
    await ines!.saved()
    expect(failures).toBeLessThan(0)
    await tomas!.watch.wait(() => tomas!.plain().includes('patience'), 'relayed')
    expect(await stored(draft.revisionId)).toBe(tomas!.plain())
  })

  it('for long gives the document up; the edits come again with their author', async () => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout', 'Date'] })
    const draft = await createDraft(1)
    let away = true
    const all = rooms(logWith(real => ({ append: (...given) => away ? Promise.reject(new Error('away')) : real.append(...given) })))
    const client = new LocalClient(all, draft, draft.author)
    await client.saved()
    client.write('kept by its author')
    await vi.advanceTimersByTimeAsync(COLLABORATION_LIMITS.giveUp + 5000)
    expect((await client.closed()).closed).toBe(CLOSE.tryAgain)
    expect(all.counts.documents).toBe(0)
    away = false
    const again = new LocalClient(all, draft, draft.author, client.doc)
    await again.saved()
    expect(await stored(draft.revisionId)).toContain('kept by its author')
  })

  it('whose COMMIT went through though its answer was lost holds the edit once', async () => {
    const draft = await createDraft(2)
    let lost = true
    const all = rooms(logWith(real => ({
      append: async (...given) => {
        const appended = await real.append(...given)
        if (!lost) return appended
        lost = false
        throw new Error('connection lost')
      },
    })))
    const [ines, tomas] = draft.members.map(person => new LocalClient(all, draft, person))
    await Promise.all([ines!.saved(), tomas!.saved()])
    ines!.write('once')
    await ines!.saved()
    await tomas!.watch.wait(() => tomas!.plain().includes('once'), 'relayed')
    expect((await stored(draft.revisionId)).split('once')).toHaveLength(2)
    expect(tomas!.plain().split('once')).toHaveLength(2)
  })

  it('that lacks a row is never opened as a shorter document', async () => {
    const draft = await createDraft(1)
    const all = rooms()
    const client = new LocalClient(all, draft, draft.author)
    await client.saved()
    client.write('one')
    await client.saved()
    client.write('two')
    await client.saved()
    await RevisionUpdate.destroy({ where: { revisionId: draft.revisionId, seq: 2 } })
    await expect(createSheetLog(sequelize).load(draft.revisionId)).rejects.toThrow(DamagedLog)
    const second = new LocalClient(rooms(), draft, draft.author)
    expect((await second.closed()).closed).toBe(CLOSE.tryAgain)
  })
})

describe('folding the log', () => {
  it('amid writing loses no row, at whatever moment it stops', async () => {
    const draft = await createDraft(2)
    const log = createSheetLog(sequelize)
    const all = rooms()
    const clients = draft.members.map(person => new LocalClient(all, draft, person))
    await Promise.all(clients.map(client => client.saved()))
    for (let round = 0; round < 6; round++) {
      const folding = [log.fold(draft.revisionId), log.fold(draft.revisionId)]
      for (let i = 0; i < 15; i++) {
        clients[i % 2]!.write(`f${round}-${i};`)
        await log.heads([draft.revisionId])
      }
      await Promise.all(folding)
    }
    await Promise.all(clients.map(client => client.saved()))
    const after = await stored(draft.revisionId)
    for (let round = 0; round < 6; round++) for (let i = 0; i < 15; i++) expect(after.split(`>f${round}-${i};<`)).toHaveLength(2)
    expect(clients[0]!.heard.closed).toBeNull()
  })

  it('that stopped between snapshot and deletion changes nothing', async () => {
    const draft = await createDraft(1)
    const all = rooms()
    const client = new LocalClient(all, draft, draft.author)
    await client.saved()
    for (let i = 0; i < 10; i++) client.write(`${i};`)
    await client.saved()
    const rows = await RevisionUpdate.findAll({ where: { revisionId: draft.revisionId }, raw: true })
    await createSheetLog(sequelize).fold(draft.revisionId)
    await RevisionUpdate.bulkCreate(rows)
    expect(await stored(draft.revisionId)).toBe(client.plain())
    client.write('and on;')
    await client.saved()
    await createSheetLog(sequelize).fold(draft.revisionId)
    expect(await stored(draft.revisionId)).toBe(client.plain())
    expect(await RevisionUpdate.count({ where: { revisionId: draft.revisionId } })).toBe(0)
  })
})

describe('several processes on one document', () => {
  it('bring each other’s edits to their clients', async () => {
    const draft = await createDraft(2)
    const [here, there] = [rooms(), rooms()]
    const ines = new LocalClient(here, draft, draft.author)
    const tomas = new LocalClient(there, draft, draft.members[1]!)
    await Promise.all([ines.saved(), tomas.saved()])
    ines.write('from here')
    await ines.saved()
    await there.look()
    await tomas.watch.wait(() => tomas.plain().includes('from here'), 'it came across')
    // Writing takes along what others committed meanwhile, without waiting for the next look.
    ines.write('again from here')
    await ines.saved()
    tomas.write('from there')
    await tomas.saved()
    await tomas.watch.wait(() => tomas.plain().includes('again from here'), 'taken along')
    await here.look()
    await ines.watch.wait(() => ines.plain().includes('from there'), 'and back')
    expect(ines.plain()).toBe(tomas.plain())
    expect(await stored(draft.revisionId)).toBe(ines.plain())
  })

  it('end up alike under random writing, folding and moving about', async () => {
    const random = randomFrom(7)
    const draft = await createDraft(3)
    const all = [rooms(), rooms(), rooms()]
    const docs = draft.members.map(() => new Y.Doc())
    const clients = draft.members.map((person, i) => new LocalClient(all[i]!, draft, person, docs[i]))
    await Promise.all(clients.map(client => client.saved()))
    const written: string[] = []
    for (let step = 0; step < 120; step++) {
      const i = Math.floor(random() * 3)
      const chance = random()
      if (chance < 0.75) {
        written.push(`s${step};`)
        clients[i]!.write(`s${step};`)
      }
      else if (chance < 0.85) await all[i]!.look()
      else if (chance < 0.9) await createSheetLog(sequelize).fold(draft.revisionId)
      if (chance > 0.9 || clients[i]!.heard.closed !== null) {
        clients[i]!.leave()
        clients[i] = new LocalClient(all[Math.floor(random() * 3)]!, draft, draft.members[i]!, docs[i])
      }
    }
    // A folded log sends whoever was behind away once; coming again is what the provider does by itself.
    for (let round = 0; round < 3; round++) {
      for (const one of all) await one.look()
      for (const [i, client] of clients.entries()) {
        if (client.heard.closed === null) continue
        client.leave()
        clients[i] = new LocalClient(all[i]!, draft, draft.members[i]!, docs[i])
      }
      await Promise.all(clients.map(client => client.saved()))
    }
    const after = await stored(draft.revisionId)
    for (const one of all) await one.look()
    await Promise.all(clients.map(client => client.watch.wait(() => client.plain() === after, 'alike')))
    for (const word of written) expect(after.split(`>${word}<`)).toHaveLength(2)
  })

  it('notice a freeze that another one made', async () => {
    const draft = await createDraft(1)
    const all = rooms()
    const client = new LocalClient(all, draft, draft.author)
    await client.saved()
    await freeze(draft.revisionId)
    await all.look()
    expect((await client.closed()).closed).toBe(CLOSE.frozen)
    expect((await RevisionDoc.findByPk(draft.revisionId))!.epoch).toBe(2)
  })

  it('do not let one client id belong to two people', async () => {
    const draft = await createDraft(2)
    const [here, there] = [rooms(), rooms()]
    const mine = new Y.Doc()
    const theirs = new Y.Doc()
    theirs.clientID = mine.clientID
    const ines = new LocalClient(here, draft, draft.author, mine)
    const tomas = new LocalClient(there, draft, draft.members[1]!, theirs)
    await Promise.all([ines.saved(), tomas.saved()])
    ines.write('mine')
    await ines.saved()
    tomas.write('not mine')
    expect((await tomas.closed()).closed).toBe(CLOSE.noRight)
    expect(await stored(draft.revisionId)).not.toContain('not mine')
  })
})

it('closing commits what was received, then sends everyone away', async () => {
  const draft = await createDraft(1)
  const all = rooms()
  const client = new LocalClient(all, draft, draft.author)
  await client.saved()
  for (let i = 0; i < 30; i++) client.write(`c${i};`)
  await all.close()
  expect((await client.closed()).closed).toBe(CLOSE.tryAgain)
  const after = await stored(draft.revisionId)
  for (let i = 0; i < 30; i++) expect(after).toContain(`c${i};`)
  expect(new LocalClient(all, draft, draft.author).heard.closed).toBe(CLOSE.tryAgain)
})
