/** One JSON line an event on standard output: no content of sheets, no secrets, no addresses of people. */
type Level = 'info' | 'warn' | 'error'

export function log(level: Level, event: string, fields: Record<string, unknown> = {}): void {
  const line = { time: new Date().toISOString(), level, event, ...fields }
  process.stdout.write(`${JSON.stringify(line)}\n`)
}

/** What may be logged of an error: its kind, words and place. */
export function errorFields(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { error: String(error) }
  return { error: error.name, message: error.message, stack: error.stack?.split('\n').slice(1, 8).map(line => line.trim()) }
}
