import { mkdtemp, readdir, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { getFile, putFile } from '../../../server/storage'

describe('stored files', () => {
  let folder: string
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'files-'))
    process.env.POLEWRIGHT_DATA_DIR = folder
  })
  afterAll(async () => {
    delete process.env.POLEWRIGHT_DATA_DIR
    await rm(folder, { recursive: true })
  })
  const pathOf = (key: string) => join(folder, 'files', ...key.split(':'))

  it('come back byte for byte, under a key made of their content', async () => {
    const bytes = Uint8Array.from({ length: 70_000 }, (_, i) => (i * 7919) % 256)
    const stored = await putFile(bytes)
    expect(stored).toMatchObject({ size: 70_000, sha256: stored.key.replace(':', '') })
    expect(await getFile(stored.key)).toEqual(Buffer.from(bytes))
    expect(await putFile(bytes)).toEqual(stored)
  })

  it('leave no part behind', async () => {
    const { key } = await putFile(Buffer.from('whole'))
    expect((await readdir(join(folder, 'files', key.slice(0, 2)))).filter(name => name.endsWith('.part'))).toEqual([])
  })

  it('are refused when they are damaged, and mended when they are put again', async () => {
    const { key } = await putFile(Buffer.from('content'))
    await writeFile(pathOf(key), 'conten')
    await expect(getFile(key)).rejects.toThrow('damaged')
    await putFile(Buffer.from('content'))
    expect(String(await getFile(key))).toBe('content')
  })

  it('are null when there are none', async () => {
    expect(await getFile('00:11')).toBeNull()
  })
})
