/** Public: harmless when nobody is signed in. */
export default defineEventHandler(async (event) => {
  await closeSession(event)
  setResponseStatus(event, 204)
})
