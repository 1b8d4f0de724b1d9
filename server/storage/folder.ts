/** unstorage's driver for a folder, made durable: a file appears whole or not at all, and survives a loss of power once it is put. */
import { randomUUID } from 'node:crypto'
import { mkdir, open, rename, rm } from 'node:fs/promises'
import { dirname, resolve } from 'node:path'
import type { Driver } from 'unstorage'
import folder from 'unstorage/drivers/fs'

async function syncFolder(path: string): Promise<void> {
  const handle = await open(path, 'r')
  await handle.sync().finally(() => handle.close())
}

async function writeDurably(path: string, bytes: Uint8Array): Promise<void> {
  await mkdir(dirname(path), { recursive: true })
  const part = `${path}.${randomUUID()}.part`
  const handle = await open(part, 'wx')
  try {
    await handle.writeFile(bytes)
    await handle.sync()
  }
  finally { await handle.close() }
  await rename(part, path).catch(async (error: unknown) => {
    await rm(part, { force: true })
    throw error
  })
  await syncFolder(dirname(path))
}

export const durableFolder = (options: { base: string }): Driver => ({
  ...folder(options),
  name: 'durable-folder',
  setItemRaw: (key: string, bytes: Uint8Array) => writeDurably(resolve(options.base, key.replaceAll(':', '/')), bytes),
})
