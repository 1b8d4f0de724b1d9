import { expect, it } from 'vitest'
import { Allowance } from '../../../../server/collab/allowance'
import { COLLABORATION_LIMITS } from '../../../../shared/limits'

it('lets a burst through, then the sustained rate, and refills', () => {
  let now = 0
  const allowance = new Allowance(() => now)
  for (let i = 0; i < COLLABORATION_LIMITS.framesAtOnce; i++) expect(allowance.take(10)).toBe(true)
  expect(allowance.take(10)).toBe(false)
  now += 1000
  for (let i = 0; i < COLLABORATION_LIMITS.framesPerSecond - 1; i++) expect(allowance.take(10)).toBe(true)
  expect(allowance.take(10)).toBe(false)
})

it('counts bytes too', () => {
  const allowance = new Allowance(() => 0)
  expect(allowance.take(COLLABORATION_LIMITS.bytesAtOnce)).toBe(true)
  expect(allowance.take(1)).toBe(false)
})
