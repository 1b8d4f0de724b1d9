import { people } from './0001-people'
import { projectsAndRevisions } from './0002-projects-and-revisions'
import { documents } from './0003-documents'
import { submissionsAndChecks } from './0004-submissions-and-checks'
import { signaturesAndIssues } from './0005-signatures-and-issues'
import { jobsAndAudit } from './0006-jobs-and-audit'
import type { Migration } from './statements'

/** In order. Imported one by one, since a bundled server has no folder to read them from. */
export const migrations: readonly Migration[] = [
  people,
  projectsAndRevisions,
  documents,
  submissionsAndChecks,
  signaturesAndIssues,
  jobsAndAudit,
]
