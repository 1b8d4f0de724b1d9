import type { Role } from '../types/api'
import { hadAHand, type RevisionFacts } from './revisions'

export interface CandidateFacts { id: string, roles: readonly Role[], disabled: boolean, organisationId: string | null }

/** Why this person cannot be asked to check the revision; null when they can. */
export function whyNotChecker(person: CandidateFacts, facts: RevisionFacts, submitterId: string | null): string | null {
  if (person.disabled || person.organisationId !== null || !person.roles.includes('checker')) return 'This person is not a checker of the firm.'
  const inProject = facts.project.memberIds.includes(person.id) || facts.project.managerIds.includes(person.id)
  if (!inProject) return 'This checker is not a member of the project.'
  if (hadAHand(person.id, facts) || person.id === submitterId) return 'This person contributed to the sheet or to what it was started from, so they cannot check it.'
  return null
}
