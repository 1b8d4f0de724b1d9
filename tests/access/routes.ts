/** The routes as they are in the tree: every file that Nitro answers requests with. */
import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { ROOT } from '../../scripts/lib/paths.mjs'

function* filesUnder(folder: string): Generator<string> {
  for (const entry of readdirSync(join(ROOT, folder), { withFileTypes: true })) {
    const path = `${folder}/${entry.name}`
    if (entry.isDirectory()) yield* filesUnder(path)
    else if (path.endsWith('.ts')) yield path
  }
}

export const routeFiles = (): string[] => ['server/api', 'server/routes'].flatMap(folder => [...filesUnder(folder)]).sort()
