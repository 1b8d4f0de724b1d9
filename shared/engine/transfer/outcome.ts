/** What a figure of a transfer function comes to: a value, or the reason why it has none. */

export interface Notice {
  /** Stable identifier, such as `cancelled-pair`. */
  code: string
  /** In words for the engineer. */
  message: string
}

export interface Refusal extends Notice {
  ok: false
  /** What to do about it. */
  hint?: string
}

export type Outcome<T> = { ok: true, value: T, warnings?: Notice[] } | Refusal

export function found<T>(value: T, warnings: readonly Notice[] = []): Outcome<T> {
  return warnings.length > 0 ? { ok: true, value, warnings: [...warnings] } : { ok: true, value }
}

export function refuse(code: string, message: string, hint?: string): Refusal {
  return hint === undefined ? { ok: false, code, message } : { ok: false, code, message, hint }
}
