import type { LineResult } from '#shared/engine/types'

/** Names of the transfer functions that the sheet defines, in reading order. */
export function transferNames(results: readonly LineResult[]): string[] {
  return results.flatMap(result => result.kind === 'transfer' && result.defines ? [result.defines] : [])
}

/** The one defined last, which is mostly the one to be plotted. */
export const lastTransfer = (results: readonly LineResult[]): string => transferNames(results).at(-1) ?? ''
