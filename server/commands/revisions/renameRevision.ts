import type { Actor } from '#shared/policies/actor'
import type { Rename } from '#shared/schemas/revisions'
import { isDuplicate } from '../../database'
import { badInput } from '../../utils/errors'
import { auditSubject, onRevision } from './transition'
import { now } from '../../utils/clock'

async function rename(actor: Actor, revisionId: string, input: Rename): Promise<void> {
  await onRevision(actor, revisionId, 'rename', async (record, transaction, effects) => {
    const { revision, sheet, facts } = record
    if (input.number !== undefined && input.number !== sheet.number && facts.sheetIssued) {
      throw badInput('number', 'The sheet has been issued under its number, so it keeps it.', 'number_issued')
    }
    await sheet.update({ ...input, updatedAt: now() }, { transaction })
    await revision.update({ version: revision.version + 1, updatedAt: now() }, { transaction })
    effects.changed(revisionId, 'state')
    effects.audit.push({ event: 'revision_renamed', actorId: actor.id, subject: auditSubject(record), data: { changed: { ...input } } })
  })
}

/** Changes title, number or settings of a draft's sheet. What was frozen before keeps its title block. */
export async function renameRevision(actor: Actor, revisionId: string, input: Rename): Promise<void> {
  try { await rename(actor, revisionId, input) }
  catch (error) {
    if (isDuplicate(error)) throw badInput('number', 'This project has a sheet with this number. A number is never used again.', 'number_taken')
    throw error
  }
}
