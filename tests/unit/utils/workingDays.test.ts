import { expect, it } from 'vitest'
import { workingDaysSince } from '../../../shared/utils/workingDays'

const at = (text: string) => new Date(text)

it.each([
  ['2026-12-01T23:00:00Z', '2026-12-01T23:59:00Z', 0],
  ['2026-12-01T23:00:00Z', '2026-12-02T00:01:00Z', 1],
  ['2026-12-04T10:00:00Z', '2026-12-06T10:00:00Z', 0],
  ['2026-12-04T10:00:00Z', '2026-12-07T10:00:00Z', 1],
  ['2026-12-01T10:00:00Z', '2026-12-15T10:00:00Z', 10],
  ['2026-12-05T10:00:00Z', '2026-12-15T10:00:00Z', 7],
  ['2026-12-02T10:00:00Z', '2026-12-01T10:00:00Z', 0],
])('from %s to %s are %i working days', (since, now, days) => {
  expect(workingDaysSince(at(since), at(now))).toBe(days)
})
