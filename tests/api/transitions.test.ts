import { describe, expect, it } from 'vitest'
import type { RevisionView, SubmissionView, SubmitReview } from '../../shared/types/api'
import type { RefusalBody } from '../helpers/client'
import { AuditEntry, Check, Job, Revision, RevisionDoc, Signature, Submission } from '../../server/database'
import { PASSWORD } from '../helpers/people'
import {
  approval, calculation, checked, createDraft, createFirm, FILTER, FILTER_ROWS, frozen, issued, issuing, signing, submission, submitted, tickAll, view, write, type Firm, type Signed,
} from '../helpers/records'

const path = (id: string, action: string) => `/api/revisions/${id}/${action}`
const act = (who: Signed, id: string, action: string, body: object) => who.api.post<RevisionView & RefusalBody>(path(id, action), body)
const letters = async (kind: string, to: Signed) => (await Job.findAll({ where: { kind: 'email' } }))
  .filter((job) => {
    const letter = job.payload as { kind: string, to: { address: string } }
    return letter.kind === kind && letter.to.address === to.email
  })
const doc = (id: string) => RevisionDoc.findByPk(id, { rejectOnEmpty: true })

/** Same request from several people at once; exactly one is served, the others are told 409. */
async function oneWins(answers: Promise<{ status: number }>[]): Promise<void> {
  const statuses = (await Promise.all(answers)).map(answer => answer.status).sort((a, b) => a - b)
  expect(statuses).toEqual([200, ...Array.from({ length: statuses.length - 1 }, () => 409)])
}

describe('submitting', () => {
  it('freezes, computes, signs as prepared, asks the checker and closes the document', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    const before = await doc(id)
    const { status, body } = await act(firm.engineer, id, 'submit', await submission(firm.engineer, id, firm.checker))
    expect(status).toBe(200)
    expect(body).toMatchObject({ state: 'for_checking', checker: { id: firm.checker.id }, due: '2030-05-06', preparedBy: { id: firm.engineer.id } })
    expect(body.signatures).toMatchObject([{ meaning: 'prepared', void: false, hash: body.submissionHash }])
    expect(await doc(id)).toMatchObject({ state: 'for_checking', epoch: before.epoch + 1, nextSeq: before.nextSeq })
    expect(await letters('checker_asked', firm.checker)).toHaveLength(1)
    const content = (await firm.checker.api.get<SubmissionView>(path(id, 'submission'))).body
    expect(content.hash).toBe(body.submissionHash)
    expect(content.lines.map(line => line.lineId)).toEqual(FILTER_ROWS)
    expect(content.results.lines.find(line => line.id === 'f')?.value).toMatchObject({ type: 'number', shown: { text: '1.592', unit: 'kHz' } })
    expect(content.results.lines.find(line => line.id === 'q')?.requirement?.verdict).toBe('met')
  })

  it('is refused to who is no author, contributor or manager, to strangers as if it were not there', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    const body = await submission(firm.engineer, id, firm.checker)
    expect((await act(firm.colleague, id, 'submit', body)).status).toBe(403)
    expect((await act(firm.outsider, id, 'submit', body)).status).toBe(404)
    expect((await act(firm.client, id, 'submit', body)).status).toBe(404)
    expect((await view(firm.engineer, id)).state).toBe('draft')
  })

  it('takes a contributor\'s signature', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    await write(firm.colleague, id, calculation(...FILTER, { id: 'x', source: '# Checked against the earlier job.' }))
    expect((await act(firm.colleague, id, 'submit', await submission(firm.colleague, id, firm.checker))).status).toBe(200)
  })

  it('needs the password again', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    const { status, body } = await act(firm.engineer, id, 'submit', { ...await submission(firm.engineer, id, firm.checker), password: 'not this one at all' })
    expect([status, body.data.code, body.data.field]).toEqual([403, 'wrong_password', 'password'])
    expect(await Signature.count({ where: { revisionId: id } })).toBe(0)
  })

  it('says who edited the sheet after it was looked at', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    const seen = await submission(firm.engineer, id, firm.checker)
    await write(firm.colleague, id, calculation(...FILTER, { id: 'x', source: '# One more thing.' }))
    const { status, body } = await act(firm.engineer, id, 'submit', seen)
    expect([status, body.data.code]).toEqual([409, 'edited_meanwhile'])
    expect(body.data.help).toContain(firm.colleague.name)
    expect(await doc(id)).toMatchObject({ state: 'draft', epoch: 1 })
  })

  it.each([['error', { id: 'f', source: 'f_c = 1/(2*pi*R*D) to kHz' }], ['requirement', { id: 'q', source: 'f_c <= 1 kHz', reference: 'Specification 4.2' }], ['reference', { id: 'c', source: 'C = 100 nF', status: 'assumed' as const }]])(
    'wants an unresolved %s mended or accepted with a reason', async (kind, line) => {
      const firm = await createFirm()
      const id = await createDraft(firm, calculation(...FILTER.map(one => (one.id === line.id ? line : one))))
      const review = (await firm.engineer.api.get<SubmitReview>(path(id, 'submit-review'))).body
      expect(review.findings).toContainEqual(expect.objectContaining({ kind, lineId: line.id, mustMend: false }))
      const body = await submission(firm.engineer, id, firm.checker)
      const refused = await act(firm.engineer, id, 'submit', { ...body, acceptances: [] })
      expect([refused.status, refused.body.data.code]).toEqual([409, 'not_ready'])
      expect((await act(firm.engineer, id, 'submit', body)).status).toBe(200)
      const { acceptances } = (await firm.checker.api.get<SubmissionView>(path(id, 'submission'))).body
      expect(acceptances).toContainEqual(expect.objectContaining({ lineId: line.id, reason: 'Agreed with the client.', by: expect.objectContaining({ id: firm.engineer.id }) as unknown }))
    })

  it('refuses an empty sheet', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm, { type: 'doc', content: [{ type: 'paragraph', attrs: { id: 'p', reference: '' } }] })
    const { body } = await firm.engineer.api.get<SubmitReview>(path(id, 'submit-review'))
    expect(body.hash).toBeNull()
    expect(body.findings).toMatchObject([{ mustMend: true }])
  })

  it('refuses a checker who contributed, and does not name them as a candidate', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    await write(firm.checker, id, calculation(...FILTER, { id: 'x', source: '# By the checker.' }))
    const { status, body } = await act(firm.engineer, id, 'submit', await submission(firm.engineer, id, firm.checker))
    expect([status, body.data.field, body.data.code]).toEqual([400, 'checkerId', 'not_independent'])
    const candidates = await firm.engineer.api.get<{ checkers: { id: string }[] }>(`/api/projects/${firm.projectId}/candidates?revision=${id}`)
    expect(candidates.body.checkers.map(one => one.id).sort()).toEqual([firm.secondChecker.id, firm.secondManager.id].sort())
  })

  it('by two at once is done once', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    await write(firm.colleague, id, calculation(...FILTER, { id: 'x', source: '# Together.' }))
    const [mine, theirs] = [await submission(firm.engineer, id, firm.checker), await submission(firm.colleague, id, firm.secondChecker)]
    await oneWins([act(firm.engineer, id, 'submit', mine), act(firm.colleague, id, 'submit', theirs)])
    expect(await Submission.count({ where: { revisionId: id } })).toBe(1)
    expect(await Signature.count({ where: { revisionId: id } })).toBe(1)
  })
})

describe.each([
  ['recall', (firm: Firm) => firm.engineer, () => ({})],
  ['return', (firm: Firm) => firm.checker, () => ({ reason: 'The source of C is missing.' })],
] as const)('%s', (action, by, extra) => {
  it('makes it a draft again, voids the signature, and lets the same document be written on', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    const { status, body } = await act(by(firm), id, action, { ...await frozen(by(firm), id), ...extra(), ...(action === 'recall' ? { submissionHash: undefined } : {}) })
    expect(status).toBe(200)
    expect(body).toMatchObject({ state: 'draft', submissionId: null, epoch: 2 })
    expect(body.signatures).toMatchObject([{ meaning: 'prepared', void: true }])
    expect(await Check.count({ where: { checkerId: firm.checker.id, outcome: action === 'recall' ? 'recalled' : 'returned' } })).toBe(1)
    await write(firm.engineer, id, calculation(...FILTER))
    if (action === 'return') {
      expect(body.returnReason).toBe('The source of C is missing.')
      expect(await letters('returned', firm.engineer)).toHaveLength(1)
    }
    else { expect(await letters('recalled', firm.checker)).toHaveLength(1) }
  })

  it('is refused to others, and in another state', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    const body = { ...await frozen(firm.engineer, id), ...extra() }
    const sent = action === 'recall' ? { version: body.version } : body
    const others = action === 'recall' ? [firm.colleague, firm.checker] : [firm.engineer, firm.secondChecker, firm.manager]
    for (const other of others) expect((await act(other, id, action, sent)).status).toBe(403)
    expect((await act(firm.outsider, id, action, sent)).status).toBe(404)
    const draft = await createDraft(firm)
    expect((await act(firm.engineer, draft, action, { ...sent, version: 1 })).status).toBe(409)
  })

  it('with another version is refused', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    const { version, submissionHash } = await frozen(by(firm), id)
    const sent = action === 'recall' ? { version: version - 1 } : { version: version - 1, submissionHash, ...extra() }
    const { status, body } = await act(by(firm), id, action, sent)
    expect([status, body.data.code]).toEqual([409, 'changed_meanwhile'])
  })
})

describe('signing as checked', () => {
  it('needs every line ticked and every annotation that must change closed, and says how many are missing', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    const early = await act(firm.checker, id, 'sign', await signing(firm.checker, id))
    expect([early.status, early.body.data.help]).toEqual([409, '5 lines are not ticked yet.'])
    await tickAll(firm.checker, id)
    const { body: { id: annotation } } = await firm.checker.api.post<{ id: string }>(path(id, 'annotations'), { kind: 'must_change', text: 'Which dielectric?', blockId: 'c', quote: '', from: null, to: null })
    expect((await act(firm.checker, id, 'sign', await signing(firm.checker, id))).body.data.help).toContain('1 annotation that must change is not closed yet.')
    await firm.checker.api.post(`/api/annotations/${annotation}/close`)
    const { status, body } = await act(firm.checker, id, 'sign', await signing(firm.checker, id))
    expect(status).toBe(200)
    expect(body).toMatchObject({ state: 'checked', checkedBy: { id: firm.checker.id } })
    expect(body.signatures.map(one => one.meaning)).toEqual(['prepared', 'checked'])
  })

  it('is for the checker who was asked, with the password, of what was on the screen', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    await tickAll(firm.checker, id)
    const body = await signing(firm.checker, id)
    for (const other of [firm.engineer, firm.secondChecker, firm.manager]) expect((await act(other, id, 'sign', body)).status).toBe(403)
    expect((await act(firm.checker, id, 'sign', { ...body, password: 'another password' })).body.data.code).toBe('wrong_password')
    expect((await act(firm.checker, id, 'sign', { ...body, submissionHash: 'b'.repeat(64) })).body.data.code).toBe('other_content')
    expect((await act(firm.checker, id, 'sign', { ...body, method: 'by_eye' })).body.data.field).toBe('method')
    expect((await view(firm.checker, id)).state).toBe('for_checking')
  })

  it('at level 3 asks for an alternative calculation', async () => {
    const firm = await createFirm({ level: 3 })
    const id = await submitted(firm)
    await tickAll(firm.checker, id)
    expect((await act(firm.checker, id, 'sign', await signing(firm.checker, id))).body.data.code).toBe('level_three')
    expect((await act(firm.checker, id, 'sign', { ...await signing(firm.checker, id), method: 'alternative_calculation' })).status).toBe(200)
  })

  it('while it is returned or recalled at the same moment ends one way only', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    await tickAll(firm.checker, id)
    const body = await signing(firm.checker, id)
    await oneWins([act(firm.checker, id, 'sign', body), act(firm.engineer, id, 'recall', { version: body.version })])
  })
})

describe('approving', () => {
  it('signs as approved, and leaves the file to a job', async () => {
    const firm = await createFirm()
    const id = await checked(firm)
    const { status, body } = await act(firm.manager, id, 'approve', await approval(firm.manager, id, 'construction'))
    expect(status).toBe(200)
    expect(['issuing', 'issued']).toContain(body.state)
    expect(body).toMatchObject({ purpose: 'construction', approvedBy: { id: firm.manager.id } })
  })

  it('is for a manager authorised for the project, who neither checked nor contributed', async () => {
    const firm = await createFirm()
    const stranger = await import('../helpers/records').then(({ signedPerson }) => signedPerson({ roles: ['manager'] }))
    const id = await checked(firm)
    const body = await approval(firm.manager, id)
    for (const other of [firm.engineer, firm.checker, stranger]) expect((await act(other, id, 'approve', body)).status).toBe(403)

    const draft = await createDraft(firm)
    await write(firm.manager, draft, calculation(...FILTER, { id: 'x', source: '# By the manager.' }))
    const own = await checked(firm, draft)
    expect((await act(firm.manager, own, 'approve', await approval(firm.manager, own))).status).toBe(403)
    expect((await act(firm.secondManager, own, 'approve', await approval(firm.secondManager, own))).status).toBe(200)
  })

  it('is refused before it is checked', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    expect((await act(firm.manager, id, 'approve', await approval(firm.manager, id))).status).toBe(409)
  })

  it('by two managers at once is done once', async () => {
    const firm = await createFirm()
    const id = await checked(firm)
    const body = await approval(firm.manager, id)
    await oneWins([act(firm.manager, id, 'approve', body), act(firm.secondManager, id, 'approve', body)])
    expect(await Signature.count({ where: { revisionId: id, meaning: 'approved' } })).toBe(1)
    expect(await Job.count({ where: { kind: 'pdf' } })).toBeGreaterThan(0)
  })

  it('can be declined: the approver returns what was checked, and both signatures are void', async () => {
    const firm = await createFirm()
    const id = await checked(firm)
    const { status, body } = await act(firm.manager, id, 'return', { ...await frozen(firm.manager, id), reason: 'The client changed the load.' })
    expect(status).toBe(200)
    expect(body.signatures.map(one => [one.meaning, one.void])).toEqual([['prepared', true], ['checked', true]])
    expect(await letters('returned', firm.checker)).toHaveLength(1)
    expect((await act(firm.checker, await checked(firm), 'return', { ...await frozen(firm.checker, id), submissionHash: 'c'.repeat(64), reason: 'Too late.' })).status).toBe(403)
  })
})

describe('issuing', () => {
  it('supersedes the earlier revision and tells the client only once the file is stored', async () => {
    const firm = await createFirm()
    const first = await issued(firm)
    const { body: { revisionId } } = await firm.engineer.api.post<{ revisionId: string }>(path(first.id, 'revise'), { reason: 'Higher load.' })
    const second = await issuing(firm, { revisionId })
    expect((await view(firm.manager, first.id)).state).toBe('issued')
    expect(await letters('issued', firm.client)).toHaveLength(1)
    const { completeIssue } = await import('../../server/commands/revisions/completeIssue')
    const file = { key: 'k', sha256: 'd'.repeat(64), size: 10 }
    expect(await Promise.all([1, 2].map(() => completeIssue(second.issueId, file)))).toEqual([true, true])
    expect((await view(firm.manager, first.id)).state).toBe('superseded')
    expect(await view(firm.client, revisionId)).toMatchObject({ state: 'issued', pdfHash: file.sha256, revision: 'P2' })
    expect(await letters('issued', firm.client)).toHaveLength(2)
    expect(await letters('issued', firm.foreignClient)).toHaveLength(0)
    const events = await AuditEntry.findAll({ where: { event: 'revision_issued' } })
    expect(events.filter(entry => (entry.subject as { revision: string }).revision === revisionId)).toHaveLength(1)
  })

  it('that is given up makes it checked again, with the approval void and the manager told', async () => {
    const firm = await createFirm()
    const { id, issueId } = await issuing(firm)
    const { giveUpIssue } = await import('../../server/commands/revisions/giveUpIssue')
    const { completeIssue } = await import('../../server/commands/revisions/completeIssue')
    await giveUpIssue(issueId, 'The browser did not start.')
    await giveUpIssue(issueId, 'The browser did not start.')
    const after = await view(firm.manager, id)
    expect(after).toMatchObject({ state: 'checked', purpose: null, approvedBy: null })
    expect(after.signatures.map(one => [one.meaning, one.void])).toEqual([['prepared', false], ['checked', false], ['approved', true]])
    expect(await letters('issue_failed', firm.manager)).toHaveLength(1)
    expect(await completeIssue(issueId, { key: 'k', sha256: 'e'.repeat(64), size: 1 })).toBe(false)
    expect((await act(firm.manager, id, 'approve', await approval(firm.manager, id))).status).toBe(200)
  })

  it('by the server\'s own job ends with a stored file', async () => {
    const firm = await createFirm()
    const id = await checked(firm)
    await act(firm.manager, id, 'approve', await approval(firm.manager, id))
    await expect.poll(async () => (await view(firm.manager, id)).state, { timeout: 60_000, interval: 250 }).toBe('issued')
    expect((await view(firm.client, id)).pdfHash).toMatch(/^[0-9a-f]{64}$/)
  }, 90_000)
})

describe('withdrawing', () => {
  it('tells everyone it was sent to, and revives no predecessor', async () => {
    const firm = await createFirm()
    const { id } = await issued(firm)
    const { body: { revisionId } } = await firm.engineer.api.post<{ revisionId: string }>(path(id, 'revise'), { reason: 'Higher load.' })
    await issued(firm, { revisionId })
    const { version } = await view(firm.manager, revisionId)
    const body = { version, reason: 'The load was wrong.', password: PASSWORD }
    for (const other of [firm.engineer, firm.checker, firm.client]) expect((await act(other, revisionId, 'withdraw', body)).status).toBe(403)
    expect((await act(firm.manager, revisionId, 'withdraw', body)).body).toMatchObject({ state: 'withdrawn' })
    expect((await view(firm.manager, id)).state).toBe('superseded')
    expect(await letters('withdrawn', firm.client)).toHaveLength(1)
    expect((await act(firm.manager, revisionId, 'withdraw', { ...body, version: version + 1 })).status).toBe(409)
  })
})

describe('the next revision', () => {
  it('starts from the issued content with the same ids and its contributors, who cannot check it', async () => {
    const firm = await createFirm()
    const draft = await createDraft(firm)
    await write(firm.secondChecker, draft, calculation(...FILTER, { id: 'x', source: '# By the second checker.' }))
    const { id } = await issued(firm, { revisionId: draft })
    const { body: { revisionId } } = await firm.colleague.api.post<{ revisionId: string }>(path(id, 'revise'), { reason: 'Higher load.' })
    const next = await view(firm.colleague, revisionId)
    expect(next).toMatchObject({ revision: 'P2', state: 'draft', reasonForRevision: 'Higher load.' })
    expect(next.contributors.map(one => [one.id, one.inherited]).sort()).toEqual([[firm.engineer.id, true], [firm.secondChecker.id, true]].sort())
    const review = (await firm.colleague.api.get<SubmitReview>(path(revisionId, 'submit-review'))).body
    expect(review.hash).toBe((await view(firm.manager, id)).submissionHash)
    expect((await act(firm.colleague, revisionId, 'submit', await submission(firm.colleague, revisionId, firm.secondChecker))).body.data.code).toBe('not_independent')
  })

  it('needs only what changed to be ticked again by the same checker', async () => {
    const firm = await createFirm()
    const { id } = await issued(firm)
    const { body: { revisionId } } = await firm.engineer.api.post<{ revisionId: string }>(path(id, 'revise'), { reason: 'Another capacitor.' })
    await write(firm.engineer, revisionId, calculation(...FILTER.map(line => (line.id === 'c' ? { ...line, source: 'C = 120 nF' } : line))))
    await submitted(firm, revisionId)
    const { body } = await firm.checker.api.get<{ ticks: { lineId: string }[] }>(path(revisionId, 'check'))
    expect(body.ticks.map(tick => tick.lineId).sort()).toEqual(['intro', 'r'])
  })

  it('is one at a time, and only from what was issued', async () => {
    const firm = await createFirm()
    const { id } = await issued(firm)
    const answers = await Promise.all([firm.engineer, firm.colleague].map(who => who.api.post(path(id, 'revise'), { reason: 'Higher load.' })))
    expect(answers.map(answer => answer.status).sort()).toEqual([201, 409])
    expect((await firm.engineer.api.post(path(await createDraft(firm), 'revise'), { reason: 'Higher load.' })).status).toBe(409)
    expect((await firm.client.api.post(path(id, 'revise'), { reason: 'Higher load.' })).status).toBe(403)
  })

  it('takes letters once it was issued for construction, and never a cancelled label', async () => {
    const firm = await createFirm()
    const { id } = await issued(firm, { purpose: 'construction' })
    const first = (await firm.engineer.api.post<{ revisionId: string }>(path(id, 'revise'), { reason: 'Higher load.' })).body.revisionId
    expect((await view(firm.engineer, first)).revision).toBe('A')
    expect((await act(firm.engineer, first, 'cancel', { version: 1 })).body.state).toBe('cancelled')
    const second = (await firm.engineer.api.post<{ revisionId: string }>(path(id, 'revise'), { reason: 'Higher load.' })).body.revisionId
    expect((await view(firm.engineer, second)).revision).toBe('B')
  })
})

describe('cancelling and reassigning', () => {
  it('cancels a draft by its author or a manager only', async () => {
    const firm = await createFirm()
    const id = await createDraft(firm)
    expect((await act(firm.colleague, id, 'cancel', { version: 1 })).status).toBe(403)
    expect((await act(firm.manager, id, 'cancel', { version: 1 })).body.state).toBe('cancelled')
    expect((await act(firm.manager, id, 'cancel', { version: 2 })).status).toBe(409)
    expect((await Revision.findByPk(id))?.state).toBe('cancelled')
  })

  it('gives the check to another checker, who starts without ticks and sees the first one\'s', async () => {
    const firm = await createFirm()
    const id = await submitted(firm)
    await tickAll(firm.checker, id)
    const { version } = await view(firm.manager, id)
    const body = { version, checkerId: firm.secondChecker.id, due: '2030-06-07' }
    expect((await act(firm.engineer, id, 'reassign', body)).status).toBe(403)
    expect((await act(firm.manager, id, 'reassign', { ...body, checkerId: firm.engineer.id })).body.data.field).toBe('checkerId')
    expect((await act(firm.manager, id, 'reassign', body)).body).toMatchObject({ checker: { id: firm.secondChecker.id }, due: '2030-06-07', state: 'for_checking' })
    const check = (await firm.secondChecker.api.get<{ ticks: { by: { id: string } }[], progress: { ticked: number } }>(path(id, 'check'))).body
    expect(check.ticks).toHaveLength(FILTER_ROWS.length)
    expect(check.ticks.every(tick => tick.by.id === firm.checker.id)).toBe(true)
    expect(check.progress.ticked).toBe(0)
    expect((await firm.checker.api.put(path(id, 'ticks/r'))).status).toBe(403)
    expect(await letters('checker_asked', firm.secondChecker)).toHaveLength(1)
  })
})
