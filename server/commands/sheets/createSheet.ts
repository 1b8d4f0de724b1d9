import type { Transaction } from 'sequelize'
import type { SheetDocument } from '#shared/document/types'
import { emptyDocument } from '#shared/document/yjs'
import type { Actor } from '#shared/policies/actor'
import { seeProject, workInProject } from '#shared/policies/projects'
import { see } from '#shared/policies/revisions'
import type { CreateSheet } from '#shared/schemas/sheets'
import { firstLabel } from '#shared/workflow/labels'
import { isDuplicate, Project, Sheet } from '../../database'
import { findRevisionRecord, projectFacts } from '../../database/queries/revisionRecord'
import { authorise, authoriseSight } from '../../utils/authorise'
import { badInput, notFound } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { runCommand } from '../run'
import { withoutPictures } from './foreignPictures'
import { frozenDocument, startRevision } from './startRevision'

const SETTINGS = { significantDigits: 4, paper: 'A4' } as const

export interface CreatedSheet { sheetId: string, revisionId: string }

/** The content to start with. Pictures belong to a project, so those of another project stay behind. */
async function startingDocument(actor: Actor, fromId: string | undefined, projectId: string, transaction: Transaction): Promise<SheetDocument> {
  if (!fromId) return emptyDocument(newId().toLowerCase())
  const record = await findRevisionRecord(fromId)
  if (!record || !see(actor, record.facts).may) throw badInput('from', 'There is no such sheet to start from.')
  const document = await frozenDocument(fromId, transaction)
  if (!document) throw badInput('from', 'This sheet was never submitted, so there is nothing to start from yet.')
  return record.project.id === projectId ? document : withoutPictures(document)
}

async function create(actor: Actor, projectId: string, input: CreateSheet): Promise<CreatedSheet> {
  return runCommand(async (transaction, effects) => {
    const project = await Project.findByPk(projectId, { transaction, lock: transaction.LOCK.UPDATE })
    if (!project) throw notFound()
    const facts = await projectFacts(project, transaction)
    authoriseSight(seeProject(actor, facts))
    authorise(workInProject(actor, facts))
    const document = await startingDocument(actor, input.from, projectId, transaction)
    const sheet = await Sheet.create({
      id: newId(), projectId, number: input.number, title: input.title, checkLevel: project.checkLevel, settings: { ...SETTINGS }, createdBy: actor.id,
    }, { transaction })
    const label = firstLabel(project.revisionScheme)
    const revisionId = await startRevision({
      sheetId: sheet.id, label, ordinal: 1, authorId: actor.id, document, basedOnId: input.from ?? null, reason: null,
    }, transaction)
    effects.audit.push({
      event: 'sheet_created', actorId: actor.id, subject: { project: projectId, sheet: sheet.id, revision: revisionId },
      data: { number: sheet.number, title: sheet.title, label, from: input.from ?? null },
    })
    return { sheetId: sheet.id, revisionId }
  })
}

/** A new sheet in a project, blank or with the content of an earlier one, whose contributors come along. */
export async function createSheet(actor: Actor, projectId: string, input: CreateSheet): Promise<CreatedSheet> {
  try { return await create(actor, projectId, input) }
  catch (error) {
    if (isDuplicate(error)) throw badInput('number', 'This project has a sheet with this number. A number is never used again.', 'number_taken')
    throw error
  }
}
