import { execFileSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

export interface PdfFacts {
  pages: string[]
  fonts: { name: string, embedded: boolean }[]
  images: number
  info: string
  attached: Record<string, string>
  seal: string
}

/** The text of all pages. */
export const pdfText = (bytes: Buffer): string => execFileSync('pdftotext', ['-layout', '-', '-'], { input: bytes, encoding: 'utf8' })

/** What Poppler's tools see in a sealed file. */
export function pdfFacts(bytes: Buffer): PdfFacts {
  const folder = mkdtempSync(join(tmpdir(), 'pdf-'))
  const run = (tool: string, ...args: string[]) => execFileSync(tool, args, { cwd: folder, encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] })
  try {
    writeFileSync(join(folder, 'a.pdf'), bytes)
    run('pdfdetach', '-saveall', 'a.pdf')
    const names = [...run('pdfdetach', '-list', 'a.pdf').matchAll(/^\d+: (.*)$/gm)].map(match => match[1]!)
    return {
      pages: run('pdftotext', '-layout', 'a.pdf', '-').split('\f').slice(0, -1),
      fonts: run('pdffonts', 'a.pdf').trimEnd().split('\n').slice(2).map((row) => {
        const [, name, embedded] = /^(\S+).*\s(yes|no) +(?:yes|no) +(?:yes|no) +\d+ +\d+$/.exec(row) ?? []
        return { name: name ?? row, embedded: embedded === 'yes' }
      }),
      images: run('pdfimages', '-list', 'a.pdf').trimEnd().split('\n').length - 2,
      info: run('pdfinfo', 'a.pdf'),
      attached: Object.fromEntries(names.map(name => [name, readFileSync(join(folder, name), 'utf8')])),
      seal: run('pdfsig', 'a.pdf'),
    }
  }
  finally { rmSync(folder, { recursive: true }) }
}
