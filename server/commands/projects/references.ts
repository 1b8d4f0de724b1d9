/** The list of what a project's sheets cite: standards with their edition, client documents with their revision. */
import type { Actor } from '#shared/policies/actor'
import { workInProject } from '#shared/policies/projects'
import type { ProjectReferenceInput } from '#shared/schemas/projects'
import { isDuplicate, ProjectReference } from '../../database'
import { badInput, notFound } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { onProject } from './onProject'
import { now } from '../../utils/clock'

async function once<T>(work: () => Promise<T>): Promise<T> {
  try { return await work() }
  catch (error) {
    if (isDuplicate(error)) throw badInput('designation', 'This edition is in the list already.', 'reference_taken')
    throw error
  }
}

export const addReference = (actor: Actor, projectId: string, input: ProjectReferenceInput): Promise<ProjectReference> =>
  once(() => onProject(actor, projectId, workInProject, ({ transaction }) =>
    ProjectReference.create({ id: newId(), projectId, ...input, createdBy: actor.id }, { transaction })))

export const changeReference = (actor: Actor, projectId: string, id: string, input: ProjectReferenceInput): Promise<ProjectReference> =>
  once(() => onProject(actor, projectId, workInProject, async ({ transaction }) => {
    const reference = await ProjectReference.findOne({ where: { id, projectId }, transaction })
    if (!reference) throw notFound()
    return reference.update({ ...input, updatedAt: now() }, { transaction })
  }))

/** Takes it off the list; sheets that cite it keep their text. */
export const removeReference = (actor: Actor, projectId: string, id: string): Promise<void> =>
  onProject(actor, projectId, workInProject, async ({ transaction }) => {
    if (await ProjectReference.destroy({ where: { id, projectId }, transaction }) === 0) throw notFound()
  })
