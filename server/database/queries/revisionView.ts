/** What a title block shows besides what decides: signatures, the issue, the other revisions. */
import { Op } from 'sequelize'
import { Issue, Organisation, Revision, Signature } from '..'
import { peopleById, type KnownPerson } from './people'
import type { RevisionRecord } from './revisionRecord'

export interface RevisionDetail {
  record: RevisionRecord
  client: Organisation | null
  /** All that were ever given on this revision, void ones too, in order. */
  signatures: Signature[]
  /** All revisions of the sheet, in order. */
  revisions: Revision[]
  /** Stored issues of the sheet's revisions. */
  issues: Issue[]
  people: ReadonlyMap<string, KnownPerson>
}

export async function revisionDetail(record: RevisionRecord): Promise<RevisionDetail> {
  const { revision, sheet, project, contributors } = record
  const [client, signatures, revisions] = await Promise.all([
    project.clientId ? Organisation.findByPk(project.clientId) : null,
    Signature.findAll({ where: { revisionId: revision.id }, order: [['signedAt', 'ASC'], ['id', 'ASC']] }),
    Revision.findAll({ where: { sheetId: sheet.id }, order: [['ordinal', 'ASC']] }),
  ])
  const issues = await Issue.findAll({ where: { revisionId: revisions.map(one => one.id), issuedAt: { [Op.not]: null } }, order: [['issuedAt', 'ASC']] })
  const people = await peopleById([
    revision.authorId, revision.checkerId, ...contributors.map(one => one.userId), ...signatures.map(one => one.userId), ...revisions.map(one => one.authorId),
  ])
  return { record, client, signatures, revisions, issues, people }
}
