import { describe, expect, it } from 'vitest'
import { homeOf, initialsOf, passwordProblem } from '../../../shared/people'
import { invitePersonSchema, updatePersonSchema } from '../../../shared/schemas/people'

describe('initials', () => {
  it.each([
    ['Ines Varga', 'IV'], ['Ruth van der Osei', 'RO'], ['Åsa Öberg', 'ÅÖ'], ['Plato', 'P'], ['  Marta   Lindqvist ', 'ML'], ['', ''],
  ])('of %s are %s', (name, initials) => {
    expect(initialsOf(name)).toBe(initials)
  })
})

describe('the first role', () => {
  it.each([
    [['checker', 'engineer'], '/queue'], [['engineer', 'checker'], '/work'], [['manager'], '/board'], [['client'], '/issued'], [[], '/issued'],
  ] as const)('%j opens %s', (roles, home) => {
    expect(homeOf(roles)).toBe(home)
  })
})

describe('a password', () => {
  it.each([
    'short', 'aaaaaaaaaaaaaaaa', 'ababababababab', 'password1234', 'PolewrightPolewright', 'ines.varga-at-work', 'x'.repeat(300),
  ])('%s is refused in words', (password) => {
    expect(passwordProblem(password, 'ines.varga@haldenvoss.example')).toMatch(/\w+ .+\.$/)
  })

  it.each(['pole-and-zero-2026', 'three poles and a zero', 'ÄÖÜ äöü ßéè !?'])('%s is good', (password) => {
    expect(passwordProblem(password, 'ines.varga@haldenvoss.example')).toBeNull()
  })
})

describe('who belongs where', () => {
  const person = { email: 'A@B.example ', name: 'Ines Varga', initials: 'IV' }

  it('an address has one spelling', () => {
    expect(invitePersonSchema.parse({ ...person, roles: ['engineer'] }).email).toBe('a@b.example')
  })

  it('a client\'s person names the client, others do not', () => {
    expect(invitePersonSchema.safeParse({ ...person, roles: ['client'] }).error?.issues[0]?.path).toEqual(['organisationId'])
    expect(invitePersonSchema.safeParse({ ...person, roles: ['engineer'], organisationId: '0'.repeat(26) }).success).toBe(false)
  })

  it('what is left out of a change is left alone', () => {
    expect(updatePersonSchema.parse({})).toEqual({})
  })
})
