/** What a PDF carries besides its pages: what it is, and the source and results that it shows, as files. */
import { AFRelationship, PDFDocument } from 'pdf-lib'

export interface PdfContents {
  title: string
  author: string
  subject: string
  keywords: string[]
  /** Time of the approval, ISO 8601. */
  at: string
  /** Canonical text whose SHA-256 is printed on the sheet. */
  source: string
  results: string
}

export const SOURCE_NAME = 'sheet-source.json'
export const RESULTS_NAME = 'sheet-results.json'

/** The same pages with information and two attached files. `useObjectStreams: false` keeps the form that the seal can be put into. */
export async function withContents(pdf: Uint8Array, contents: PdfContents): Promise<Buffer> {
  const document = await PDFDocument.load(pdf, { updateMetadata: false })
  const at = new Date(contents.at)
  document.setTitle(contents.title, { showInWindowTitleBar: true })
  document.setAuthor(contents.author)
  document.setSubject(contents.subject)
  document.setKeywords(contents.keywords)
  document.setCreator('Polewright')
  document.setProducer('Polewright')
  document.setLanguage('en')
  document.setCreationDate(at)
  document.setModificationDate(at)
  const file = { mimeType: 'application/json', creationDate: at, modificationDate: at }
  await document.attach(new TextEncoder().encode(contents.source), SOURCE_NAME, { ...file, description: 'Canonical source of this sheet (RFC 8785); its SHA-256 is the content hash', afRelationship: AFRelationship.Source })
  await document.attach(new TextEncoder().encode(contents.results), RESULTS_NAME, { ...file, description: 'Recorded results of this sheet (RFC 8785)', afRelationship: AFRelationship.Data })
  return Buffer.from(await document.save({ useObjectStreams: false }))
}
