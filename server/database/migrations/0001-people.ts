import { runStatements, TABLE, type Migration } from './statements'

/** People, what they may do, and how they are known again. */
const statements = [
  `CREATE TABLE IF NOT EXISTS organisations (
    id CHAR(26) NOT NULL PRIMARY KEY,
    name VARCHAR(160) NOT NULL,
    kind ENUM('firm', 'client') NOT NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY organisations_name (name)
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS users (
    id CHAR(26) NOT NULL PRIMARY KEY,
    email VARCHAR(191) NOT NULL,
    name VARCHAR(120) NOT NULL,
    initials VARCHAR(6) NOT NULL,
    password_hash VARCHAR(255) CHARACTER SET ascii COLLATE ascii_bin NULL,
    organisation_id CHAR(26) NULL,
    disabled_at DATETIME(3) NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY users_email (email),
    CONSTRAINT users_organisation FOREIGN KEY (organisation_id) REFERENCES organisations (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS user_roles (
    user_id CHAR(26) NOT NULL,
    role VARCHAR(20) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    position TINYINT UNSIGNED NOT NULL COMMENT 'the first role decides where the person lands',
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (user_id, role),
    CONSTRAINT user_roles_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS sessions (
    id CHAR(26) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY,
    user_id CHAR(26) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    last_seen_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    revoked_at DATETIME(3) NULL,
    user_agent VARCHAR(255) NOT NULL,
    ip VARCHAR(45) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    KEY sessions_user (user_id, revoked_at),
    CONSTRAINT sessions_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS one_time_links (
    id CHAR(26) NOT NULL PRIMARY KEY,
    kind VARCHAR(20) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    user_id CHAR(26) NOT NULL,
    token_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    created_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    used_at DATETIME(3) NULL,
    UNIQUE KEY one_time_links_token (token_hash),
    KEY one_time_links_user (user_id, kind),
    CONSTRAINT one_time_links_user FOREIGN KEY (user_id) REFERENCES users (id) ON DELETE RESTRICT
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS login_attempts (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    account CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL COMMENT 'SHA-256 of the address that was typed',
    ip VARCHAR(45) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    succeeded BOOLEAN NOT NULL,
    created_at DATETIME(3) NOT NULL,
    KEY login_attempts_account (account, created_at),
    KEY login_attempts_ip (ip, created_at),
    KEY login_attempts_age (created_at)
  ) ${TABLE}`,

  `CREATE TABLE IF NOT EXISTS settings (
    \`key\` VARCHAR(60) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY,
    value JSON NOT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL
  ) ${TABLE}`,
]

export const people: Migration = {
  name: '0001-people',
  up: ({ context }) => runStatements(context, statements),
}
