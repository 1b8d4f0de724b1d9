/** Small helpers for rows that are plain DOM. Text only ever enters as text, never as markup. */
import { typesetMath } from '~/composables/useMath'

type Children = readonly (Node | string | null | undefined | false)[]

/** An element with attributes and children; `null`, `undefined` and `false` leave an attribute or child out. */
export function element<Name extends keyof HTMLElementTagNameMap>(name: Name, attributes: Record<string, string | null | undefined> = {}, ...children: Children): HTMLElementTagNameMap[Name] {
  const node = document.createElement(name)
  for (const [key, value] of Object.entries(attributes)) if (value !== null && value !== undefined) node.setAttribute(key, value)
  node.append(...children.filter((child): child is Node | string => child !== null && child !== undefined && child !== false))
  return node
}

/** An island that the editor's caret does not enter. */
export function island(className: string, ...children: Children): HTMLDivElement {
  return element('div', { class: className, contenteditable: 'false' }, ...children)
}

/** Sets or removes an attribute, touching the DOM only where it differs. */
export function mark(node: HTMLElement, name: string, value: string | null): void {
  if (node.getAttribute(name) === value) return
  if (value === null) node.removeAttribute(name)
  else node.setAttribute(name, value)
}

/** Typesets LaTeX that the engine made; what cannot be set is shown as it is written. */
export function typesetInto(target: HTMLElement, latex: string): void {
  const html = typesetMath(latex, false)
  if (html === null) target.textContent = latex
  else target.innerHTML = html
}
