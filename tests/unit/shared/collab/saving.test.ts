import { describe, expect, it } from 'vitest'
import { CLOSE } from '../../../../shared/collab/messages'
import { NO_CONNECTION, savingState, type ConnectionFacts } from '../../../../shared/collab/saving'
import { NOT_SAVED_AFTER } from '../../../../shared/limits'

const SAVED: ConnectionFacts = { ...NO_CONNECTION, connected: true, synced: true, sent: 3, upTo: 3, answer: 1, kept: true }
const kind = (facts: Partial<ConnectionFacts>, now = 0) => savingState({ ...SAVED, ...facts }, now).kind

describe('the word for the bar', () => {
  it('is Saved only when every frame, and the answer among them, is committed', () => {
    expect(savingState(SAVED, 0)).toMatchObject({ kind: 'saved', label: 'Saved' })
    expect(kind({ sent: 4 })).toBe('saving')
    expect(kind({ synced: false })).toBe('saving')
    expect(kind({ answer: null })).toBe('saving')
    expect(kind({ answer: 4 })).toBe('saving')
    expect(kind({ connected: false, lost: true })).toBe('offline')
  })

  it('turns to Not saved yet after eight seconds of waiting, from the first waiting edit on', () => {
    expect(kind({ sent: 4, waitingSince: 1000 }, 1000 + NOT_SAVED_AFTER - 1)).toBe('saving')
    expect(kind({ sent: 4, waitingSince: 1000 }, 1000 + NOT_SAVED_AFTER)).toBe('not_saved')
  })

  it('says what is kept where while there is no connection', () => {
    expect(savingState({ ...SAVED, connected: false, lost: true }, 0).label).toBe('Offline, kept on this device')
    expect(savingState({ ...SAVED, connected: false, lost: true, kept: false }, 0).label).toBe('Offline, kept in this page only')
    expect(savingState(NO_CONNECTION, 0)).toMatchObject({ kind: 'opening', editable: true })
  })

  it.each([
    [CLOSE.signedOut, 'signed_out'], [CLOSE.noRight, 'no_right'], [CLOSE.notFound, 'no_right'], [CLOSE.frozen, 'frozen'],
    [CLOSE.outdated, 'outdated'], [CLOSE.tooLarge, 'refused'], [CLOSE.malformed, 'stopped'], [CLOSE.refused, 'stopped'],
  ])('after close %i is %s, and nothing more can be typed', (closed, expected) => {
    expect(savingState({ ...SAVED, connected: false, closed }, 0)).toMatchObject({ kind: expected, editable: false })
  })

  it('gives the reason of a refusal', () => {
    const refused = { code: 'read_only' as const, help: 'You may read this sheet, not edit it.' }
    expect(savingState({ ...SAVED, refused }, 0)).toMatchObject({ kind: 'refused', editable: false, help: expect.stringContaining(refused.help) })
    expect(savingState({ ...SAVED, connected: false, refused, closed: CLOSE.refused }, 0).help).toContain(refused.help)
  })
})
