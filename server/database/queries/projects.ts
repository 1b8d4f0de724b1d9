import { Op, QueryTypes } from 'sequelize'
import type { Actor } from '#shared/policies/actor'
import { isManager } from '#shared/policies/projects'
import { Organisation, Project, ProjectMember, sequelize } from '..'
import { peopleById, type KnownPerson } from './people'

export interface ProjectCounts { sheets: number, open: number, changedAt: Date | null }
export interface ProjectRecord { project: Project, client: Organisation | null, members: KnownPerson[], managers: KnownPerson[], counts: ProjectCounts }

interface CountRow { project_id: string, sheets: number, open_revisions: number, changed_at: Date | null }

const COUNTS = `SELECT s.project_id, COUNT(DISTINCT s.id) AS sheets, COUNT(r.open_marker) AS open_revisions, MAX(r.updated_at) AS changed_at
  FROM sheets s JOIN revisions r ON r.sheet_id = s.id WHERE s.project_id IN (:ids) GROUP BY s.project_id`

async function countsOf(ids: readonly string[]): Promise<Map<string, ProjectCounts>> {
  if (ids.length === 0) return new Map()
  const rows = await sequelize.query<CountRow>(COUNTS, { replacements: { ids }, type: QueryTypes.SELECT })
  return new Map(rows.map(row => [row.project_id, { sheets: row.sheets, open: row.open_revisions, changedAt: row.changed_at }]))
}

async function recordsOf(projects: Project[]): Promise<ProjectRecord[]> {
  const ids = projects.map(project => project.id)
  const [counts, members, clients] = await Promise.all([
    countsOf(ids),
    ProjectMember.findAll({ where: { projectId: ids } }),
    Organisation.findAll({ where: { id: projects.flatMap(project => project.clientId ?? []) } }),
  ])
  const people = await peopleById(members.map(member => member.userId))
  const named = (projectId: string, role: ProjectMember['role']) => members
    .flatMap(member => (member.projectId === projectId && member.role === role ? people.get(member.userId) ?? [] : []))
    .sort((a, b) => (a.name < b.name ? -1 : 1))
  return projects.map(project => ({
    project,
    client: clients.find(client => client.id === project.clientId) ?? null,
    members: named(project.id, 'member'),
    managers: named(project.id, 'manager'),
    counts: counts.get(project.id) ?? { sheets: 0, open: 0, changedAt: null },
  }))
}

/** The projects this person may see: all for a manager, else those they are in. */
export async function projectsSeenBy(actor: Actor): Promise<ProjectRecord[]> {
  const mine = isManager(actor) ? null : (await ProjectMember.findAll({ where: { userId: actor.id } })).map(member => member.projectId)
  const projects = await Project.findAll({ where: mine ? { id: { [Op.in]: mine } } : {}, order: [['jobNumber', 'ASC']] })
  return recordsOf(projects)
}

export async function findProjectRecord(id: string): Promise<ProjectRecord | null> {
  const project = await Project.findByPk(id)
  return project ? (await recordsOf([project]))[0] ?? null : null
}
