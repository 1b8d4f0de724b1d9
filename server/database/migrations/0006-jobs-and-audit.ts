import { runStatements, TABLE, type Migration } from './statements'

/** Work to be done after a transition, written in its transaction; and the record of what happened, each entry holding the hash of the one before. */
const statements = [
  `CREATE TABLE IF NOT EXISTS jobs (
    id CHAR(26) NOT NULL PRIMARY KEY,
    kind VARCHAR(40) NOT NULL,
    unique_key VARCHAR(191) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    payload JSON NOT NULL,
    state ENUM('waiting', 'running', 'done', 'given_up') NOT NULL DEFAULT 'waiting',
    attempts INT UNSIGNED NOT NULL DEFAULT 0,
    run_after DATETIME(3) NOT NULL,
    leased_until DATETIME(3) NULL,
    lease_token CHAR(26) NULL,
    last_error VARCHAR(2000) NULL,
    created_at DATETIME(3) NOT NULL,
    ended_at DATETIME(3) NULL,
    UNIQUE KEY jobs_once (unique_key),
    KEY jobs_next (state, run_after)
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS sent_messages (
    message_id VARCHAR(191) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY,
    job_id CHAR(26) NOT NULL,
    sent_at DATETIME(3) NOT NULL,
    CONSTRAINT sent_messages_job FOREIGN KEY (job_id) REFERENCES jobs (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS notifications (
    id CHAR(26) NOT NULL PRIMARY KEY,
    user_id CHAR(26) NOT NULL,
    revision_id CHAR(26) NULL,
    kind VARCHAR(40) NOT NULL,
    text VARCHAR(1000) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    read_at DATETIME(3) NULL,
    KEY notifications_user (user_id, read_at, created_at),
    CONSTRAINT notifications_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT notifications_revision FOREIGN KEY (revision_id) REFERENCES revisions (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS audit_entries (
    seq BIGINT UNSIGNED NOT NULL PRIMARY KEY,
    at DATETIME(3) NOT NULL,
    actor_id CHAR(26) NULL,
    event VARCHAR(60) NOT NULL,
    subject JSON NOT NULL,
    data JSON NOT NULL,
    previous_hash CHAR(64) NOT NULL,
    hash CHAR(64) NOT NULL,
    KEY audit_entries_event (event, at),
    CONSTRAINT audit_entries_actor FOREIGN KEY (actor_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS audit_head (
    id TINYINT UNSIGNED NOT NULL PRIMARY KEY COMMENT 'one row; its lock orders the chain',
    seq BIGINT UNSIGNED NOT NULL,
    hash CHAR(64) NOT NULL
  ) ${TABLE}`,

  `INSERT IGNORE INTO audit_head (id, seq, hash) VALUES (1, 0, REPEAT('0', 64))`,
]

export const jobsAndAudit: Migration = {
  name: '0006-jobs-and-audit',
  up: ({ context }) => runStatements(context, statements),
}
