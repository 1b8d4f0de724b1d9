import { QueryTypes, type Transaction } from 'sequelize'
import type { Actor } from '#shared/policies/actor'
import type { Revise } from '#shared/schemas/revisions'
import { nextLabel } from '#shared/workflow/labels'
import { Revision, sequelize } from '../../database'
import { conflict } from '../../utils/errors'
import { frozenDocument, startRevision } from '../sheets/startRevision'
import { auditSubject, onRevision, requireVersion } from './transition'

async function wasForConstruction(sheetId: string, transaction: Transaction): Promise<boolean> {
  const [row] = await sequelize.query<{ issued: number }>(
    `SELECT COUNT(*) AS issued FROM issues i JOIN revisions r ON r.id = i.revision_id
     WHERE r.sheet_id = ? AND i.issued_at IS NOT NULL AND i.purpose IN ('construction', 'as_built')`,
    { replacements: [sheetId], type: QueryTypes.SELECT, transaction },
  )
  return (row?.issued ?? 0) > 0
}

/** Starts the next revision from an issued one: same content, same ids of lines and blocks, its contributors inherited. Returns its id. */
export function reviseSheet(actor: Actor, revisionId: string, input: Revise): Promise<string> {
  return onRevision(actor, revisionId, 'revise', async (record, transaction, effects) => {
    if (input.version !== undefined) requireVersion(record, input.version)
    const { sheet, project } = record
    const document = await frozenDocument(revisionId, transaction)
    if (!document) throw conflict('wrong_state', 'There is no frozen content to start from.')
    const earlier = await Revision.findAll({ attributes: ['label', 'ordinal'], where: { sheetId: sheet.id }, order: [['ordinal', 'ASC']], transaction })
    const label = nextLabel(project.revisionScheme, earlier.map(one => one.label), await wasForConstruction(sheet.id, transaction))
    const newRevision = await startRevision({
      sheetId: sheet.id, label, ordinal: (earlier.at(-1)?.ordinal ?? 0) + 1, authorId: actor.id, document, basedOnId: revisionId, reason: input.reason,
    }, transaction)
    effects.changed(revisionId, 'state')
    effects.audit.push({
      event: 'revision_started', actorId: actor.id, subject: { ...auditSubject(record), revision: newRevision }, data: { from: revisionId, label, reason: input.reason },
    })
    return newRevision
  })
}
