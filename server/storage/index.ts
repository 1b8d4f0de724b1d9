/** Files by the SHA-256 of their bytes: the same content has the same key, and what comes back is what was put. */
import { createHash } from 'node:crypto'
import { join } from 'node:path'
import { createStorage } from 'unstorage'
import type { Storage } from 'unstorage'
import { outsideSettings } from '../utils/outside'
import { durableFolder } from './folder'

export interface StoredFile { key: string, sha256: string, size: number }

let storage: Promise<Storage> | null = null

async function openStorage(): Promise<Storage> {
  const { objectStorage, dataDir } = outsideSettings()
  if (!objectStorage) return createStorage({ driver: durableFolder({ base: join(dataDir, 'files') }) })
  const { default: objects } = await import('unstorage/drivers/s3')
  return createStorage({ driver: objects(objectStorage) })
}

function opened(): Promise<Storage> {
  storage ??= openStorage()
  return storage
}

export const sha256Of = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex')

const keyOf = (sha256: string) => `${sha256.slice(0, 2)}:${sha256.slice(2)}`

/** Resolves when the bytes are on the disk (or the object store has confirmed them). */
export async function putFile(bytes: Uint8Array): Promise<StoredFile> {
  const sha256 = sha256Of(bytes)
  const key = keyOf(sha256)
  const files = await opened()
  const present = await files.getItemRaw<Uint8Array>(key)
  if (!present || sha256Of(present) !== sha256) await files.setItemRaw(key, Buffer.from(bytes))
  return { key, sha256, size: bytes.byteLength }
}

/** The bytes; null when there is no such file. Throws when what is stored is not what was put. */
export async function getFile(key: string): Promise<Buffer | null> {
  const bytes = await (await opened()).getItemRaw<Uint8Array>(key)
  if (!bytes) return null
  if (keyOf(sha256Of(bytes)) !== key) throw new Error(`The stored file ${key} is damaged.`)
  return Buffer.from(bytes)
}
