import type { Actor } from '#shared/policies/actor'
import { editProject } from '#shared/policies/projects'
import type { UpdateProject } from '#shared/schemas/projects'
import { isDuplicate } from '../../database'
import { jobNumberTaken } from './createProject'
import { requireClientOrganisation } from './members'
import { onProject } from './onProject'
import { now } from '../../utils/clock'

/** Changes what is given; what was issued keeps what it was issued with. */
export async function updateProject(actor: Actor, projectId: string, input: UpdateProject): Promise<void> {
  const { archived, ...changes } = input
  try {
    await onProject(actor, projectId, editProject, async ({ project, transaction, effects }) => {
      await requireClientOrganisation(changes.clientId, transaction)
      const archivedAt = archived === undefined ? project.archivedAt : archived ? project.archivedAt ?? now() : null
      await project.update({ ...changes, archivedAt, updatedAt: now() }, { transaction })
      effects.audit.push({ event: 'project_updated', actorId: actor.id, subject: { project: projectId }, data: { changed: { ...input } } })
    })
  }
  catch (error) {
    if (isDuplicate(error)) throw jobNumberTaken()
    throw error
  }
}
