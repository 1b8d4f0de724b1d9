import { runStatements, TABLE, type Migration } from './statements'

/**
 * The living document of a draft. `revision_docs` is the row that every append and every freeze locks:
 * `state` is the revision's, `epoch` counts the freezes, `next_seq` is the number the next update gets (the first is 1).
 * A snapshot holds every update up to and including its `seq`.
 */
const statements = [
  `CREATE TABLE IF NOT EXISTS revision_docs (
    revision_id CHAR(26) NOT NULL PRIMARY KEY,
    state ENUM('draft', 'for_checking', 'checked', 'issuing', 'issued', 'superseded', 'withdrawn', 'cancelled') NOT NULL,
    epoch INT UNSIGNED NOT NULL DEFAULT 1,
    next_seq INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    CONSTRAINT revision_docs_revision FOREIGN KEY (revision_id) REFERENCES revisions (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS revision_updates (
    revision_id CHAR(26) NOT NULL,
    seq INT UNSIGNED NOT NULL,
    epoch INT UNSIGNED NOT NULL,
    user_id CHAR(26) NOT NULL,
    bytes MEDIUMBLOB NOT NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (revision_id, seq),
    CONSTRAINT revision_updates_doc FOREIGN KEY (revision_id) REFERENCES revision_docs (revision_id) ON DELETE RESTRICT,
    CONSTRAINT revision_updates_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS revision_snapshots (
    revision_id CHAR(26) NOT NULL,
    seq INT UNSIGNED NOT NULL COMMENT 'the last update in it',
    bytes LONGBLOB NOT NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (revision_id, seq),
    CONSTRAINT revision_snapshots_doc FOREIGN KEY (revision_id) REFERENCES revision_docs (revision_id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS yjs_clients (
    revision_id CHAR(26) NOT NULL,
    client_id BIGINT UNSIGNED NOT NULL,
    user_id CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (revision_id, client_id),
    CONSTRAINT yjs_clients_doc FOREIGN KEY (revision_id) REFERENCES revision_docs (revision_id) ON DELETE RESTRICT,
    CONSTRAINT yjs_clients_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS contributors (
    revision_id CHAR(26) NOT NULL,
    user_id CHAR(26) NOT NULL,
    inherited BOOLEAN NOT NULL DEFAULT FALSE COMMENT 'came with the content this revision was started from',
    first_at DATETIME(3) NOT NULL,
    PRIMARY KEY (revision_id, user_id),
    CONSTRAINT contributors_revision FOREIGN KEY (revision_id) REFERENCES revisions (id) ON DELETE RESTRICT,
    CONSTRAINT contributors_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS restore_points (
    id CHAR(26) NOT NULL PRIMARY KEY,
    revision_id CHAR(26) NOT NULL,
    name VARCHAR(200) NOT NULL,
    seq INT UNSIGNED NOT NULL COMMENT 'the last update in it',
    bytes LONGBLOB NOT NULL,
    created_by CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    KEY restore_points_revision (revision_id, seq),
    CONSTRAINT restore_points_doc FOREIGN KEY (revision_id) REFERENCES revision_docs (revision_id) ON DELETE RESTRICT,
    CONSTRAINT restore_points_creator FOREIGN KEY (created_by) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,
]

export const documents: Migration = {
  name: '0003-documents',
  up: ({ context }) => runStatements(context, statements),
}
