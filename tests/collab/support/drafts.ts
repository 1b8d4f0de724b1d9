/** Drafts with a document, and the people of their project. */
import * as Y from 'yjs'
import {
  Contributor, Project, ProjectMember, Revision, RevisionDoc, RevisionUpdate, Sheet, sequelize,
} from '../../../server/database'
import { createSheetLog } from '../../../server/collab/log'
import { newId } from '../../../server/utils/ids'
import { createInitialUpdate } from '../../../shared/document/yjs'
import type { SheetDocument } from '../../../shared/document/types'
import { createPerson, unique, type Person } from '../../helpers/people'

export interface Draft { revisionId: string, projectId: string, author: Person, members: Person[], epoch: number }

const DOCUMENT: SheetDocument = {
  type: 'doc',
  content: [
    { type: 'heading', attrs: { id: 'h1', reference: '', level: 1 }, content: [{ type: 'text', text: 'Input filter' }] },
    { type: 'calculation', attrs: { id: 'b1', reference: '' }, content: [
      { type: 'line', attrs: { id: 'l1', status: 'given' }, content: [{ type: 'source', content: [{ type: 'text', text: 'R = 47 ohm' }] }] },
      { type: 'line', attrs: { id: 'l2', status: null }, content: [{ type: 'source', content: [{ type: 'text', text: 'L = 100 uH' }] }] },
    ] },
    { type: 'paragraph', attrs: { id: 'p1', reference: '' }, content: [{ type: 'text', text: 'The filter must not ring.' }] },
  ],
}

/** A draft with two lines and a paragraph, in a project of its own with so many members; the first is its author. */
export async function createDraft(memberCount = 2, document: SheetDocument = DOCUMENT): Promise<Draft> {
  const members: Person[] = []
  for (let i = 0; i < memberCount; i++) members.push(await createPerson())
  const author = members[0]!
  const projectId = newId()
  await Project.create({
    id: projectId, jobNumber: unique('J'), title: 'Test', clientId: null, revisionScheme: 'letters', checkLevel: 2, relianceNotice: '', createdBy: author.id,
  })
  await ProjectMember.bulkCreate(members.map(({ id }) => ({ projectId, userId: id, role: 'member' as const })))
  const revisionId = await addDraft(projectId, author, document)
  return { revisionId, projectId, author, members, epoch: 1 }
}

export async function addDraft(projectId: string, author: Person, document: SheetDocument = DOCUMENT): Promise<string> {
  const sheetId = newId()
  const revisionId = newId()
  await Sheet.create({ id: sheetId, projectId, number: unique('S'), title: 'Test', checkLevel: 2, settings: { significantDigits: 4, paper: 'A4' }, createdBy: author.id })
  await Revision.create({ id: revisionId, sheetId, label: 'P1', ordinal: 1, state: 'draft', authorId: author.id })
  await RevisionDoc.create({ revisionId, state: 'draft', nextSeq: 2 })
  await RevisionUpdate.create({ revisionId, seq: 1, epoch: 1, userId: author.id, bytes: Buffer.from(createInitialUpdate(document)) })
  await Contributor.create({ revisionId, userId: author.id, inherited: true })
  return revisionId
}

/** What a submission does to the document: under its lock the state changes and the epoch rises. Gives the freeze's `next_seq`. */
export async function freeze(revisionId: string): Promise<number> {
  return sequelize.transaction(async (transaction) => {
    const row = await RevisionDoc.findByPk(revisionId, { transaction, lock: true })
    const nextSeq = row!.nextSeq
    await row!.update({ state: 'for_checking', epoch: row!.epoch + 1 }, { transaction })
    await Revision.update({ state: 'for_checking' }, { where: { id: revisionId }, transaction })
    return nextSeq
  })
}

/** The document as the log holds it. */
export async function storedDocument(revisionId: string): Promise<Y.Doc> {
  const loaded = await createSheetLog(sequelize).load(revisionId)
  const doc = new Y.Doc()
  Y.applyUpdate(doc, loaded!.update)
  return doc
}
