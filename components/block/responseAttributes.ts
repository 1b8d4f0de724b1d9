import { text } from '../sheet/extensions/attributes'
import type { ResponseAttributes } from '#shared/document/types'

/** Attributes of a response block as they may be shown: whatever a merge brought, text is text and a switch a switch. */
export function responseAttributes(attrs: Readonly<Record<string, unknown>>): ResponseAttributes {
  const expression = (name: string) => text(attrs[name], 200)
  return {
    id: text(attrs.id, 64),
    reference: text(attrs.reference, 500),
    transfer: text(attrs.transfer, 64),
    from: expression('from'),
    to: expression('to'),
    duration: expression('duration'),
    supply: expression('supply'),
    rating: expression('rating'),
    caption: text(attrs.caption, 500),
    showPhase: attrs.showPhase !== false,
    showStep: attrs.showStep === true,
    showAsymptotes: attrs.showAsymptotes !== false,
  }
}
