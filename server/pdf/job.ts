/**
 * The job that makes the stamped PDF of an approved revision, once: prints it, attaches its source, seals it, stores it, and says so.
 * Until the last step nothing points to the file, so a halt anywhere leaves the issue without one and the next attempt starts again;
 * once that step has been committed the issue has its file for good, and a repeated attempt does nothing.
 */
import { z } from 'zod'
import { PURPOSE_WORDS } from '#shared/utils/words'
import type { SheetBlock } from '#shared/document/types'
import { completeIssue } from '../commands/revisions/completeIssue'
import { giveUpIssue } from '../commands/revisions/giveUpIssue'
import { Attachment, Issue } from '../database'
import { registerJob, type JobContext } from '../jobs/registry'
import { getFile, putFile } from '../storage'
import { withContents } from './attach'
import { printToPdf, type PrintRequest } from './browser'
import { printTokens } from './desk'
import { sealed } from './seal'
import { frozenContent, issueSources, printView, type IssueSources } from './view'
import type { PrintView } from '#shared/types/print'

const payloadSchema = z.object({ issueId: z.string() })

const isFigure = (block: SheetBlock): block is Extract<SheetBlock, { type: 'figure' }> => block.type === 'figure'

/** The sheet's pictures, so that the browser need not ask for them; a missing one fails the print. */
async function picturesOf(sources: IssueSources): Promise<PrintRequest['files']> {
  const ids = frozenContent(sources).document.content.filter(isFigure).map(block => block.attrs.attachment)
  const rows = await Attachment.findAll({ where: { id: ids, projectId: sources.record.project.id } })
  const files = new Map<string, { mime: string, bytes: Buffer }>()
  for (const row of rows) {
    const bytes = await getFile(row.storageKey)
    if (bytes) files.set(`/api/attachments/${row.id}`, { mime: row.mime, bytes })
  }
  return files
}

const nameOf = ({ revision }: PrintView) => `${revision.number} revision ${revision.revision}`

async function stampedFile(sources: IssueSources): Promise<Buffer> {
  const view = await printView(sources)
  const pages = await printToPdf({ path: `/print/${printTokens.give(view)}`, files: await picturesOf(sources) })
  const { submission } = sources
  const complete = await withContents(pages, {
    title: `${nameOf(view)}: ${view.revision.title}`,
    author: view.firm,
    subject: `Design calculation sheet, job ${view.revision.jobNumber}, issued ${PURPOSE_WORDS[view.purpose]}`,
    keywords: [view.code, view.contentHash],
    at: view.approvedAt,
    source: submission.contentJson,
    results: submission.recordedJson,
  })
  return sealed(complete, { firm: view.firm, reason: `${nameOf(view)} issued ${PURPOSE_WORDS[view.purpose]}`, at: new Date() })
}

async function makePdf(payload: unknown, { renew }: JobContext): Promise<void> {
  const { issueId } = payloadSchema.parse(payload)
  const issue = await Issue.findByPk(issueId, { rejectOnEmpty: true })
  if (issue.issuedAt || issue.failedAt) return
  const file = await stampedFile(await issueSources(issueId))
  // Another worker that has the job by now makes its own file; only one of the two can complete the issue.
  if (!await renew()) return
  await completeIssue(issueId, await putFile(file))
}

const giveUp = (payload: unknown, reason: string): Promise<void> => giveUpIssue(payloadSchema.parse(payload).issueId, reason)

export const registerPdfJob = (): void => registerJob('pdf', { run: makePdf, giveUp, attempts: 4, lease: 300_000, pause: 3000 })
