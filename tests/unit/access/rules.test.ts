import { describe, expect, it } from 'vitest'
import { routeFiles } from '../../access/routes'
import { RULES } from '../../access/rules'
import { Tally } from '../../access/tally'

describe('the rules of access', () => {
  it('say of every route who may use it, once', () => {
    const ruled = RULES.map(rule => rule.file).sort()
    expect(ruled).toEqual(routeFiles())
  })

  it('try every route that is a project\'s with another project\'s object, unless managers see all', () => {
    const exempt = RULES.filter(rule => rule.expect['engineer who is no member'] === 404 && rule.expect['right role'] !== 404 && rule.foreign === null)
    for (const rule of exempt) expect(rule.right({ own: { manager: 'manager' } } as never)).toBe('manager')
  })

  it('count what failed', () => {
    const tally = new Tally()
    tally.check(true, 'one', () => '')
    expect([tally.passed, tally.failed]).toEqual([1, 0])
  })
})
