import { printParams } from '#shared/schemas/print'
import type { PrintView } from '#shared/types/print'
import { printTokens } from '../../pdf/desk'
import { notFound } from '../../utils/errors'
import { paramsOf } from '../../utils/validation'

/** Public by name only: the token is known to this server's own browser and good for one reading. */
export default defineEventHandler((event): PrintView => {
  const { token } = paramsOf(event, printParams)
  setHeader(event, 'cache-control', 'no-store')
  const view = printTokens.take(token)
  if (!view) throw notFound('There is nothing to print here.')
  return view
})
