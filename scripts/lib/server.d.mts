export interface RunningServer {
  url: string
  pid: number
  ended: Promise<{ code: number | null, signal: string | null }>
  stop: () => Promise<void>
  kill: () => Promise<void>
}
export function sessionPassword(dataDir: string): string
export function serverEnvironment(options: { databaseUrl: string, dataDir: string, port: number, siteUrl?: string, password?: string }): Record<string, string>
export function startServer(options: { entry: string, env: Record<string, string>, onLine?: (line: string) => void, patience?: number }): Promise<RunningServer>
