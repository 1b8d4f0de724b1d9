import type { SheetDocument } from '#shared/document/types'

/** The document with its pictures' frames empty: a picture belongs to one project and is not shown in another. */
export const withoutPictures = (document: SheetDocument): SheetDocument => ({
  type: 'doc',
  content: document.content.map(block => (block.type === 'figure' ? { ...block, attrs: { ...block.attrs, attachment: '' } } : block)),
})
