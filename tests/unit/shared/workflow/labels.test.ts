import { describe, expect, it } from 'vitest'
import { firstLabel, nextLabel, nextLetters } from '../../../../shared/workflow/labels'
import { possibleEvents, REVISION_EVENTS, REVISION_STATES, transition } from '../../../../shared/workflow/revision'

describe('revision labels', () => {
  it('leave out I and O and go on with two letters after Z', () => {
    expect(['A', 'H', 'N', 'Z', 'AZ', 'ZZ', 'AH'].map(nextLetters)).toEqual(['B', 'J', 'P', 'AA', 'BA', 'AAA', 'AJ'])
    expect(() => nextLetters('I')).toThrow()
  })

  it('are P1, P2 … until an issue for construction, then A, B …', () => {
    expect(firstLabel('letters')).toBe('P1')
    expect(nextLabel('letters', ['P1'], false)).toBe('P2')
    expect(nextLabel('letters', ['P1', 'P2'], true)).toBe('A')
    expect(nextLabel('letters', ['P1', 'A'], true)).toBe('B')
    expect(nextLabel('letters', ['P1', 'A', 'P'], true)).toBe('Q')
    expect(nextLabel('letters', Array.from({ length: 10 }, (_, i) => `P${i + 1}`), false)).toBe('P11')
  })

  it('are numbers from 0 where the project counts so', () => {
    expect(firstLabel('numbers')).toBe('0')
    expect(nextLabel('numbers', ['0', '1', '10'], true)).toBe('11')
  })
})

describe('the state machine', () => {
  it('has exactly the steps of the record', () => {
    const steps = REVISION_STATES.flatMap(state => possibleEvents(state).map((event) => {
      const outcome = transition(state, event)
      return `${state} ${event} ${outcome.ok ? outcome.state : 'refused'}`
    }))
    expect(steps.sort()).toEqual([
      'checked approve issuing', 'checked return draft', 'draft cancel cancelled', 'draft submit for_checking', 'for_checking recall draft',
      'for_checking return draft', 'for_checking sign checked', 'issued supersede superseded', 'issued withdraw withdrawn',
      'issuing issue_given_up checked', 'issuing pdf_stored issued', 'superseded withdraw withdrawn',
    ])
  })

  it('refuses every other, naming state and event', () => {
    for (const state of REVISION_STATES) {
      for (const event of REVISION_EVENTS) {
        if (!possibleEvents(state).includes(event)) expect(transition(state, event)).toEqual({ ok: false, code: 'wrong_state', state, event })
      }
    }
  })
})
