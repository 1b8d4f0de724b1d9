import type { QueryInterface } from 'sequelize'

export interface Migration {
  name: string
  up: (parameters: { context: QueryInterface }) => Promise<void>
}

/** What every table ends with. Identifiers of lines and codes are compared byte for byte and say so themselves. */
export const TABLE = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4'

/** An identifier of a line or block within a document: upper and lower case differ. */
export const LINE_ID = 'VARCHAR(80) CHARACTER SET utf8mb4 COLLATE utf8mb4_bin'

/** Runs statements in order. Each commits by itself in MariaDB, so each can be run again after a halt half-way (`IF NOT EXISTS`). */
export async function runStatements(context: QueryInterface, statements: readonly string[]): Promise<void> {
  for (const statement of statements) await context.sequelize.query(statement)
}
