import type { Actor } from '#shared/policies/actor'
import * as policies from '#shared/policies/projects'
import type { CreateProject } from '#shared/schemas/projects'
import { isDuplicate, Project } from '../../database'
import { authorise } from '../../utils/authorise'
import { badInput } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { runCommand } from '../run'
import { requireClientOrganisation, requirePeople, writeMembers } from './members'

export const jobNumberTaken = () => badInput('jobNumber', 'There is a project with this job number already.', 'job_number_taken')

/** Sets up a project with its client, members and managers. Returns its id. */
export async function createProject(actor: Actor, input: CreateProject): Promise<string> {
  authorise(policies.createProject(actor))
  const { memberIds, managerIds, ...row } = input
  try {
    return await runCommand(async (transaction, effects) => {
      await requireClientOrganisation(row.clientId, transaction)
      await requirePeople({ memberIds, managerIds }, transaction)
      const project = await Project.create({ id: newId(), ...row, createdBy: actor.id }, { transaction })
      await writeMembers(project.id, { memberIds, managerIds }, transaction)
      effects.audit.push(
        { event: 'project_created', actorId: actor.id, subject: { project: project.id }, data: { jobNumber: row.jobNumber, title: row.title, clientId: row.clientId } },
        { event: 'project_members_set', actorId: actor.id, subject: { project: project.id }, data: { memberIds, managerIds, removed: [] } },
      )
      return project.id
    })
  }
  catch (error) {
    if (isDuplicate(error)) throw jobNumberTaken()
    throw error
  }
}
