/** Whether a request comes from our own pages. Cookies alone do not say so. */
import { outsideSettings } from './outside'

const hostOf = (origin: string): string | null => URL.canParse(origin) ? new URL(origin).host : null

/** `origin` is the header's value; `host` the one that the request was sent to. */
export function isOwnOrigin(origin: string | null | undefined, host: string | null | undefined): boolean {
  if (!origin) return false
  const from = hostOf(origin)
  return from !== null && (from === host || from === hostOf(outsideSettings().siteUrl))
}

interface OriginHeaders { fetchSite?: string | null, origin?: string | null, host?: string | null }

/** For requests that change something: the browser's own word where it gives one, else the Origin. */
export function mayWrite({ fetchSite, origin, host }: OriginHeaders): boolean {
  if (fetchSite && fetchSite !== 'same-origin') return false
  if (origin) return isOwnOrigin(origin, host) || fetchSite === 'same-origin'
  return fetchSite === 'same-origin'
}
