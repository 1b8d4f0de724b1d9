/** Words for codes: one place, so that a page, an e-mail and the stamped sheet say the same. */
import type { AnnotationKind, CheckLevel, IssuePurpose, SignatureMeaning } from '../types/api'

export const PURPOSE_WORDS: Record<IssuePurpose, string> = {
  information: 'for information',
  comment: 'for comment',
  approval: 'for approval',
  construction: 'for construction',
  as_built: 'as built',
}

export const CHECK_LEVEL_WORDS: Record<CheckLevel, string> = {
  1: '1 · within the team',
  2: '2 · independent',
  3: '3 · alternative calculation',
}

export const MEANING_WORDS: Record<SignatureMeaning, string> = {
  prepared: 'Prepared',
  checked: 'Checked',
  approved: 'Approved',
}

export const ANNOTATION_WORDS: Record<AnnotationKind, string> = {
  must_change: 'must change',
  query: 'query',
  remark: 'remark',
}
