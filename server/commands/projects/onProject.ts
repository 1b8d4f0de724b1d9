import type { Transaction } from 'sequelize'
import type { Actor } from '#shared/policies/actor'
import { seeProject, type ProjectFacts } from '#shared/policies/projects'
import type { Ability } from '#shared/types/api'
import { Project } from '../../database'
import { projectFacts } from '../../database/queries/revisionRecord'
import { authorise, authoriseSight } from '../../utils/authorise'
import { notFound } from '../../utils/errors'
import { runCommand, type Effects } from '../run'

export interface ProjectWork { project: Project, facts: ProjectFacts, transaction: Transaction, effects: Effects }

/** Runs `work` on the locked project if the actor may see it and `policy` allows it. */
export function onProject<T>(actor: Actor, projectId: string, policy: (actor: Actor, facts: ProjectFacts) => Ability, work: (on: ProjectWork) => Promise<T>): Promise<T> {
  return runCommand(async (transaction, effects) => {
    const project = await Project.findByPk(projectId, { transaction, lock: transaction.LOCK.UPDATE })
    if (!project) throw notFound()
    const facts = await projectFacts(project, transaction)
    authoriseSight(seeProject(actor, facts))
    authorise(policy(actor, facts))
    return work({ project, facts, transaction, effects })
  })
}
