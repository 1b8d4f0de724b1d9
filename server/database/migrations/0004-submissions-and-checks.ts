import { LINE_ID, runStatements, TABLE, type Migration } from './statements'

/**
 * What was frozen, and its check. `content_json` is the canonical text (RFC 8785) whose SHA-256 is `content_hash`;
 * `recorded_json` likewise with `results_hash`. `shown_json` is what the engine gave for the screen and the print.
 */
const statements = [
  `CREATE TABLE IF NOT EXISTS engines (
    hash CHAR(64) NOT NULL PRIMARY KEY COMMENT 'SHA-256 of the bundle',
    version VARCHAR(40) NOT NULL,
    created_at DATETIME(3) NOT NULL
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS submissions (
    id CHAR(26) NOT NULL PRIMARY KEY,
    revision_id CHAR(26) NOT NULL,
    ordinal INT UNSIGNED NOT NULL,
    format INT UNSIGNED NOT NULL,
    content_json LONGTEXT NOT NULL,
    content_hash CHAR(64) NOT NULL,
    recorded_json LONGTEXT NOT NULL,
    results_hash CHAR(64) NOT NULL,
    shown_json LONGTEXT NOT NULL,
    cautions_json LONGTEXT NOT NULL,
    title_block JSON NOT NULL COMMENT 'number, title and settings as they stood',
    engine_version VARCHAR(40) NOT NULL,
    engine_hash CHAR(64) NOT NULL,
    submitted_by CHAR(26) NOT NULL,
    seq INT UNSIGNED NOT NULL COMMENT 'the last update in it',
    state_vector MEDIUMBLOB NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY submissions_ordinal (revision_id, ordinal),
    CONSTRAINT submissions_revision FOREIGN KEY (revision_id) REFERENCES revisions (id) ON DELETE RESTRICT,
    CONSTRAINT submissions_engine FOREIGN KEY (engine_hash) REFERENCES engines (hash) ON DELETE RESTRICT,
    CONSTRAINT submissions_submitter FOREIGN KEY (submitted_by) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS submission_lines (
    submission_id CHAR(26) NOT NULL,
    line_id ${LINE_ID} NOT NULL,
    hash CHAR(64) NOT NULL,
    ord INT UNSIGNED NOT NULL,
    kind ENUM('line', 'block') NOT NULL,
    PRIMARY KEY (submission_id, line_id),
    CONSTRAINT submission_lines_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS submission_holds (
    submission_id CHAR(26) NOT NULL,
    line_id ${LINE_ID} NOT NULL,
    kind ENUM('given', 'assumed', 'hold') NOT NULL,
    subject VARCHAR(2000) NOT NULL,
    reference VARCHAR(2000) NOT NULL COMMENT 'the document, why, or from whom',
    PRIMARY KEY (submission_id, line_id),
    CONSTRAINT submission_holds_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS sheet_values (
    submission_id CHAR(26) NOT NULL,
    line_id ${LINE_ID} NOT NULL,
    name VARCHAR(120) CHARACTER SET utf8mb4 COLLATE utf8mb4_bin NOT NULL,
    shown VARCHAR(200) NOT NULL COMMENT 'with its unit, as on the sheet',
    PRIMARY KEY (submission_id, line_id),
    KEY sheet_values_name (name),
    CONSTRAINT sheet_values_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS acceptances (
    id CHAR(26) NOT NULL PRIMARY KEY,
    submission_id CHAR(26) NOT NULL,
    line_id ${LINE_ID} NULL,
    what VARCHAR(2000) NOT NULL,
    reason VARCHAR(2000) NOT NULL,
    by_id CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    KEY acceptances_submission (submission_id),
    CONSTRAINT acceptances_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT,
    CONSTRAINT acceptances_user FOREIGN KEY (by_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS checks (
    id CHAR(26) NOT NULL PRIMARY KEY,
    submission_id CHAR(26) NOT NULL,
    checker_id CHAR(26) NOT NULL,
    asked_by CHAR(26) NOT NULL,
    due_date DATE NULL,
    created_at DATETIME(3) NOT NULL,
    ended_at DATETIME(3) NULL,
    outcome ENUM('signed', 'returned', 'recalled', 'reassigned') NULL,
    KEY checks_submission (submission_id),
    CONSTRAINT checks_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT,
    CONSTRAINT checks_checker FOREIGN KEY (checker_id) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT checks_asker FOREIGN KEY (asked_by) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS ticks (
    submission_id CHAR(26) NOT NULL,
    line_id ${LINE_ID} NOT NULL,
    checker_id CHAR(26) NOT NULL,
    line_hash CHAR(64) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (submission_id, line_id, checker_id),
    CONSTRAINT ticks_line FOREIGN KEY (submission_id, line_id) REFERENCES submission_lines (submission_id, line_id) ON DELETE RESTRICT,
    CONSTRAINT ticks_checker FOREIGN KEY (checker_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS annotations (
    id CHAR(26) NOT NULL PRIMARY KEY,
    revision_id CHAR(26) NOT NULL,
    submission_id CHAR(26) NOT NULL,
    number INT UNSIGNED NOT NULL,
    kind ENUM('must_change', 'query', 'remark') NOT NULL,
    state ENUM('open', 'answered', 'closed') NOT NULL DEFAULT 'open',
    by_id CHAR(26) NOT NULL,
    text VARCHAR(4000) NOT NULL,
    block_id ${LINE_ID} NULL,
    quote VARCHAR(2000) NOT NULL,
    from_pos INT UNSIGNED NULL,
    to_pos INT UNSIGNED NULL,
    rel_from VARBINARY(255) NULL,
    rel_to VARBINARY(255) NULL,
    closed_by CHAR(26) NULL,
    closed_at DATETIME(3) NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY annotations_number (revision_id, number),
    CONSTRAINT annotations_revision FOREIGN KEY (revision_id) REFERENCES revisions (id) ON DELETE RESTRICT,
    CONSTRAINT annotations_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT,
    CONSTRAINT annotations_author FOREIGN KEY (by_id) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT annotations_closer FOREIGN KEY (closed_by) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS annotation_replies (
    id CHAR(26) NOT NULL PRIMARY KEY,
    annotation_id CHAR(26) NOT NULL,
    by_id CHAR(26) NOT NULL,
    text VARCHAR(4000) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    KEY annotation_replies_annotation (annotation_id),
    CONSTRAINT annotation_replies_annotation FOREIGN KEY (annotation_id) REFERENCES annotations (id) ON DELETE RESTRICT,
    CONSTRAINT annotation_replies_author FOREIGN KEY (by_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,
]

export const submissionsAndChecks: Migration = {
  name: '0004-submissions-and-checks',
  up: ({ context }) => runStatements(context, statements),
}
