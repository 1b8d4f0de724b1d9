import { describe, expect, it } from 'vitest'
import { ageWords, dateWords, isOverdue, momentWords } from '../../../shared/utils/dates'

describe('dates in words', () => {
  it.each([
    ['2026-12-01', '1 Dec 2026'],
    ['2026-12-01T23:59:59.999Z', '1 Dec 2026'],
    ['2026-03-09T00:00:00Z', '9 Mar 2026'],
    ['nonsense', ''],
    [null, ''],
  ])('%s is "%s"', (iso, words) => expect(dateWords(iso)).toBe(words))

  it('say the hour in UTC', () => expect(momentWords('2026-12-01T09:05:00Z')).toBe('1 Dec 2026, 09:05 UTC'))
  it('count working days', () => expect([0, 1, 4].map(ageWords)).toEqual(['today', '1 working day', '4 working days']))
  it('are in time on the day itself', () => {
    expect(isOverdue('2026-12-04', '2026-12-04T23:00:00Z')).toBe(false)
    expect(isOverdue('2026-12-04', '2026-12-05T00:00:00Z')).toBe(true)
    expect(isOverdue(null, '2026-12-05T00:00:00Z')).toBe(false)
  })
})
