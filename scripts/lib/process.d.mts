export function freePort(wanted?: number): Promise<number>
export function run(command: string, args: string[], options?: { quiet?: boolean, env?: Record<string, string | undefined>, cwd?: string, input?: string }): string
export function endProcess(pid: number, options?: { signal?: string, patience?: number }): Promise<void>
export function isAlive(pid: number): boolean
