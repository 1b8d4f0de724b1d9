import { dirname, join } from 'node:path'
import { expect, inject, it, vi } from 'vitest'
import { Revision, RevisionDoc, Submission } from '../../server/database'
import { calculation, createDraft, createFirm, FILTER, submission, view, write } from '../helpers/records'

/** What happens after a sheet has been computed and before it is frozen. */
const between = vi.hoisted(() => ({ run: async () => {} }))

vi.mock('../../server/calc', async (original) => {
  const actual = await original<typeof import('../../server/calc')>()
  return {
    ...actual,
    computeSheet: async (...given: Parameters<typeof actual.computeSheet>) => {
      const computed = await actual.computeSheet(...given)
      await between.run()
      return computed
    },
  }
})

it.each([
  ['writes in it', 'edited_meanwhile'], ['renames it', 'changed_meanwhile'],
])('a submission is refused when someone %s after it was computed', async (what, code) => {
  vi.stubEnv('POLEWRIGHT_ENGINE_BUNDLE', join(dirname(inject('base').entry), 'engine-process.mjs'))
  const { submitRevision } = await import('../../server/commands/revisions/submitRevision')
  const { closeCalc } = await import('../../server/calc')
  const firm = await createFirm()
  const id = await createDraft(firm)
  const { password: _password, ...body } = await submission(firm.engineer, id, firm.checker)
  const actor = { ...firm.engineer, sessionId: firm.engineer.api.sessionId }
  const submit = () => submitRevision(actor, id, body as unknown as Parameters<typeof submitRevision>[2])
  between.run = async () => {
    if (what === 'writes in it') await write(firm.colleague, id, calculation(...FILTER, { id: 'x', source: '# At the last moment.' }))
    else await firm.colleague.api.patch(`/api/revisions/${id}`, { title: 'Another title' })
  }
  await expect(submit()).rejects.toMatchObject({ statusCode: 409, data: { code } })
  if (what === 'writes in it') await expect(submit()).rejects.toMatchObject({ data: { help: expect.stringContaining(firm.colleague.name) as unknown } })
  expect(await RevisionDoc.findByPk(id)).toMatchObject({ state: 'draft', epoch: 1 })
  expect(await Submission.count({ where: { revisionId: id } })).toBe(0)

  between.run = async () => {}
  const { hash, version } = await submission(firm.engineer, id, firm.checker)
  Object.assign(body, { hash, version })
  await submit()
  expect((await view(firm.checker, id)).state).toBe('for_checking')
  expect((await Revision.findByPk(id))?.checkerId).toBe(firm.checker.id)
  closeCalc()
})
