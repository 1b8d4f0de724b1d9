/** What may stand in the audit record; parsed when it is written and when it is read. */
import { z } from 'zod'

const id = z.string()
const hash = z.string().regex(/^[0-9a-f]{64}$/)
const project = z.strictObject({ project: id })
const revision = z.strictObject({ project: id, sheet: id, revision: id })
const person = z.strictObject({ person: id })
const organisation = z.strictObject({ organisation: id })
const nothing = z.strictObject({})
const signed = { submission: id, signature: id, hash }

function entry<E extends string, S extends z.ZodType, D extends z.ZodType>(event: E, subject: S, data: D) {
  return z.strictObject({ event: z.literal(event), actorId: id.nullable(), subject, data })
}

export const auditEventSchema = z.discriminatedUnion('event', [
  entry('project_created', project, z.strictObject({ jobNumber: z.string(), title: z.string(), clientId: id.nullable() })),
  entry('project_updated', project, z.strictObject({ changed: z.record(z.string(), z.unknown()) })),
  entry('project_members_set', project, z.strictObject({ memberIds: z.array(id), managerIds: z.array(id), removed: z.array(id) })),
  entry('sheet_created', revision, z.strictObject({ number: z.string(), title: z.string(), label: z.string(), from: id.nullable() })),
  entry('revision_renamed', revision, z.strictObject({ changed: z.record(z.string(), z.unknown()) })),
  entry('revision_submitted', revision, z.strictObject({ ...signed, resultsHash: hash, engineHash: hash, checkerId: id, due: z.string().nullable(), acceptances: z.number() })),
  entry('revision_recalled', revision, z.strictObject({ submission: id, reason: z.string().nullable() })),
  entry('revision_returned', revision, z.strictObject({ submission: id, reason: z.string(), from: z.string() })),
  entry('revision_signed', revision, z.strictObject({ ...signed, method: z.string() })),
  entry('revision_approved', revision, z.strictObject({ ...signed, purpose: z.string(), issue: id })),
  entry('revision_issued', revision, z.strictObject({ issue: id, pdfHash: hash, recipients: z.array(id) })),
  entry('issue_given_up', revision, z.strictObject({ issue: id, failure: z.string() })),
  entry('revision_superseded', revision, z.strictObject({ by: id })),
  entry('revision_withdrawn', revision, z.strictObject({ reason: z.string() })),
  entry('revision_started', revision, z.strictObject({ from: id, label: z.string(), reason: z.string() })),
  entry('revision_cancelled', revision, nothing),
  entry('checker_reassigned', revision, z.strictObject({ submission: id, from: id, to: id, due: z.string().nullable() })),
  entry('annotation_raised', revision, z.strictObject({ annotation: id, number: z.number(), kind: z.string() })),
  entry('annotation_closed', revision, z.strictObject({ annotation: id, number: z.number() })),
  entry('person_invited', person, z.strictObject({ roles: z.array(z.string()), organisationId: id.nullable() })),
  entry('person_invited_again', person, nothing),
  entry('person_changed', person, z.strictObject({ changed: z.record(z.string(), z.unknown()) })),
  entry('account_opened', person, nothing),
  entry('password_changed', person, z.strictObject({ by: z.enum(['link', 'person']) })),
  entry('organisation_created', organisation, z.strictObject({ name: z.string() })),
  entry('organisation_renamed', organisation, z.strictObject({ name: z.string() })),
  entry('annotation_reopened', revision, z.strictObject({ annotation: id, number: z.number() })),
])
export type AuditEvent = z.infer<typeof auditEventSchema>
