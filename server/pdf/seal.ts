/**
 * The digital seal: a signature over the whole file that any PDF reader can check.
 * The certificate is the firm's own, made on first use; a reader says that the file is unchanged, and that it does not know the issuer.
 */
import { generateKeyPairSync, randomBytes } from 'node:crypto'
import { link, mkdir, open, readFile, rm } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import forge from 'node-forge'
import { SignPdf } from '@signpdf/signpdf'
import { P12Signer } from '@signpdf/signer-p12'
import { plainAddPlaceholder } from '@signpdf/placeholder-plain'
import { outsideSettings } from '../utils/outside'

const VALID_YEARS = 20
/** Room for the signature, in bytes: RSA 2048 with its certificate needs about 2,000. */
const ROOM = 8192

function certificate(key: forge.pki.rsa.PrivateKey, publicKey: forge.pki.PublicKey, firm: string): forge.pki.Certificate {
  const made = forge.pki.createCertificate()
  made.publicKey = publicKey
  made.serialNumber = `01${randomBytes(15).toString('hex')}`
  made.validity.notBefore = new Date()
  made.validity.notAfter = new Date(Date.UTC(made.validity.notBefore.getUTCFullYear() + VALID_YEARS, 0, 1))
  const name = [{ shortName: 'O', value: firm }, { shortName: 'CN', value: `${firm}: document seal` }]
  made.setSubject(name)
  made.setIssuer(name)
  made.setExtensions([
    { name: 'basicConstraints', cA: false, critical: true },
    { name: 'keyUsage', digitalSignature: true, nonRepudiation: true, critical: true },
  ])
  made.sign(key, forge.md.sha256.create())
  return made
}

function newSeal(firm: string): Buffer {
  // Node makes the key pair in a fraction of the time that the library's own arithmetic takes.
  const pair = generateKeyPairSync('rsa', { modulusLength: 2048, publicKeyEncoding: { type: 'spki', format: 'pem' }, privateKeyEncoding: { type: 'pkcs8', format: 'pem' } })
  const key = forge.pki.privateKeyFromPem(pair.privateKey)
  const made = certificate(key, forge.pki.publicKeyFromPem(pair.publicKey), firm)
  const p12 = forge.pkcs12.toPkcs12Asn1(key, [made], '', { algorithm: '3des' })
  return Buffer.from(forge.asn1.toDer(p12).getBytes(), 'binary')
}

/** The seal kept in the data folder, readable by this program's user only; made when there is none. */
async function sealOf(firm: string): Promise<Buffer> {
  const path = join(outsideSettings().dataDir, 'keys', 'seal.p12')
  const kept = await readFile(path).catch(() => null)
  if (kept) return kept
  const made = newSeal(firm)
  await mkdir(dirname(path), { recursive: true, mode: 0o700 })
  const part = `${path}.${randomBytes(6).toString('hex')}.part`
  const handle = await open(part, 'wx', 0o600)
  try {
    await handle.writeFile(made)
    await handle.sync()
  }
  finally { await handle.close() }
  // A link never replaces: of two that make a seal at once, both keep the first.
  await link(part, path).catch((error: NodeJS.ErrnoException) => {
    if (error.code !== 'EEXIST') throw error
  })
  await rm(part)
  return readFile(path)
}

export interface SealWords { firm: string, reason: string, at: Date }

/** The sealed file: any later change of a byte shows. */
export async function sealed(pdf: Buffer, words: SealWords): Promise<Buffer> {
  const signer = new P12Signer(await sealOf(words.firm), { passphrase: '' })
  const prepared = plainAddPlaceholder({
    pdfBuffer: pdf, reason: words.reason, contactInfo: '', name: words.firm, location: '',
    signingTime: words.at, signatureLength: ROOM, appName: 'Polewright',
  })
  return new SignPdf().sign(prepared, signer, words.at)
}
