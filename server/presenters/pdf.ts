/** A name that every file system takes: `C-014_B.pdf`. */
export function pdfName(number: string, revision: string): string {
  const plain = `${number}_${revision}`.normalize('NFKD').replace(/[^\w.-]+/g, '_').replace(/^[._]+/, '')
  return `${plain || 'sheet'}.pdf`
}

/** A download for this person alone. */
export const pdfHeaders = (number: string, revision: string, size: number) => ({
  'content-type': 'application/pdf' as const,
  'content-length': size,
  'content-disposition': `attachment; filename="${pdfName(number, revision)}"`,
  'cache-control': 'private, no-store',
  'x-content-type-options': 'nosniff',
})
