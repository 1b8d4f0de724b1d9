const READS = new Set(['GET', 'HEAD', 'OPTIONS'])

/** Requests that change something come from our own pages only, and reads change nothing. */
export default defineEventHandler((event) => {
  if (READS.has(event.method)) return
  const own = mayWrite({
    fetchSite: getHeader(event, 'sec-fetch-site'),
    origin: getHeader(event, 'origin'),
    host: getHeader(event, 'host'),
  })
  if (own) return
  log('warn', 'foreign_origin', { method: event.method, path: event.path.split('?')[0], origin: getHeader(event, 'origin') ?? null })
  throw notAllowed('This request did not come from Polewright\'s own pages.', 'foreign_origin')
})
