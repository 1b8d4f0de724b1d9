export function sourceHash(): string
export function ensureBuild(where: { output: string, buildDir: string, mayBeStale?: boolean }): Promise<string>
