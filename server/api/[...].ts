/** Public: an address of the API that does not exist. */
export default defineEventHandler(() => {
  throw notFound('There is no such address here.')
})
