/** The head of the audit record, signed and kept beside the keys, outside the database: a tail cut off or a chain rebuilt there shows. */
import { randomUUID } from 'node:crypto'
import { readFile, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'
import { canonicalText } from '#shared/document/canonical'
import { keysFolder, signText, verifyText } from '../signing/keys'
import type { ChainHead } from './chain'

const keptSchema = z.object({ seq: z.number(), hash: z.string(), at: z.string(), signature: z.string(), keyId: z.string() })
const file = () => join(keysFolder(), 'audit-head.json')
const signedText = ({ seq, hash, at }: { seq: number, hash: string, at: string }) => canonicalText({ seq, hash, at })

let last: Promise<void> = Promise.resolve()

async function write(head: ChainHead): Promise<void> {
  const kept = await readAuditHead().catch(() => null)
  if (kept && kept.seq >= head.seq) return
  const at = new Date().toISOString()
  const signed = await signText(signedText({ ...head, at }))
  const part = `${file()}.${randomUUID()}.part`
  await writeFile(part, JSON.stringify({ ...head, at, ...signed }), { mode: 0o600 })
  await rename(part, file())
}

/** After COMMIT; one writing follows the other, and an older head never replaces a newer one. */
export function keepAuditHead(head: ChainHead): Promise<void> {
  last = last.catch(() => undefined).then(() => write(head))
  return last
}

/** The head that was signed last; null when none was kept yet. Throws when the file is not what was signed. */
export async function readAuditHead(): Promise<ChainHead | null> {
  const text = await readFile(file(), 'utf8').catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return null
    throw error
  })
  if (text === null) return null
  const kept = keptSchema.parse(JSON.parse(text))
  if (!await verifyText(signedText(kept), kept)) throw new Error('The kept head of the audit record was not signed by this firm\'s key.')
  return { seq: kept.seq, hash: kept.hash }
}
