import type { VerificationView } from '#shared/types/api'
import type { IssueFacts } from '../database/issues'

/** What anyone with the code may know. A code that belongs to no issue gets the same shape, without the facts. */
export function presentVerification(code: string, facts: IssueFacts | null): VerificationView {
  if (!facts) return { genuine: false, code }
  const { issue, revision, submission, project } = facts
  return {
    genuine: true,
    code,
    sheet: {
      number: submission.titleBlock.number,
      title: submission.titleBlock.title,
      revision: revision.label,
      jobNumber: project.jobNumber,
      projectTitle: project.title,
      purpose: issue.purpose,
      issuedAt: issue.issuedAt.toISOString(),
      state: revision.state,
    },
    firm: facts.firm,
    contentHash: issue.contentHash,
    pdfHash: issue.pdfHash,
    supersededBy: facts.supersededBy,
    signatures: facts.signatures.map(one => ({ meaning: one.meaning, name: one.signerName, at: one.signedAt.toISOString() })),
  }
}
