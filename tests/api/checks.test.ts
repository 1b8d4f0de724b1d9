import { describe, expect, it } from 'vitest'
import type { AnnotationView } from '../../shared/types/api'
import type { RefusalBody } from '../helpers/client'
import { calculation, createFirm, FILTER, frozen, submitted, tickAll, write, type Firm, type Signed } from '../helpers/records'

interface Check { ticks: { lineId: string }[], annotations: AnnotationView[], progress: { ticked: number, lines: number, openMustChange: number } }
const check = async (who: Signed, id: string) => (await who.api.get<Check>(`/api/revisions/${id}/check`)).body
const annotation = (over: object = {}) => ({ kind: 'query', text: 'Which dielectric?', blockId: 'c', quote: '100 nF', from: 4, to: 10, ...over })
const raise = async (firm: Firm, id: string, over: object = {}) => (await firm.checker.api.post<{ id: string }>(`/api/revisions/${id}/annotations`, annotation(over))).body.id
const sendBack = async (firm: Firm, id: string) => firm.checker.api.post(`/api/revisions/${id}/return`, { ...await frozen(firm.checker, id), reason: 'See the annotations.' })

describe('ticks', () => {
  it('are set and taken away by the checker alone, once each', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    const tick = (who: Signed, line: string) => who.api.put<RefusalBody>(`/api/revisions/${id}/ticks/${line}`)
    expect((await Promise.all([1, 2, 3].map(() => tick(firm.checker, 'r')))).map(one => one.status)).toEqual([204, 204, 204])
    expect((await check(firm.engineer, id)).progress).toEqual({ ticked: 1, lines: 5, openMustChange: 0 })
    expect((await tick(firm.checker, 'nowhere')).status).toBe(404)
    expect((await tick(firm.engineer, 'r')).status).toBe(403)
    expect((await tick(firm.outsider, 'r')).status).toBe(404)
    expect((await firm.checker.api.delete(`/api/revisions/${id}/ticks/r`)).status).toBe(204)
    expect((await check(firm.checker, id)).ticks).toEqual([])
  })

  it('stay on what is the same when the checker gets it again', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    await tickAll(firm.checker, id)
    await sendBack(firm, id)
    await write(firm.engineer, id, calculation(...FILTER.map(line => (line.id === 'q' ? { ...line, source: 'f_c <= 3 kHz' } : line))))
    await submitted(firm, id)
    expect((await check(firm.checker, id)).ticks.map(tick => tick.lineId).sort()).toEqual(['c', 'f', 'intro', 'r'])
  })
})

describe('an annotation', () => {
  it('is numbered through the revision, also when two come at once', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    await Promise.all([1, 2, 3].map(() => raise(firm, id)))
    expect((await check(firm.engineer, id)).annotations.map(one => one.number)).toEqual([1, 2, 3])
  })

  it('is a thread: answered, opened by a further word of its author, closed, opened again', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    const one = await raise(firm, id, { kind: 'must_change' })
    const state = async () => (await check(firm.checker, id)).annotations[0]!.state
    const post = (who: Signed, action: string, body?: object) => who.api.post(`/api/annotations/${one}/${action}`, body)
    expect((await post(firm.engineer, 'replies', { text: 'X7R.' })).status).toBe(204)
    expect(await state()).toBe('answered')
    await post(firm.checker, 'replies', { text: 'And its voltage?' })
    expect(await state()).toBe('open')
    expect((await post(firm.engineer, 'close')).status).toBe(403)
    expect((await check(firm.checker, id)).progress.openMustChange).toBe(1)
    expect((await post(firm.checker, 'close')).status).toBe(204)
    expect((await check(firm.checker, id)).progress.openMustChange).toBe(0)
    expect((await post(firm.engineer, 'replies', { text: 'Late.' })).status).toBe(409)
    expect((await post(firm.checker, 'close')).status).toBe(409)
    expect((await post(firm.checker, 'reopen')).status).toBe(204)
    const { replies, abilities } = (await check(firm.engineer, id)).annotations[0]!
    expect(replies.map(reply => reply.text)).toEqual(['X7R.', 'And its voltage?'])
    expect(abilities).toEqual({ reply: true, close: false, reopen: false })
    for (const other of [firm.outsider, firm.client]) expect((await post(other, 'replies', { text: 'Hello.' })).status).toBe(404)
  })

  it('refuses a line that is not in what was submitted, and empty words', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    const post = (over: object) => firm.checker.api.post<RefusalBody>(`/api/revisions/${id}/annotations`, annotation(over))
    expect((await post({ blockId: 'nowhere' })).body.data.field).toBe('blockId')
    expect((await post({ text: '  ' })).body.data.field).toBe('text')
    expect((await post({ kind: 'shout' })).body.data.field).toBe('kind')
  })

  it('moves with its text when the returned draft is edited, and is never dropped', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    await raise(firm, id)
    await raise(firm, id, { blockId: 'f', quote: 'R*C', from: 14, to: 17 })
    await raise(firm, id, { blockId: 'q', quote: '', from: null, to: null })
    await sendBack(firm, id)
    const edited = (lines: typeof FILTER) => write(firm.engineer, id, calculation(...lines))
    await edited(FILTER.map(line => (line.id === 'c' ? { ...line, source: 'C_in = 100 nF' } : line)))
    const anchors = async () => (await check(firm.engineer, id)).annotations.map(one => one.anchor)
    expect((await anchors())[0]).toEqual({ blockId: 'c', quote: '100 nF', from: 7, to: 13 })
    await edited(FILTER.filter(line => line.id !== 'c' && line.id !== 'q'))
    expect(await anchors()).toEqual([
      { blockId: null, quote: '100 nF', from: null, to: null }, { blockId: 'f', quote: 'R*C', from: 14, to: 17 }, { blockId: null, quote: '', from: null, to: null },
    ])
  })
})
