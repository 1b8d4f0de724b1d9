/** What the tests' server stands on; handed to each process as one variable, so that helpers work outside vitest too. */
export interface TestBase {
  url: string
  databaseUrl: string
  dataDir: string
  sessionPassword: string
  /** The built server's file, for tests that start and kill servers of their own. */
  entry: string
  pid: number
}

export function base(): TestBase {
  const given = process.env.POLEWRIGHT_TEST_BASE
  if (!given) throw new Error('These helpers need a test server: run them by vitest, or by scripts/check-access.mjs.')
  return JSON.parse(given) as TestBase
}

/** Points the application's own modules at the tests' database. Before any of them is imported. */
export function useBase(given: TestBase): void {
  process.env.POLEWRIGHT_TEST_BASE = JSON.stringify(given)
  process.env.DATABASE_URL = given.databaseUrl
  process.env.POLEWRIGHT_DATA_DIR = given.dataDir
  process.env.NUXT_SITE_URL = given.url
}
