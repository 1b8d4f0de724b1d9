import type { Actor } from '#shared/policies/actor'
import type { SubmitReview } from '#shared/types/api'
import { recentEditors } from '../../database/queries/editors'
import type { RevisionRecord } from '../../database/queries/revisionRecord'
import { draftContent, type DraftOf } from './draftContent'

const RECENT_MINUTES = 2

export const draftOf = ({ revision, sheet, project }: RevisionRecord): DraftOf =>
  ({ revisionId: revision.id, projectId: project.id, settings: sheet.settings })

/** Computes a draft as it would be frozen, and says what stands in the way. Changes nothing. */
export async function reviewSubmission(actor: Actor, record: RevisionRecord): Promise<SubmitReview> {
  const { findings, content, seq } = await draftContent(draftOf(record))
  const editors = await recentEditors(record.revision.id, { minutes: RECENT_MINUTES })
  return { findings, hash: content?.contentHash ?? null, seq, editors: editors.filter(editor => editor.id !== actor.id) }
}
