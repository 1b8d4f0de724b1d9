import type { Actor } from '#shared/policies/actor'
import { editProject } from '#shared/policies/projects'
import type { ProjectMembers } from '#shared/schemas/projects'
import { requirePeople, writeMembers } from './members'
import { onProject } from './onProject'

/** Gives a project exactly these members and managers. Whoever is left out loses the sheets that are open on their screen. */
export function setMembers(actor: Actor, projectId: string, input: ProjectMembers): Promise<void> {
  return onProject(actor, projectId, editProject, async ({ facts, transaction, effects }) => {
    await requirePeople(input, transaction)
    const kept = new Set([...input.memberIds, ...input.managerIds])
    const removed = [...new Set([...facts.memberIds, ...facts.managerIds])].filter(id => !kept.has(id))
    await writeMembers(projectId, input, transaction)
    for (const userId of removed) effects.revoked.push({ kind: 'membership', projectId, userId })
    effects.audit.push({ event: 'project_members_set', actorId: actor.id, subject: { project: projectId }, data: { ...input, removed } })
  })
}
