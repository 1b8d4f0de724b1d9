import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { isOwnOrigin, mayWrite } from '../../../server/utils/origin'

const HOST = '127.0.0.1:3000'
let before: string | undefined

beforeEach(() => {
  before = process.env.NUXT_SITE_URL
  process.env.NUXT_SITE_URL = 'https://sheets.firm.example'
})
afterEach(() => {
  process.env.NUXT_SITE_URL = before
})

describe('our own origin', () => {
  it.each([
    ['http://127.0.0.1:3000', true],
    ['https://sheets.firm.example', true],
    ['https://sheets.firm.example.evil.example', false],
    ['https://evil.example', false],
    ['http://127.0.0.1:3001', false],
    ['null', false],
    ['', false],
    ['not a url', false],
  ])('%s: %s', (origin, own) => {
    expect(isOwnOrigin(origin, HOST)).toBe(own)
  })

  it('is never assumed', () => {
    expect(isOwnOrigin(undefined, HOST)).toBe(false)
    expect(isOwnOrigin('https://evil.example', null)).toBe(false)
  })
})

describe('a write', () => {
  it('is taken by the browser\'s word', () => {
    expect(mayWrite({ fetchSite: 'same-origin', host: HOST })).toBe(true)
    expect(mayWrite({ fetchSite: 'cross-site', origin: 'http://127.0.0.1:3000', host: HOST })).toBe(false)
    expect(mayWrite({ fetchSite: 'none', host: HOST })).toBe(false)
  })

  it('else needs an origin of ours', () => {
    expect(mayWrite({ origin: 'http://127.0.0.1:3000', host: HOST })).toBe(true)
    expect(mayWrite({ origin: 'https://evil.example', host: HOST })).toBe(false)
    expect(mayWrite({ host: HOST })).toBe(false)
  })
})
