import { readFile, stat, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, inject, it } from 'vitest'
import { hashOf, sha256Hex } from '../../shared/document/canonical'
import { verifyAudit } from '../../server/audit/chain'
import { keepAuditHead, readAuditHead } from '../../server/audit/head'
import { AuditEntry, Engine, Job, sequelize, Signature, Submission, withTransaction } from '../../server/database'
import { queueJob } from '../../server/jobs/queue'
import { registerJob, type JobContext } from '../../server/jobs/registry'
import { workOnce } from '../../server/jobs/worker'
import { signatureHolds } from '../../server/signing/signatures'
import { unique } from '../helpers/people'
import { checked, createFirm, frozen, issued } from '../helpers/records'

describe('the audit record', () => {
  it('is one whole chain under many writers at once, and its head is kept signed outside the database', async () => {
    const firms = await Promise.all([createFirm(), createFirm(), createFirm()])
    await Promise.all(firms.map(firm => issued(firm)))
    const report = await verifyAudit()
    expect(report.whole).toBe(true)
    const kept = await readAuditHead()
    expect(kept).not.toBeNull()
    expect(await verifyAudit(kept!)).toMatchObject({ whole: true })
  })

  it('shows an entry that was changed, one that was taken out, and a tail that was cut', async () => {
    await createFirm()
    const last = (await AuditEntry.findOne({ order: [['seq', 'DESC']], rejectOnEmpty: true })).get({ plain: true })
    const seq = Number(last.seq)
    await AuditEntry.update({ data: { ...last.data as object, removed: ['someone'] } }, { where: { seq } })
    expect(await verifyAudit()).toEqual({ whole: false, seq, what: 'The entry was changed after it was written.' })
    await AuditEntry.update({ data: last.data }, { where: { seq } })
    const earlier = (await AuditEntry.findByPk(seq - 1, { rejectOnEmpty: true })).get({ plain: true })
    await AuditEntry.destroy({ where: { seq: seq - 1 } })
    expect(await verifyAudit()).toMatchObject({ whole: false, seq: seq - 1 })
    await AuditEntry.create(earlier)
    await AuditEntry.destroy({ where: { seq } })
    expect(await verifyAudit({ seq, hash: last.hash })).toMatchObject({ whole: false, what: 'Entries at the end are missing.' })
    await AuditEntry.create(last)
    expect(await verifyAudit({ seq, hash: 'f'.repeat(64) })).toMatchObject({ whole: false, seq })
    expect((await verifyAudit({ seq, hash: last.hash })).whole).toBe(true)
  })

  it('refuses a kept head that another key or nobody signed', async () => {
    await createFirm()
    const file = join(inject('base').dataDir, 'keys', 'audit-head.json')
    const text = await readFile(file, 'utf8')
    const kept = JSON.parse(text) as { seq: number }
    await writeFile(file, JSON.stringify({ ...kept, seq: kept.seq + 1 }))
    await expect(readAuditHead()).rejects.toThrow('not signed')
    await writeFile(file, text)
    await keepAuditHead({ seq: kept.seq - 1, hash: '0'.repeat(64) })
    expect((await readAuditHead())?.seq).toBe(kept.seq)
  })
})

describe('a submission', () => {
  it('holds the canonical text of what was hashed, computed by an engine that is kept', async () => {
    const firm = await createFirm()
    const id = await checked(firm)
    const row = await Submission.findOne({ where: { revisionId: id }, rejectOnEmpty: true })
    expect(sha256Hex(row.contentJson)).toBe(row.contentHash)
    expect(hashOf(JSON.parse(row.contentJson))).toBe(row.contentHash)
    expect(sha256Hex(row.recordedJson)).toBe(row.resultsHash)
    expect((await Engine.findByPk(row.engineHash))?.version).toBe(row.engineVersion)
    const bundle = await readFile(join(inject('base').dataDir, 'engines', `${row.engineHash}.mjs`))
    expect((await import('node:crypto')).createHash('sha256').update(bundle).digest('hex')).toBe(row.engineHash)
  })

  it('gives the same results to the byte when it is submitted again', async () => {
    const firm = await createFirm()
    const id = await checked(firm)
    await firm.manager.api.post(`/api/revisions/${id}/return`, { ...await frozen(firm.manager, id), reason: 'Once more.' })
    await checked(firm, id)
    const rows = await Submission.findAll({ where: { revisionId: id }, order: [['ordinal', 'ASC']] })
    expect(rows.map(row => row.ordinal)).toEqual([1, 2])
    expect([rows[1]!.contentHash, rows[1]!.recordedJson]).toEqual([rows[0]!.contentHash, rows[0]!.recordedJson])
  })
})

describe('a signature', () => {
  it('is over what the row says, follows on the one before, and does not hold for anything else', async () => {
    const firm = await createFirm()
    const { id } = await issued(firm)
    const rows = await Signature.findAll({ where: { revisionId: id }, order: [['signedAt', 'ASC'], ['id', 'ASC']] })
    const inOrder = (['prepared', 'checked', 'approved'] as const).map(meaning => rows.find(row => row.meaning === meaning)!)
    expect(inOrder.map(row => row.previousId)).toEqual([null, inOrder[0]!.id, inOrder[1]!.id])
    for (const row of rows) expect(await signatureHolds(row)).toBe(true)
    const [first] = rows
    first!.statement = `${first!.statement} Mostly.`
    expect(await signatureHolds(first!)).toBe(false)
    const payload = JSON.parse(rows[1]!.payloadJson) as object
    rows[1]!.payloadJson = JSON.stringify({ ...payload, signer: { id: 'x', name: 'Another' } })
    expect(await signatureHolds(rows[1]!)).toBe(false)
  })

  it('is made with a key that only the server reads', async () => {
    await createFirm()
    const { mode } = await stat(join(inject('base').dataDir, 'keys', 'signing.pem'))
    expect(mode & 0o777).toBe(0o600)
  })
})

describe('a job', () => {
  let kind = ''
  beforeEach(() => { kind = `test-${unique()}` })
  afterEach(async () => {
    await Job.update({ state: 'done' }, { where: { kind } })
  })
  const queue = (key = unique()) => withTransaction(transaction => queueJob({ kind, uniqueKey: key, payload: { key } }, transaction))
  const job = () => Job.findOne({ where: { kind }, rejectOnEmpty: true })
  /** Works until nothing of any kind that this process knows is left. */
  const drain = async () => { while (await workOnce()); }
  const soon = () => Job.update({ runAfter: new Date(0), leasedUntil: new Date(0) }, { where: { kind } })

  it('is queued once for one key and done once by many workers', async () => {
    const done: string[] = []
    registerJob(kind, { run: async (_payload, { uniqueKey }) => void done.push(uniqueKey) })
    const key = unique()
    await Promise.all([queue(key), queue(key), queue(key)])
    await Promise.all([drain(), drain(), drain(), drain()])
    expect(done).toEqual([key])
    expect(await job()).toMatchObject({ state: 'done', attempts: 1 })
  })

  it('of a transaction that was rolled back does not exist', async () => {
    await expect(withTransaction(async (transaction) => {
      await queueJob({ kind, uniqueKey: unique(), payload: {} }, transaction)
      throw new Error('rolled back')
    })).rejects.toThrow('rolled back')
    expect(await Job.count({ where: { kind } })).toBe(0)
  })

  it('is tried again later with a growing pause, then given up once', async () => {
    const given: string[] = []
    registerJob(kind, { run: async () => { throw new Error('no paper') }, giveUp: async (_payload, reason) => void given.push(reason), attempts: 3, pause: 60_000 })
    await queue()
    const pauses: number[] = []
    for (let attempt = 1; attempt <= 3; attempt++) {
      await drain()
      const row = await job()
      expect(row).toMatchObject({ attempts: attempt, lastError: 'no paper', state: attempt < 3 ? 'waiting' : 'given_up' })
      pauses.push(row.runAfter.getTime() - Date.now())
      await soon()
    }
    expect(pauses[1]!).toBeGreaterThan(pauses[0]!)
    expect(given).toEqual(['no paper'])
    await drain()
    expect(given).toHaveLength(1)
  })

  it('whose worker died is taken over when its lease has run out, and not before', async () => {
    const runs: number[] = []
    registerJob(kind, { run: async (_payload, { attempt }) => void runs.push(attempt) })
    await queue()
    await sequelize.query('UPDATE jobs SET state = \'running\', attempts = 1, lease_token = \'gone\', leased_until = DATE_ADD(UTC_TIMESTAMP(3), INTERVAL 60 SECOND) WHERE kind = ?', { replacements: [kind] })
    await drain()
    expect(runs).toEqual([])
    await soon()
    await drain()
    expect(runs).toEqual([2])
  })

  it('that another worker has taken over meanwhile is told so and does not end it', async () => {
    let context: JobContext | undefined
    registerJob(kind, {
      run: async (_payload, given) => {
        context = given
        expect(await given.renew()).toBe(true)
        await sequelize.query('UPDATE jobs SET lease_token = \'other\' WHERE kind = ?', { replacements: [kind] })
        expect(await given.renew()).toBe(false)
      },
    })
    await queue()
    await drain()
    expect(context?.attempt).toBe(1)
    expect((await job()).state).toBe('running')
  })
})
