/** What the people of the demonstration do, through the same commands as everybody: nothing is written past them. */
import * as Y from 'yjs'
import { updateYFragment } from '@tiptap/y-tiptap'
import { needsAnswer } from '#shared/document/findings'
import { sheetSchema } from '#shared/document/schema'
import type { SheetDocument } from '#shared/document/types'
import { FRAGMENT } from '#shared/document/yjs'
import type { Actor } from '#shared/policies/actor'
import type { IssuePurpose } from '#shared/types/api'
import { createSheetLog } from '../../collab/log'
import { annotate } from '../../commands/checks/annotate'
import { tickLine } from '../../commands/checks/ticks'
import { approveRevision } from '../../commands/revisions/approveRevision'
import { returnRevision } from '../../commands/revisions/returnRevision'
import { reviewSubmission } from '../../commands/revisions/reviewSubmission'
import { signRevision } from '../../commands/revisions/signRevision'
import { submitRevision } from '../../commands/revisions/submitRevision'
import { during } from '../../utils/clock'
import { sequelize } from '../connection'
import { Revision } from '../models/revisions'
import { Submission, SubmissionLine } from '../models/submissions'
import { findRevisionRecord } from '../queries/revisionRecord'

const HOUR = 3_600_000
const DAY = 24 * HOUR

/** A moment so many days ago, on a working day and within office hours. */
export function daysAgo(days: number, hour = 10): Date {
  const when = new Date(Date.now() - days * DAY)
  const weekday = when.getUTCDay()
  if (weekday === 0) when.setTime(when.getTime() - 2 * DAY)
  if (weekday === 6) when.setTime(when.getTime() - DAY)
  when.setUTCHours(hour, (days * 7) % 60, 0, 0)
  return when.getTime() < Date.now() ? when : new Date(Date.now() - HOUR)
}

/** A date so many days from today, as written in a form. */
export const inDays = (days: number): string => new Date(Date.now() + days * DAY).toISOString().slice(0, 10)

/** Writes the whole document as one person's edits, so that this person is its contributor. */
export async function writeDocument(who: Actor, revisionId: string, document: SheetDocument): Promise<void> {
  const log = createSheetLog(sequelize)
  const loaded = await log.load(revisionId)
  if (!loaded) throw new Error(`Revision ${revisionId} has no document.`)
  const ydoc = new Y.Doc()
  Y.applyUpdate(ydoc, loaded.update)
  const before = Y.encodeStateVector(ydoc)
  updateYFragment(ydoc, ydoc.getXmlFragment(FRAGMENT), sheetSchema.nodeFromJSON(document), { mapping: new Map(), isOMark: new Map() })
  const bytes = Y.encodeStateAsUpdate(ydoc, before)
  const outcome = await log.append(revisionId, loaded.epoch, loaded.nextSeq - 1, [{ bytes, userId: who.id, newClients: [ydoc.clientID] }])
  ydoc.destroy()
  if (outcome.kind !== 'committed') throw new Error(`The demonstration's document was not written: ${outcome.kind}`)
}

const versionOf = async (revisionId: string): Promise<number> => (await Revision.findByPk(revisionId, { rejectOnEmpty: true })).version

async function submissionOf(revisionId: string): Promise<Submission> {
  return Submission.findOne({ where: { revisionId }, order: [['ordinal', 'DESC']], rejectOnEmpty: true })
}

export async function submit(who: Actor, revisionId: string, checker: Actor, when: Date, due: string, reason = 'Stated in the conclusion; agreed with the project\'s manager.'): Promise<void> {
  const record = await findRevisionRecord(revisionId)
  if (!record) throw new Error(`There is no revision ${revisionId}.`)
  const { findings, hash } = await reviewSubmission(who, record)
  if (!hash) throw new Error(`The demonstration's sheet ${record.sheet.number} does not stand: ${findings.map(one => one.what).join(' ')}`)
  const acceptances = findings.filter(needsAnswer).map(({ lineId, what }) => ({ lineId, what, reason }))
  await during(when, () => submitRevision(who, revisionId, { version: record.revision.version, hash, checkerId: checker.id, due, acceptances }))
}

/** Ticks the first `share` of the lines. */
export async function tick(who: Actor, revisionId: string, when: Date, share = 1): Promise<void> {
  const { id } = await submissionOf(revisionId)
  const lines = await SubmissionLine.findAll({ where: { submissionId: id }, order: [['ord', 'ASC']] })
  for (const line of lines.slice(0, Math.ceil(lines.length * share))) await during(when, () => tickLine(who, revisionId, line.lineId))
}

/** Annotates the line whose source begins with `start`. */
export async function annotateLine(who: Actor, revisionId: string, when: Date, start: string, kind: 'must_change' | 'query' | 'remark', text: string): Promise<string> {
  const { contentJson } = await submissionOf(revisionId)
  const { document } = JSON.parse(contentJson) as { document: SheetDocument }
  const lines = document.content.flatMap(block => block.type === 'calculation' || block.type === 'requirements' ? block.content ?? [] : [])
  const found = lines.find(line => line.content?.some(part => part.type === 'source' && part.content?.[0]?.text.startsWith(start)))
  if (!found) throw new Error(`No line begins with ${start}.`)
  return during(when, () => annotate(who, revisionId, { kind, text, blockId: found.attrs.id, quote: '', from: null, to: null }))
}

export async function sendBack(who: Actor, revisionId: string, when: Date, reason: string): Promise<void> {
  const { contentHash } = await submissionOf(revisionId)
  const version = await versionOf(revisionId)
  await during(when, () => returnRevision(who, revisionId, { version, submissionHash: contentHash, reason }))
}

export async function sign(who: Actor, revisionId: string, when: Date, extent = 'Every line, requirement and figure; inputs against the documents named.'): Promise<void> {
  await tick(who, revisionId, when)
  const { contentHash } = await submissionOf(revisionId)
  const version = await versionOf(revisionId)
  await during(when, () => signRevision(who, revisionId, { version, submissionHash: contentHash, method: 'line_by_line', extent }))
}

export async function approve(who: Actor, revisionId: string, when: Date, purpose: IssuePurpose): Promise<void> {
  const { contentHash } = await submissionOf(revisionId)
  const version = await versionOf(revisionId)
  await during(when, () => approveRevision(who, revisionId, { version, submissionHash: contentHash, purpose }))
}
