import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { build } from 'esbuild'
import { describe, expect, it } from 'vitest'

const ROOT = process.cwd()

const sourcesIn = (folder: string): string[] => readdirSync(join(ROOT, folder), { recursive: true, encoding: 'utf8' })
  .filter(path => path.endsWith('.ts') && !path.endsWith('.d.ts'))
  .map(path => `${folder}/${path}`)

/** What each file imports of ours when it runs; imports of types alone are gone by then. */
async function importGraph(folders: string[]): Promise<Map<string, string[]>> {
  const { metafile } = await build({
    entryPoints: folders.flatMap(sourcesIn),
    absWorkingDir: ROOT,
    bundle: true,
    metafile: true,
    write: false,
    outdir: 'nowhere',
    platform: 'node',
    format: 'esm',
    packages: 'external',
    alias: { '#shared': join(ROOT, 'shared'), '~': ROOT },
    external: ['#imports', '#auth-utils', '*.vue'],
    logLevel: 'silent',
  })
  return new Map(Object.entries(metafile.inputs).map(([file, { imports }]) =>
    [file, imports.filter(one => !one.external && one.kind === 'import-statement').map(one => one.path)]))
}

/** The first cycle that is met, as the files along it. */
function cycleIn(graph: Map<string, string[]>): string[] | null {
  const done = new Set<string>()
  const visit = (file: string, trail: string[]): string[] | null => {
    const at = trail.indexOf(file)
    if (at >= 0) return [...trail.slice(at), file]
    if (done.has(file)) return null
    for (const next of graph.get(file) ?? []) {
      const found = visit(next, [...trail, file])
      if (found) return found
    }
    done.add(file)
    return null
  }
  for (const file of graph.keys()) {
    const found = visit(file, [])
    if (found) return found
  }
  return null
}

describe('imports', () => {
  it('run in no circle', async () => {
    const graph = await importGraph(['shared', 'server'])
    expect(graph.size).toBeGreaterThan(100)
    expect(cycleIn(graph)).toBeNull()
  })

  it('that run in a circle are found', () => {
    expect(cycleIn(new Map([['a', ['b']], ['b', ['c']], ['c', ['b']]]))).toEqual(['b', 'c', 'b'])
  })
})
