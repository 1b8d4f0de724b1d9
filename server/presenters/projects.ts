import type { Actor } from '#shared/policies/actor'
import { editProject, workInProject, type ProjectFacts } from '#shared/policies/projects'
import type { PersonRef, ProjectDetail, ProjectReferenceView, ProjectSummary } from '#shared/types/api'
import type { ProjectReference } from '../database'
import type { KnownPerson } from '../database/queries/people'
import type { ProjectRecord } from '../database/queries/projects'

const ref = ({ id, name, initials }: KnownPerson): PersonRef => ({ id, name, initials })

export const factsOfProject = ({ project, members, managers }: ProjectRecord): ProjectFacts => ({
  memberIds: members.map(one => one.id), managerIds: managers.map(one => one.id), clientId: project.clientId, archived: project.archivedAt !== null,
})

export function presentProjectSummary({ project, client, members, counts }: ProjectRecord): ProjectSummary {
  const changed = counts.changedAt && counts.changedAt > project.updatedAt ? counts.changedAt : project.updatedAt
  return {
    id: project.id, jobNumber: project.jobNumber, title: project.title,
    client: client ? { id: client.id, name: client.name } : null,
    sheetCount: counts.sheets, openCount: counts.open,
    members: members.map(ref),
    updatedAt: changed.toISOString(),
  }
}

export function presentProject(actor: Actor, record: ProjectRecord): ProjectDetail {
  const { project } = record
  const facts = factsOfProject(record)
  return {
    ...presentProjectSummary(record),
    managers: record.managers.map(ref),
    revisionScheme: project.revisionScheme, checkLevel: project.checkLevel, relianceNotice: project.relianceNotice,
    archived: project.archivedAt !== null,
    abilities: { edit: editProject(actor, facts).may, createSheet: workInProject(actor, facts).may },
  }
}

export const presentReference = ({ id, kind, designation, title, edition }: ProjectReference): ProjectReferenceView => ({ id, kind, designation, title, edition })
