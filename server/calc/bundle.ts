/** The engine's bundle: built with the server, known by its SHA-256, and kept in the data folder for as long as records name it. */
import { createHash } from 'node:crypto'
import { mkdir, readFile, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { outsideSettings } from '../utils/outside'

export const BUNDLE_NAME = 'engine-process.mjs'

export interface EngineBundle { path: string, hash: string }

/** POLEWRIGHT_ENGINE_BUNDLE names it where the server does not run from its build. */
const builtPath = (): string => process.env.POLEWRIGHT_ENGINE_BUNDLE || fileURLToPath(new URL(`./${BUNDLE_NAME}`, import.meta.url))

async function keep(bytes: Buffer, hash: string): Promise<void> {
  const folder = join(outsideSettings().dataDir, 'engines')
  const path = join(folder, `${hash}.mjs`)
  await mkdir(folder, { recursive: true })
  const present = await readFile(path).catch(() => null)
  if (present?.equals(bytes)) return
  await writeFile(`${path}.part`, bytes)
  await rename(`${path}.part`, path)
}

async function open(): Promise<EngineBundle> {
  const path = builtPath()
  const bytes = await readFile(path)
  const hash = createHash('sha256').update(bytes).digest('hex')
  await keep(bytes, hash)
  return { path, hash }
}

let opened: Promise<EngineBundle> | null = null

export function engineBundle(): Promise<EngineBundle> {
  opened ??= open().catch((error: unknown) => {
    opened = null
    throw error
  })
  return opened
}
