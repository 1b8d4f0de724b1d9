/** What is still missing before a sheet can be submitted. Pure. */
import { needsAnswer } from '#shared/document/findings'
import type { SubmitFinding, SubmitReview } from '#shared/types/api'

/** Under which a reason is kept while the dialog is open. */
export const answerKey = ({ lineId, what }: Pick<SubmitFinding, 'lineId' | 'what'>): string => `${lineId ?? ''}\n${what}`

/** Shortest reason that the server takes. */
const LEAST = 3

export function missingForSubmission(given: { review: SubmitReview | null, reasons: Readonly<Record<string, string>>, checkerId: string }): string | null {
  const { review, reasons, checkerId } = given
  if (!review) return 'the sheet is being computed'
  const mend = review.findings.filter(one => one.mustMend).length
  if (mend > 0) return mend === 1 ? 'one finding has to be mended' : `${mend} findings have to be mended`
  const open = review.findings.filter(one => needsAnswer(one) && (reasons[answerKey(one)] ?? '').trim().length < LEAST).length
  if (open > 0) return open === 1 ? 'one finding is neither mended nor accepted' : `${open} findings are neither mended nor accepted`
  if (!review.hash) return 'the sheet cannot be frozen as it is'
  return checkerId === '' ? 'the checker is missing' : null
}
