import { runStatements, TABLE, type Migration } from './statements'

/** Projects, sheets and their revisions. One revision of a sheet is open at a time: `open_marker` is null for the others, and null is never a duplicate. */
const statements = [
  `CREATE TABLE IF NOT EXISTS projects (
    id CHAR(26) NOT NULL PRIMARY KEY,
    job_number VARCHAR(40) NOT NULL,
    title VARCHAR(200) NOT NULL,
    client_id CHAR(26) NULL,
    revision_scheme ENUM('letters', 'numbers') NOT NULL DEFAULT 'letters',
    check_level TINYINT UNSIGNED NOT NULL DEFAULT 2,
    reliance_notice TEXT NOT NULL,
    archived_at DATETIME(3) NULL,
    created_by CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY projects_job_number (job_number),
    CONSTRAINT projects_client FOREIGN KEY (client_id) REFERENCES organisations (id) ON DELETE RESTRICT,
    CONSTRAINT projects_creator FOREIGN KEY (created_by) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT projects_level CHECK (check_level BETWEEN 1 AND 3)
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS project_members (
    project_id CHAR(26) NOT NULL,
    user_id CHAR(26) NOT NULL,
    role ENUM('member', 'manager') NOT NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (project_id, user_id, role),
    KEY project_members_user (user_id),
    CONSTRAINT project_members_project FOREIGN KEY (project_id) REFERENCES projects (id) ON DELETE RESTRICT,
    CONSTRAINT project_members_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS project_references (
    id CHAR(26) NOT NULL PRIMARY KEY,
    project_id CHAR(26) NOT NULL,
    kind ENUM('standard', 'client_document', 'other') NOT NULL,
    designation VARCHAR(120) NOT NULL,
    title VARCHAR(300) NOT NULL,
    edition VARCHAR(80) NOT NULL,
    created_by CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY project_references_once (project_id, designation, edition),
    CONSTRAINT project_references_project FOREIGN KEY (project_id) REFERENCES projects (id) ON DELETE RESTRICT,
    CONSTRAINT project_references_creator FOREIGN KEY (created_by) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS sheets (
    id CHAR(26) NOT NULL PRIMARY KEY,
    project_id CHAR(26) NOT NULL,
    number VARCHAR(40) NOT NULL,
    title VARCHAR(200) NOT NULL,
    check_level TINYINT UNSIGNED NOT NULL,
    settings JSON NOT NULL,
    created_by CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY sheets_number (project_id, number),
    CONSTRAINT sheets_project FOREIGN KEY (project_id) REFERENCES projects (id) ON DELETE RESTRICT,
    CONSTRAINT sheets_creator FOREIGN KEY (created_by) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT sheets_level CHECK (check_level BETWEEN 1 AND 3)
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS revisions (
    id CHAR(26) NOT NULL PRIMARY KEY,
    sheet_id CHAR(26) NOT NULL,
    label VARCHAR(8) NOT NULL,
    ordinal INT UNSIGNED NOT NULL COMMENT 'order within the sheet, from 1',
    state ENUM('draft', 'for_checking', 'checked', 'issuing', 'issued', 'superseded', 'withdrawn', 'cancelled') NOT NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1 COMMENT 'counts every change of the row; a writer names the one it saw',
    author_id CHAR(26) NOT NULL,
    based_on_id CHAR(26) NULL COMMENT 'the revision, of this or another sheet, that its content came from',
    reason VARCHAR(2000) NULL COMMENT 'reason for revision',
    checker_id CHAR(26) NULL,
    due_date DATE NULL,
    purpose ENUM('information', 'comment', 'approval', 'construction', 'as_built') NULL,
    since DATETIME(3) NOT NULL COMMENT 'when it came into its state',
    returned_reason VARCHAR(4000) NULL,
    returned_by CHAR(26) NULL,
    open_marker TINYINT UNSIGNED AS (IF(state IN ('draft', 'for_checking', 'checked', 'issuing'), 1, NULL)) PERSISTENT,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY revisions_label (sheet_id, label),
    UNIQUE KEY revisions_ordinal (sheet_id, ordinal),
    UNIQUE KEY revisions_one_open (sheet_id, open_marker),
    KEY revisions_state (state, due_date),
    CONSTRAINT revisions_sheet FOREIGN KEY (sheet_id) REFERENCES sheets (id) ON DELETE RESTRICT,
    CONSTRAINT revisions_author FOREIGN KEY (author_id) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT revisions_checker FOREIGN KEY (checker_id) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT revisions_returner FOREIGN KEY (returned_by) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT revisions_base FOREIGN KEY (based_on_id) REFERENCES revisions (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS attachments (
    id CHAR(26) NOT NULL PRIMARY KEY,
    project_id CHAR(26) NOT NULL,
    name VARCHAR(200) NOT NULL,
    mime VARCHAR(60) NOT NULL,
    size INT UNSIGNED NOT NULL COMMENT 'bytes',
    sha256 CHAR(64) NOT NULL,
    storage_key VARCHAR(200) NOT NULL,
    uploaded_by CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    KEY attachments_content (project_id, sha256),
    CONSTRAINT attachments_project FOREIGN KEY (project_id) REFERENCES projects (id) ON DELETE RESTRICT,
    CONSTRAINT attachments_uploader FOREIGN KEY (uploaded_by) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,
]

export const projectsAndRevisions: Migration = {
  name: '0002-projects-and-revisions',
  up: ({ context }) => runStatements(context, statements),
}
