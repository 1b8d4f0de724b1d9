import { QueryTypes } from 'sequelize'
import type { Actor } from '#shared/policies/actor'
import { isStaff } from '#shared/policies/actor'
import { seeProject } from '#shared/policies/projects'
import { Attachment, Project, sequelize } from '..'
import { projectFacts } from './revisionRecord'

/** Whether the picture stands in a sheet that was issued to this organisation. */
async function wasIssuedTo(attachmentId: string, organisationId: string): Promise<boolean> {
  const [row] = await sequelize.query<{ found: number }>(
    `SELECT COUNT(*) AS found FROM issues i JOIN submissions s ON s.id = i.submission_id JOIN revisions r ON r.id = i.revision_id
     JOIN sheets h ON h.id = r.sheet_id JOIN projects p ON p.id = h.project_id
     WHERE i.issued_at IS NOT NULL AND p.client_id = :organisation AND s.content_json LIKE :picture`,
    { replacements: { organisation: organisationId, picture: `%"attachment":"${attachmentId}"%` }, type: QueryTypes.SELECT },
  )
  return (row?.found ?? 0) > 0
}

/** The picture, if this person may see it: members of its project, and clients to whom a sheet with it was issued. */
export async function attachmentSeenBy(actor: Actor, id: string): Promise<Attachment | null> {
  const attachment = await Attachment.findByPk(id)
  if (!attachment) return null
  if (actor.organisationId !== null) return await wasIssuedTo(id, actor.organisationId) ? attachment : null
  const project = await Project.findByPk(attachment.projectId, { rejectOnEmpty: true })
  return isStaff(actor) && seeProject(actor, await projectFacts(project)).may ? attachment : null
}
