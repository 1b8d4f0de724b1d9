import katex from 'katex'

const LONGEST = 4000
const REMEMBERED = 2000
const memory = new Map<string, string | null>()

/**
 * LaTeX to HTML with MathML. Untrusted input stays harmless: no links, no HTML, no macros kept between calls,
 * bounded size and expansion. Null where KaTeX refuses, so that the caller shows the text itself.
 */
export function typesetMath(latex: string, display: boolean): string | null {
  const key = `${display ? 'd' : 'i'}${latex}`
  const known = memory.get(key)
  if (known !== undefined) return known
  const html = latex.length > LONGEST ? null : render(latex, display)
  if (memory.size >= REMEMBERED) memory.clear()
  memory.set(key, html)
  return html
}

function render(latex: string, display: boolean): string | null {
  try {
    return katex.renderToString(latex, {
      displayMode: display,
      output: 'htmlAndMathml',
      trust: false,
      strict: 'ignore',
      maxSize: 12,
      maxExpand: 500,
      throwOnError: true,
    })
  }
  catch {
    return null
  }
}
