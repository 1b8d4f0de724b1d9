import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import MathText from '~/components/math/Text.vue'
import UiButton from '~/components/ui/Button.vue'
import UiInput from '~/components/ui/Input.vue'
import UiState from '~/components/ui/State.vue'
import UiTable from '~/components/ui/Table.vue'
import { mayVisit } from '~/composables/useAbility'
import { pressMatches } from '~/composables/useActions'
import { REVISION_STATES } from '#shared/workflow/revision'

describe('a button that cannot be used yet', () => {
  it('stays in reach, says why beside itself, and does nothing', async () => {
    const button = await mountSuspended(UiButton, { props: { why: '6 lines to tick' }, slots: { default: () => 'Sign' } })
    const element = button.get('button')
    expect(element.attributes('disabled')).toBeUndefined()
    expect(element.attributes('aria-disabled')).toBe('true')
    expect(button.get(`[id="${element.attributes('aria-describedby')}"]`).text()).toBe('6 lines to tick')
    await element.trigger('click')
    expect(button.emitted('press')).toBeUndefined()
  })
  it('works when nothing stands in its way', async () => {
    const button = await mountSuspended(UiButton, { slots: { default: () => 'Sign' } })
    await button.get('button').trigger('click')
    expect(button.emitted('press')).toHaveLength(1)
  })
})

describe('a field', () => {
  it('ties label, hint and error to its input', async () => {
    const field = await mountSuspended(UiInput, { props: { label: 'Title', hint: 'Short.', error: 'Type the title.' } })
    const input = field.get('input')
    expect(field.get('label').attributes('for')).toBe(input.attributes('id'))
    expect(input.attributes('aria-invalid')).toBe('true')
    const described = (input.attributes('aria-describedby') ?? '').split(' ').map(id => field.get(`[id="${id}"]`).text())
    expect(described).toEqual(['Short.', 'Type the title.'])
  })
})

describe('a table', () => {
  it('says how it is sorted and turns the order at the second press', async () => {
    const table = await mountSuspended(UiTable, { props: { caption: 'List', columns: [{ key: 'a', label: 'A', sortable: true }], rows: [{ id: '1' }], rowKey: () => '1', sort: { by: 'a', descending: false } } })
    expect(table.get('th').attributes('aria-sort')).toBe('ascending')
    await table.get('th button').trigger('click')
    expect(table.emitted('update:sort')).toEqual([[{ by: 'a', descending: true }]])
  })
})

describe('states', () => {
  it('each have a shape of their own beside the word', async () => {
    const shapes = await Promise.all(REVISION_STATES.map(async state => (await mountSuspended(UiState, { props: { state } })).get('path').attributes('d')))
    expect(new Set(shapes).size).toBeGreaterThanOrEqual(REVISION_STATES.length - 1)
  })
})

describe('formulas', () => {
  it('carry MathML, and neither links nor HTML', async () => {
    const formula = await mountSuspended(MathText, { props: { latex: '\\frac{1}{2}' } })
    expect(formula.find('math').exists()).toBe(true)
    const hostile = await mountSuspended(MathText, { props: { latex: '\\href{javascript:alert(1)}{x} \\htmlClass{y}{z}' } })
    expect(hostile.find('a').exists()).toBe(false)
    expect(hostile.html()).not.toContain('class="y"')
  })
  it('are shown as written where they cannot be typeset', async () => {
    expect((await mountSuspended(MathText, { props: { latex: '\\frac{' } })).get('code').text()).toBe('\\frac{')
  })
})

describe('keys of actions', () => {
  const press = (init: KeyboardEventInit) => new KeyboardEvent('keydown', init)
  it('match with exactly their modifiers', () => {
    expect(pressMatches(press({ key: 'm', code: 'KeyM', altKey: true }), 'Alt+M')).toBe(true)
    expect(pressMatches(press({ key: 'm', code: 'KeyM', altKey: true, ctrlKey: true }), 'Alt+M')).toBe(false)
    expect(pressMatches(press({ key: 'Enter', ctrlKey: true }), 'Ctrl+Enter')).toBe(true)
    expect(pressMatches(press({ key: 't', code: 'KeyT' }), 'T')).toBe(true)
    expect(pressMatches(press({ key: 'T', code: 'KeyT', shiftKey: true }), 'T')).toBe(false)
  })
  it('go by the key where Alt changes the letter', () => {
    expect(pressMatches(press({ key: 'µ', code: 'KeyM', altKey: true }), 'Alt+M')).toBe(true)
  })
})

describe('a form', () => {
  it('puts each error at its field and sends nothing', async () => {
    const send = vi.fn(async () => {})
    const { errors, submit } = useForm(z.object({ title: z.string().min(1, 'Type the title.'), number: z.string().min(1, 'Type the number.') }), send)
    expect(await submit({ title: '', number: 'C-1' })).toBe(false)
    expect(errors.value).toEqual({ title: 'Type the title.' })
    expect(send).not.toHaveBeenCalled()
  })
  it('puts the server\'s refusal where it belongs', async () => {
    const refused = (data: unknown) => async () => { throw Object.assign(new Error('refused'), { statusCode: 409, data: { data } }) }
    const schema = z.object({ number: z.string() })
    const atField = useForm(schema, refused({ code: 'taken', field: 'number', help: 'C-1 is taken.' }))
    await atField.submit({ number: 'C-1' })
    expect(atField.errors.value).toEqual({ number: 'C-1 is taken.' })
    const asWhole = useForm(schema, refused({ code: 'archived', help: 'The project is archived.' }))
    await asWhole.submit({ number: 'C-1' })
    expect(asWhole.problem.value).toBe('The project is archived.')
  })
})

describe('where people are led', () => {
  it('keeps clients on their own pages and staff on theirs', () => {
    expect(mayVisit('/issued/x', ['client'])).toBe(true)
    expect(mayVisit('/projects/x', ['client'])).toBe(false)
    expect(mayVisit('/projects/x', ['engineer'])).toBe(true)
    expect(mayVisit('/projects/new', ['engineer'])).toBe(false)
    expect(mayVisit('/board', ['engineer', 'checker'])).toBe(false)
    expect(mayVisit('/account', ['client'])).toBe(true)
  })
})
