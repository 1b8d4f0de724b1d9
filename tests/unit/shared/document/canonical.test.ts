import { createHash } from 'node:crypto'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { canonicalText, sha256Hex } from '../../../../shared/document/canonical'
import vectors from './data/jcs-vectors.json'

function double(hex: string): number {
  const view = new DataView(new ArrayBuffer(8))
  view.setBigUint64(0, BigInt(`0x${hex}`))
  return view.getFloat64(0)
}

describe('the canonical text (RFC 8785)', () => {
  it.each(vectors.number_samples)('writes the double $ieee754_hex as $json', ({ ieee754_hex, json }) => {
    if (json === null) expect(() => canonicalText(double(ieee754_hex))).toThrow()
    else expect(canonicalText(double(ieee754_hex))).toBe(json)
  })

  it.each(vectors.own_vectors)('of $input_json', ({ input_json, canonical, canonical_utf8_hex, sha256 }) => {
    const text = canonicalText(JSON.parse(input_json))
    expect(text).toBe(canonical)
    expect(Buffer.from(text, 'utf8').toString('hex')).toBe(canonical_utf8_hex)
    expect(sha256Hex(text)).toBe(sha256)
  })

  it('does not depend on the order in which members were written', () => {
    fc.assert(fc.property(fc.dictionary(fc.string({ unit: 'grapheme' }), fc.jsonValue()), (object) => {
      const reversed = Object.fromEntries(Object.entries(object).reverse())
      expect(canonicalText(reversed)).toBe(canonicalText(object))
      expect(JSON.parse(canonicalText(object))).toEqual(JSON.parse(JSON.stringify(object)))
    }), { numRuns: 200 })
  })

  it('refuses half of a surrogate pair, and takes a backslash that was typed before ud800', () => {
    expect(() => canonicalText({ a: '\ud83d' })).toThrow('surrogate')
    expect(() => canonicalText({ a: '\\\udc00' })).toThrow('surrogate')
    expect(canonicalText({ a: '\\ud800 \u{1F600}' })).toBe('{"a":"\\\\ud800 \u{1F600}"}')
    expect(() => canonicalText(undefined)).toThrow('nothing')
  })
})

it('the SHA-256 is that of node:crypto', () => {
  fc.assert(fc.property(fc.string({ unit: 'grapheme', maxLength: 300 }), (text) => {
    expect(sha256Hex(text)).toBe(createHash('sha256').update(text, 'utf8').digest('hex'))
  }), { numRuns: 200 })
})
