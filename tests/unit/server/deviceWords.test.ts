import { describe, expect, it } from 'vitest'
import { deviceWords } from '../../../server/presenters/people'

describe('a device in words', () => {
  it.each([
    ['Mozilla/5.0 (X11; Linux x86_64; rv:133.0) Gecko/20100101 Firefox/133.0', 'Firefox on Linux'],
    ['Mozilla/5.0 (Windows NT 10.0; Win64; x64) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/131.0.0.0 Safari/537.36 Edg/131.0.0.0', 'Edge on Windows'],
    ['Mozilla/5.0 (iPhone; CPU iPhone OS 18_1 like Mac OS X) AppleWebKit/605.1.15 (KHTML, like Gecko) Version/18.1 Mobile/15E148 Safari/604.1', 'Safari on iOS'],
    ['curl/8.5.0', 'Unknown device'],
    ['', 'Unknown device'],
  ])('%s', (userAgent, words) => {
    expect(deviceWords(userAgent)).toBe(words)
  })
})
