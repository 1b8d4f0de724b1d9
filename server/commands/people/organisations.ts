import type { Actor } from '#shared/policies/actor'
import { isDuplicate, Organisation } from '../../database'
import { badInput, notFound } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { runCommand } from '../run'

async function orTaken<T>(work: Promise<T>): Promise<T> {
  try {
    return await work
  }
  catch (error) {
    throw isDuplicate(error) ? badInput('name', 'There is a client of this name already.', 'name_taken') : error
  }
}

/** A new client. Returns its id. */
export function createOrganisation(actor: Actor, name: string): Promise<string> {
  return orTaken(runCommand(async (transaction, effects) => {
    const { id } = await Organisation.create({ id: newId(), name, kind: 'client' }, { transaction })
    effects.audit.push({ event: 'organisation_created', actorId: actor.id, subject: { organisation: id }, data: { name } })
    return id
  }))
}

export function renameOrganisation(actor: Actor, id: string, name: string): Promise<void> {
  return orTaken(runCommand(async (transaction, effects) => {
    const organisation = await Organisation.findOne({ where: { id, kind: 'client' }, lock: transaction.LOCK.UPDATE, transaction })
    if (!organisation) throw notFound('There is no such client.')
    await organisation.update({ name }, { transaction })
    effects.audit.push({ event: 'organisation_renamed', actorId: actor.id, subject: { organisation: id }, data: { name } })
  }))
}
