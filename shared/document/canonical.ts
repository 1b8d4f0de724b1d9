import canonicalize from 'canonicalize'
import * as sha256 from 'lib0/hash/sha256'
import { toHexString } from 'lib0/buffer'
import { encodeUtf8 } from 'lib0/string'
import { DOCUMENT_FORMAT, type SheetDocument } from './types'

/** Half of a surrogate pair is the only thing that JSON.stringify escapes as \ud…; a backslash that was typed is doubled. */
const LONE_SURROGATE = /(?<!\\)(?:\\\\)*\\ud[89a-f]/

/**
 * The canonical text of JSON data (RFC 8785). Throws on what has none: a number that is not finite,
 * a lone surrogate (I-JSON, RFC 7493 section 2.1), or no value at all.
 */
export function canonicalText(value: unknown): string {
  const text = canonicalize(value)
  if (text === undefined) throw new TypeError('There is no canonical form of nothing.')
  if (LONE_SURROGATE.test(text)) throw new TypeError('A text contains half of a surrogate pair.')
  return text
}

/** SHA-256 (FIPS 180-4) of a text in UTF-8, in hexadecimal. */
export const sha256Hex = (text: string): string => toHexString(sha256.digest(encodeUtf8(text)))

export const hashOf = (value: unknown): string => sha256Hex(canonicalText(value))

/** Settings that belong to the content, since they change what is read on the sheet. The paper does not. */
export interface ContentSettings { significantDigits: number }

export interface SheetContent { format: number, document: SheetDocument, settings: ContentSettings }

/** What is frozen, hashed and signed. */
export const sheetContent = (document: SheetDocument, settings: ContentSettings): SheetContent =>
  ({ format: DOCUMENT_FORMAT, document, settings: { significantDigits: settings.significantDigits } })
