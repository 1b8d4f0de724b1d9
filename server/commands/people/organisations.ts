import { isDuplicate, Organisation } from '../../database'
import { badInput, notFound } from '../../utils/errors'
import { newId } from '../../utils/ids'

const taken = () => badInput('name', 'There is a client of this name already.', 'name_taken')

/** A new client. Returns its id. */
export async function createOrganisation(name: string): Promise<string> {
  try {
    const { id } = await Organisation.create({ id: newId(), name, kind: 'client' })
    return id
  }
  catch (error) {
    throw isDuplicate(error) ? taken() : error
  }
}

export async function renameOrganisation(id: string, name: string): Promise<void> {
  const organisation = await Organisation.findOne({ where: { id, kind: 'client' } })
  if (!organisation) throw notFound('There is no such client.')
  try {
    await organisation.update({ name })
  }
  catch (error) {
    throw isDuplicate(error) ? taken() : error
  }
}
