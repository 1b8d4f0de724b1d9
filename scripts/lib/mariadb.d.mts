export interface Mariadb {
  url: (schema: string) => string
  run: (statements: string) => void
  createSchema: (schema: string) => void
  pid: () => number
  stop: () => Promise<void>
}
export function startMariadb(folder: string): Promise<Mariadb>
export function stopMariadb(folder: string): Promise<void>
