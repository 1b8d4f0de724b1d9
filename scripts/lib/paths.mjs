/** Folders and small files that the scripts share. Everything they write is under DATA, which git ignores. */
import { chmodSync, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

export const ROOT = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '')
export const DATA = process.env.POLEWRIGHT_DATA_DIR ? resolve(process.env.POLEWRIGHT_DATA_DIR) : join(ROOT, '.data')
export const TEST_DATA = join(ROOT, '.test')

export function readJson(path) {
  if (!existsSync(path)) return null
  try {
    return JSON.parse(readFileSync(path, 'utf8'))
  }
  catch {
    return null
  }
}

/** Written beside and renamed, so that a kill never leaves half a file; readable by its owner only. */
export function writePrivateJson(path, value) {
  mkdirSync(dirname(path), { recursive: true })
  const beside = `${path}.${process.pid}`
  writeFileSync(beside, `${JSON.stringify(value, null, 2)}\n`, { mode: 0o600 })
  chmodSync(beside, 0o600)
  renameSync(beside, path)
}

/** Stops with a message for a person instead of a stack. */
export class Refusal extends Error {}
