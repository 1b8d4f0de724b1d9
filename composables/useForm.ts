import type { z } from 'zod'
import { refusalOf } from './useRevision'

/**
 * A form whose rules are the server's own schema: each error stands at its field, the first one gets the focus,
 * and what was typed stays whatever the answer is.
 */
export function useForm<Body>(schema: z.ZodType<Body>, send: (body: Body) => Promise<unknown>) {
  const errors = ref<Record<string, string>>({})
  const problem = ref<string | null>(null)
  const busy = ref(false)

  async function showFirst(form: EventTarget | null) {
    await nextTick()
    if (form instanceof HTMLElement) form.querySelector<HTMLElement>('[aria-invalid="true"], [role="alert"]')?.focus()
  }

  function check(values: unknown): Body | null {
    const parsed = schema.safeParse(values)
    errors.value = {}
    problem.value = null
    if (parsed.success) return parsed.data
    for (const issue of parsed.error.issues) {
      const field = String(issue.path[0] ?? '')
      if (field === '') problem.value ??= issue.message
      else errors.value[field] ??= issue.message
    }
    return null
  }

  function refuse(error: unknown, values: unknown) {
    const refusal = refusalOf(error)
    const field = refusal.field?.split('.')[0]
    const known = field !== undefined && typeof values === 'object' && values !== null && field in values
    if (known) errors.value = { [field]: refusal.text }
    else problem.value = refusal.text
  }

  /** Resolves to whether it was sent and taken. */
  async function submit(values: unknown, event?: Event): Promise<boolean> {
    if (busy.value) return false
    const form = event?.currentTarget ?? null
    const body = check(values)
    if (body === null) {
      await showFirst(form)
      return false
    }
    busy.value = true
    try {
      await send(body)
      return true
    }
    catch (error) {
      refuse(error, values)
      await showFirst(form)
      return false
    }
    finally { busy.value = false }
  }

  return { errors: readonly(errors), problem: readonly(problem), busy: readonly(busy), submit }
}
