/** The firm's signing key (Ed25519, RFC 8032): the private part is a file of the data folder, the public part is kept in the database with the records. */
import { createHash, createPrivateKey, createPublicKey, generateKeyPairSync, sign, verify, type KeyObject } from 'node:crypto'
import { chmod, mkdir, readFile, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { SigningKey } from '../database'
import { outsideSettings } from '../utils/outside'

interface OpenKey { id: string, privateKey: KeyObject }

export const keysFolder = (): string => join(outsideSettings().dataDir, 'keys')
const keyFile = () => join(keysFolder(), 'signing.pem')

const publicPem = (key: KeyObject): string => createPublicKey(key).export({ type: 'spki', format: 'pem' }).toString()
const keyId = (pem: string): string => createHash('sha256').update(pem).digest('hex').slice(0, 16)

/** Reads the key, or makes it the first time. Of two processes that start at once the first to write wins. */
async function readOrMake(): Promise<KeyObject> {
  await mkdir(keysFolder(), { recursive: true, mode: 0o700 })
  const pem = generateKeyPairSync('ed25519').privateKey.export({ type: 'pkcs8', format: 'pem' })
  await writeFile(keyFile(), pem, { flag: 'wx', mode: 0o600 }).catch((error: NodeJS.ErrnoException) => {
    if (error.code !== 'EEXIST') throw error
  })
  await chmod(keyFile(), 0o600)
  return createPrivateKey(await readFile(keyFile()))
}

async function openKey(): Promise<OpenKey> {
  const privateKey = await readOrMake()
  const pem = publicPem(privateKey)
  const id = keyId(pem)
  await SigningKey.findOrCreate({ where: { id }, defaults: { id, publicKey: pem, validFrom: new Date() } })
  return { id, privateKey }
}

let opened: Promise<OpenKey> | null = null

function signingKey(): Promise<OpenKey> {
  opened ??= openKey().catch((error: unknown) => {
    opened = null
    throw error
  })
  return opened
}

/** Makes sure that there is a key, outside any transaction. */
export const prepareSigning = async (): Promise<void> => { await signingKey() }

export interface SignedText { signature: string, keyId: string }

/** Signature over the bytes of a canonical text, in base64. */
export async function signText(text: string): Promise<SignedText> {
  const key = await signingKey()
  return { signature: sign(null, Buffer.from(text, 'utf8'), key.privateKey).toString('base64'), keyId: key.id }
}

/** Whether `signature` was made over exactly this text by the key of this id. */
export async function verifyText(text: string, { signature, keyId: id }: SignedText): Promise<boolean> {
  const key = await SigningKey.findByPk(id)
  if (!key) return false
  return verify(null, Buffer.from(text, 'utf8'), createPublicKey(key.publicKey), Buffer.from(signature, 'base64'))
}
