import type { IssuePurpose, SignatureMeaning } from '../types/api'

/** What a signature means, in the words that the signer is shown and that are recorded. Pure. */

export const CHECK_METHODS = ['line_by_line', 'alternative_calculation', 'comparison_with_measurement'] as const
export type CheckMethod = typeof CHECK_METHODS[number]

export const CHECK_METHOD_LABELS: Record<CheckMethod, string> = {
  line_by_line: 'Line by line',
  alternative_calculation: 'Alternative calculation',
  comparison_with_measurement: 'Comparison with measurement',
}

export const ISSUE_PURPOSES = ['information', 'comment', 'approval', 'construction', 'as_built'] as const satisfies readonly IssuePurpose[]

export const PURPOSE_LABELS: Record<IssuePurpose, string> = {
  information: 'For information',
  comment: 'For comment',
  approval: 'For approval',
  construction: 'For construction',
  as_built: 'As built',
}

export const MEANING_LABELS: Record<SignatureMeaning, string> = { prepared: 'Prepared by', checked: 'Checked by', approved: 'Approved by' }

/** The sheet as the statement names it. */
export interface SignedSheet { number: string, revision: string }

const named = ({ number, revision }: SignedSheet) => `sheet ${number} revision ${revision}`

export const preparedStatement = (sheet: SignedSheet): string =>
  `I have prepared ${named(sheet)} as it stands here and submit it for checking.`

export function checkedStatement(sheet: SignedSheet, method: CheckMethod, extent: string): string {
  return `I have checked ${named(sheet)} independently of those who prepared it. Method: ${CHECK_METHOD_LABELS[method].toLowerCase()}. Extent: ${extent}`
}

export const approvedStatement = (sheet: SignedSheet, purpose: IssuePurpose): string =>
  `I approve ${named(sheet)} and have it issued ${PURPOSE_LABELS[purpose].toLowerCase()}.`
