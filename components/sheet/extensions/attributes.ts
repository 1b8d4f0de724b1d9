import type { Attribute } from '@tiptap/core'

/** A value from a colleague's browser is coerced before it is shown: only text and only so long. */
export function text(value: unknown, limit = 2000): string {
  return typeof value === 'string' ? value.slice(0, limit) : ''
}

/** An attribute that holds text and is kept in copied markup as `data-<name>`. */
export function textAttribute(name: string, fallback = ''): Partial<Attribute> {
  return {
    default: fallback,
    validate: 'string',
    parseHTML: element => element.getAttribute(`data-${name}`) ?? fallback,
    renderHTML: attributes => text(attributes[name]) ? { [`data-${name}`]: text(attributes[name]) } : {},
  }
}

/** An attribute that is on or off. */
export function switchAttribute(name: string, fallback: boolean): Partial<Attribute> {
  return {
    default: fallback,
    validate: 'boolean',
    parseHTML: element => (element.getAttribute(`data-${name}`) ?? String(fallback)) === 'true',
    renderHTML: attributes => ({ [`data-${name}`]: String(attributes[name] === true) }),
  }
}

/** `id` and `reference`, which every top-level block has. Ids are given by the identity extension. */
export const blockAttributes = () => ({
  id: textAttribute('id'),
  reference: textAttribute('reference'),
})
