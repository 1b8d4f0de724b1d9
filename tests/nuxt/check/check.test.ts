import { describe, expect, it } from 'vitest'
import { rowLabels } from '../../../components/check/labels'
import { annotationsByRow, missingForSignature } from '../../../composables/useCheck'
import { changedIn } from '../../../composables/useRevisionEvents'
import { refusalOf } from '../../../composables/useRevision'
import { MESSAGE_CHANGED, MESSAGE_DONE, ownMessage } from '../../../shared/collab/messages'
import { normalCode } from '../../../shared/schemas/verification'
import type { AnnotationView } from '../../../shared/types/api'
import { inputFilter } from '../../pdf/support/document'

describe('what is missing for the signature', () => {
  it.each([
    [{ ticked: 3, lines: 9, openMustChange: 1 }, '6 lines to tick · 1 “must change” open'],
    [{ ticked: 8, lines: 9, openMustChange: 0 }, '1 line to tick'],
    [{ ticked: 9, lines: 9, openMustChange: 2 }, '2 “must change” open'],
    [{ ticked: 9, lines: 9, openMustChange: 0 }, null],
  ])('%j is %j', (progress, words) => {
    expect(missingForSignature(progress)).toBe(words)
  })
})

describe('annotations', () => {
  const annotation = (id: string, blockId: string | null): AnnotationView => ({
    id, number: 1, kind: 'query', state: 'open', by: { id: 'p', name: 'P', initials: 'P' }, at: '', text: '',
    anchor: { blockId, quote: '', from: null, to: null }, replies: [], abilities: { reply: false, close: false, reopen: false },
  })

  it('stand under their row, and apart when it is gone: none is lost', () => {
    const map = annotationsByRow([annotation('1', 'a'), annotation('2', 'gone'), annotation('3', null), annotation('4', 'a')], new Set(['a', 'b']))
    expect([...map].map(([row, list]) => [row, list.map(one => one.id)])).toEqual([['a', ['1', '4']], [null, ['2', '3']]])
  })
})

describe('labels of rows', () => {
  it('are the line as typed, the words of a paragraph, the function of a response', () => {
    const labels = rowLabels(inputFilter())
    expect(labels.get('line-l')).toBe('L_1 = 4.7 uH ± 20 %')
    expect(labels.get('head')).toBe('1 Parts')
    expect(labels.get('response')).toBe('response of H')
    expect(labels.get('note-0')).toMatch(/^Note 1\. The damping leg .*…$/)
    expect(labels.has('parts')).toBe(false)
  })
})

describe('a frame of the socket', () => {
  const frame = (bytes: Uint8Array) => bytes.slice().buffer

  it('says what has changed only when it is such a message', () => {
    expect(changedIn(frame(ownMessage(MESSAGE_CHANGED, { what: 'check' })))).toBe('check')
    expect(changedIn(frame(ownMessage(MESSAGE_DONE, { upTo: 1 })))).toBeNull()
    expect(changedIn(new ArrayBuffer(0))).toBeNull()
  })
})

describe('a refusal', () => {
  it('is shown in the server’s words, at the entry that it names', () => {
    const error = { statusCode: 403, data: { message: 'x', data: { code: 'wrong_password', field: 'password', help: 'That is not your password.' } } }
    expect(refusalOf(error)).toEqual({ status: 403, code: 'wrong_password', field: 'password', text: 'That is not your password.' })
  })

  it('says so when nobody answered', () => {
    expect(refusalOf(new TypeError('fetch failed'))).toMatchObject({ status: 0, code: 'no_answer', text: expect.stringContaining('did not answer') as string })
  })
})

describe('a verification code', () => {
  it.each(['7K3M-Q2XW-9DHT-4B5N-CR8V-XX2A', '7k3mq2xw9dht4b5ncr8vxx2a', ' 7K3M Q2XW 9DHT 4B5N CR8V XX2A ', '7K3M–Q2XW–9DHT–4B5N–CR8V–XX2A'])('is the same typed as %j', (typed) => {
    expect(normalCode(typed)).toBe('7K3M-Q2XW-9DHT-4B5N-CR8V-XX2A')
  })
})
