/** Servers of a test's own, to be stopped, killed and started again; on the same database unless another is given. */
import { freePort } from '../../scripts/lib/process.mjs'
import { serverEnvironment, startServer } from '../../scripts/lib/server.mjs'
import type { RunningServer } from '../../scripts/lib/server.mjs'
import { base } from './base'

export interface OwnServer extends RunningServer { port: number, lines: string[] }

/** Give `port` to come back at the same address after a kill. */
export async function startOwnServer({ port, env = {}, databaseUrl }: { port?: number, env?: Record<string, string>, databaseUrl?: string } = {}): Promise<OwnServer> {
  const chosen = port ?? await freePort()
  const lines: string[] = []
  const environment = serverEnvironment({ databaseUrl: databaseUrl ?? base().databaseUrl, dataDir: base().dataDir, port: chosen, password: base().sessionPassword })
  const server = await startServer({ entry: base().entry, env: { ...environment, ...env }, onLine: line => lines.push(line) })
  return { ...server, port: chosen, lines }
}
