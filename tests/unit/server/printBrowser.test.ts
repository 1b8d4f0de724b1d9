import { createServer } from 'node:http'
import type { Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeBrowser, printToPdf } from '../../../server/pdf/browser'
import { pdfText } from '../../pdf/support/poppler'

/** Pages that a sheet could become if something of it were taken for markup. */
const PAGES: Record<string, string> = {
  '/print/plain': '<p>Plain page</p>',
  '/print/script': '<p>Before</p><script>document.body.textContent = "the script ran"</script>',
  '/print/own-image': '<p>Image</p><img src="/api/attachments/1">',
  '/print/other-image': '<img src="/api/attachments/2">',
  '/print/api': '<iframe src="/api/people"></iframe>',
  '/print/file': '<iframe src="file:///etc/passwd"></iframe><p>end</p>',
  '/print/metadata': '<img src="http://169.254.169.254/latest">',
  '/print/elsewhere': '<link rel="stylesheet" href="https://example.com/a.css">',
  '/print/refresh': '<meta http-equiv="refresh" content="0;url=http://169.254.169.254/">',
}
const PIXEL = Buffer.from('iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg==', 'base64')

describe('the browser that prints', { timeout: 60_000 }, () => {
  let server: Server
  const asked: string[] = []
  beforeAll(async () => {
    server = createServer((request, response) => {
      const path = request.url ?? ''
      asked.push(path)
      if (path === '/print/moved') response.writeHead(302, { location: '/print/plain' }).end()
      else if (path in PAGES) response.writeHead(200, { 'content-type': 'text/html' }).end(`<!doctype html><title>x</title>${PAGES[path]}`)
      else response.writeHead(200, { 'content-type': 'text/plain' }).end('should not be read')
    })
    await new Promise<void>((resolve) => { server.listen(0, '127.0.0.1', resolve) })
    process.env.POLEWRIGHT_LOOPBACK_URL = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
  })
  afterAll(async () => {
    delete process.env.POLEWRIGHT_LOOPBACK_URL
    await closeBrowser()
    server.close()
  })
  const files = new Map([['/api/attachments/1', { mime: 'image/png', bytes: PIXEL }]])
  const print = (path: string) => printToPdf({ path, files })

  it('prints its page', async () => {
    expect(pdfText(await print('/print/plain'))).toContain('Plain page')
  })

  it('runs no script', async () => {
    expect(pdfText(await print('/print/script'))).toContain('Before')
  })

  it('takes pictures from the job and never asks for them', async () => {
    await print('/print/own-image')
    expect(asked).not.toContain('/api/attachments/1')
  })

  it.each(['/print/other-image', '/print/api', '/print/metadata', '/print/elsewhere'])('refuses %s whole', async (path) => {
    await expect(print(path)).rejects.toThrow('may not load')
    expect(asked).not.toContain('/api/people')
    expect(asked).not.toContain('/api/attachments/2')
  })

  it('reads no file of the machine', async () => {
    const text = await print('/print/file').then(pdfText, () => '')
    expect(text).not.toContain('root:')
  })

  it('follows no redirect', async () => {
    await expect(print('/print/moved')).rejects.toThrow()
    await print('/print/refresh').catch(() => null)
    expect(asked.filter(path => path === '/print/plain')).toHaveLength(1)
  })
})
