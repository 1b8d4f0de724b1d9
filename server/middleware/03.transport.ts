import { outsideSettings } from '../utils/outside'

const HALF_A_YEAR = 15_768_000

/** Browsers that have come by https come by https from then on. */
export default defineEventHandler((event) => {
  if (outsideSettings().siteUrl.startsWith('https:')) setHeader(event, 'strict-transport-security', `max-age=${HALF_A_YEAR}`)
})
