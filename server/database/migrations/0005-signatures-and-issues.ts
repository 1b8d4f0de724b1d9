import { runStatements, TABLE, type Migration } from './statements'

/** Signatures form one chain (`previous_id`); the private key is a file of the server, its public part is kept here for as long as records are. */
const statements = [
  `CREATE TABLE IF NOT EXISTS signing_keys (
    id CHAR(16) NOT NULL PRIMARY KEY COMMENT 'start of the SHA-256 of the public key',
    public_key TEXT NOT NULL COMMENT 'Ed25519, SPKI in PEM',
    valid_from DATETIME(3) NOT NULL,
    valid_to DATETIME(3) NULL
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS signatures (
    id CHAR(26) NOT NULL PRIMARY KEY,
    revision_id CHAR(26) NOT NULL,
    submission_id CHAR(26) NOT NULL,
    meaning ENUM('prepared', 'checked', 'approved') NOT NULL,
    user_id CHAR(26) NOT NULL,
    signer_name VARCHAR(200) NOT NULL,
    statement VARCHAR(4000) NOT NULL,
    method VARCHAR(40) NULL,
    extent VARCHAR(2000) NULL,
    hash CHAR(64) NOT NULL COMMENT 'of the content that was signed',
    payload_json TEXT NOT NULL COMMENT 'canonical; what the signature is over',
    signature VARCHAR(200) NOT NULL COMMENT 'base64',
    key_id CHAR(16) NOT NULL,
    previous_id CHAR(26) NULL,
    signed_at DATETIME(3) NOT NULL,
    voided_at DATETIME(3) NULL,
    void_reason VARCHAR(4000) NULL,
    created_at DATETIME(3) NOT NULL,
    KEY signatures_revision (revision_id, signed_at),
    CONSTRAINT signatures_revision FOREIGN KEY (revision_id) REFERENCES revisions (id) ON DELETE RESTRICT,
    CONSTRAINT signatures_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT,
    CONSTRAINT signatures_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT,
    CONSTRAINT signatures_key FOREIGN KEY (key_id) REFERENCES signing_keys (id) ON DELETE RESTRICT,
    CONSTRAINT signatures_previous FOREIGN KEY (previous_id) REFERENCES signatures (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS issues (
    id CHAR(26) NOT NULL PRIMARY KEY,
    revision_id CHAR(26) NOT NULL,
    submission_id CHAR(26) NOT NULL,
    purpose ENUM('information', 'comment', 'approval', 'construction', 'as_built') NOT NULL,
    code VARCHAR(40) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    content_hash CHAR(64) NOT NULL,
    pdf_storage_key VARCHAR(200) NULL,
    pdf_hash CHAR(64) NULL,
    pdf_size INT UNSIGNED NULL COMMENT 'bytes',
    requested_by CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    issued_at DATETIME(3) NULL,
    failed_at DATETIME(3) NULL,
    failure VARCHAR(2000) NULL,
    UNIQUE KEY issues_code (code),
    KEY issues_revision (revision_id, created_at),
    CONSTRAINT issues_revision FOREIGN KEY (revision_id) REFERENCES revisions (id) ON DELETE RESTRICT,
    CONSTRAINT issues_submission FOREIGN KEY (submission_id) REFERENCES submissions (id) ON DELETE RESTRICT,
    CONSTRAINT issues_requester FOREIGN KEY (requested_by) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS transmittals (
    id CHAR(26) NOT NULL PRIMARY KEY,
    issue_id CHAR(26) NOT NULL,
    user_id CHAR(26) NOT NULL,
    email VARCHAR(320) NOT NULL COMMENT 'the address as it was',
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY transmittals_once (issue_id, user_id),
    CONSTRAINT transmittals_issue FOREIGN KEY (issue_id) REFERENCES issues (id) ON DELETE RESTRICT,
    CONSTRAINT transmittals_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,
]

export const signaturesAndIssues: Migration = {
  name: '0005-signatures-and-issues',
  up: ({ context }) => runStatements(context, statements),
}
