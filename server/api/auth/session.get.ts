/** Public. Who is signed in on this device; null for nobody. */
export default defineEventHandler(async (event) => {
  const actor = await findActor(event)
  return actor ? sessionView(actor.id) : null
})
