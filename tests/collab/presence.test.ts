import { afterEach, describe, expect, it } from 'vitest'
import * as encoding from 'lib0/encoding'
import { presentPeople } from '../../composables/usePresence'
import { MESSAGE_AWARENESS } from '../../shared/collab/messages'
import { createDraft } from './support/drafts'
import { closeRaw, openReady } from './support/raw'
import { closePages, openPage } from './support/sheet'

afterEach(() => {
  closePages()
  closeRaw()
})

const others = (page: Awaited<ReturnType<typeof openPage>>) => presentPeople(page.awareness.getStates(), page.awareness.clientID, page.person.id)

function awareness(entries: { client: number, clock: number, state: unknown }[]): Uint8Array {
  const states = encoding.createEncoder()
  encoding.writeVarUint(states, entries.length)
  for (const { client, clock, state } of entries) {
    encoding.writeVarUint(states, client)
    encoding.writeVarUint(states, clock)
    encoding.writeVarString(states, JSON.stringify(state))
  }
  const encoder = encoding.createEncoder()
  encoding.writeVarUint(encoder, MESSAGE_AWARENESS)
  encoding.writeVarUint8Array(encoder, encoding.toUint8Array(states))
  return encoding.toUint8Array(encoder)
}

describe('presence', () => {
  it('shows who is at which line, under the name of the session whatever the page says', async () => {
    const draft = await createDraft(2)
    const [ines, tomas] = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await Promise.all([ines!.saved(), tomas!.saved()])
    tomas!.awareness.setLocalState({ user: { id: draft.author.id, name: 'The managing director', color: '#000000' }, line: 'l2' })
    await ines!.present.wait(() => others(ines!).some(person => person.line === 'l2'), 'Tomas at l2')
    const [seen] = others(ines!)
    expect(seen).toMatchObject({ id: draft.members[1]!.id, name: draft.members[1]!.name, initials: draft.members[1]!.initials, line: 'l2' })
    expect(others(ines!)).toHaveLength(1)
  })

  it('ends with the connection, and comes back with it', async () => {
    const draft = await createDraft(2)
    const [ines, tomas] = await Promise.all(draft.members.map(person => openPage(person, draft)))
    await ines!.present.wait(() => others(ines!).length === 1, 'Tomas is here')
    tomas!.disconnect()
    await ines!.present.wait(() => others(ines!).length === 0, 'Tomas left')
    tomas!.sheet.connect()
    await ines!.present.wait(() => others(ines!).length === 1, 'Tomas is back')
  })

  it('tells one who comes later who is there already', async () => {
    const draft = await createDraft(2)
    const first = await openPage(draft.author, draft)
    await first.saved()
    first.awareness.setLocalStateField('line', 'l1')
    const second = await openPage(draft.members[1]!, draft)
    await second.present.wait(() => others(second).some(person => person.line === 'l1'), 'the first one at l1')
  })

  it('lets nobody speak for another, nor fill the room with inventions', async () => {
    const draft = await createDraft(3)
    const [ines, tomas] = await Promise.all(draft.members.slice(0, 2).map(person => openPage(person, draft)))
    await ines!.present.wait(() => others(ines!).length === 1, 'Tomas is here')
    const { raw } = await openReady(draft.members[2]!, draft)
    // Tomas's id is taken: passed over. The next frame names an id of its own, and no second one.
    raw.send(awareness([{ client: tomas!.ydoc.clientID, clock: 1_000_000, state: null }]))
    raw.send(awareness(Array.from({ length: 500 }, (_, i) => ({ client: 1000 + i, clock: 1, state: { line: 'l9' } }))))
    raw.send(awareness([{ client: 2000, clock: 1, state: { line: 'l9' } }]))
    await ines!.present.wait(() => others(ines!).length === 2, 'the third is here')
    expect(others(ines!).map(person => person.id).sort()).toEqual([draft.members[1]!.id, draft.members[2]!.id].sort())
    expect(ines!.awareness.getStates().size).toBe(3)
    raw.send(awareness([{ client: 1000, clock: 2, state: { line: 'x'.repeat(5000) } }]))
    raw.send(awareness([{ client: 1000, clock: 3, state: { line: 'l3' } }]))
    await ines!.present.wait(() => others(ines!).some(person => person.line === 'l3'), 'the third at l3')
  })
})
