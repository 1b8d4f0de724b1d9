/** Two projects of one firm with nobody in common, and the objects that a rule's callers try to reach. */
import { approval, checked, createDraft, createFirm, frozen, issuing, signing, submission, submitted, tickAll, view } from '../helpers/records'
import type { Firm, Signed } from '../helpers/records'
import { unique } from '../helpers/people'

export { approval, checked, createDraft, frozen, signing, submission, submitted, tickAll, unique, view }
export type { Firm, Signed }

export interface World { own: Firm, foreign: Firm }

export const createWorld = async (): Promise<World> => ({ own: await createFirm(), foreign: await createFirm() })

/** A small picture: one pixel, PNG. */
const PIXEL = 'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNkYPhfDwAChwGA60e6kgAAAABJRU5ErkJggg=='

export function picture(): FormData {
  const form = new FormData()
  form.append('file', new Blob([Buffer.from(PIXEL, 'base64')], { type: 'image/png' }), 'pixel.png')
  return form
}

async function made<T>(answer: Promise<{ status: number, body: T }>): Promise<T> {
  const { status, body } = await answer
  if (status >= 300) throw new Error(`${status}: ${JSON.stringify(body)}`)
  return body
}

export const attachment = async (firm: Firm): Promise<string> =>
  (await made(firm.engineer.api.post<{ id: string }>(`/api/projects/${firm.projectId}/attachments`, picture()))).id

export const reference = () => ({ kind: 'standard', designation: unique('IEC '), title: 'Preferred number series', edition: '2015' })

export const referenceOf = async (firm: Firm): Promise<string> =>
  (await made(firm.engineer.api.post<{ id: string }>(`/api/projects/${firm.projectId}/references`, reference()))).id

export const annotation = () => ({ kind: 'must_change', text: 'Which temperature is this for?', blockId: 'r', quote: 'R = 1 kohm' })

/** A revision under check with an annotation of the checker's. */
export async function annotated(firm: Firm): Promise<string> {
  const id = await submitted(firm)
  return (await made(firm.checker.api.post<{ id: string }>(`/api/revisions/${id}/annotations`, annotation()))).id
}

export async function closedAnnotation(firm: Firm): Promise<string> {
  const id = await annotated(firm)
  await made(firm.checker.api.post(`/api/annotations/${id}/close`))
  return id
}

export async function ticked(firm: Firm): Promise<string> {
  const id = await submitted(firm)
  await tickAll(firm.checker, id)
  return id
}

/** An issued revision whose stamped file is there. */
export async function issuedWithFile(firm: Firm): Promise<string> {
  const { id, issueId } = await issuing(firm)
  const { putFile } = await import('../../server/storage')
  const { completeIssue } = await import('../../server/commands/revisions/completeIssue')
  await completeIssue(issueId, await putFile(Buffer.from('%PDF-1.7\n% a file of the tests\n')))
  return id
}
