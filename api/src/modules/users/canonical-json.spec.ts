import { describe, expect, it } from 'vitest'
import { canonicalJson, sha256Of } from './canonical-json.js'

describe('canonicalJson', () => {
  it('writes the same text whatever the order of the keys', () => {
    expect(canonicalJson({ b: [1, { d: null, c: 'x' }], a: true })).toBe(
      '{"a":true,"b":[1,{"c":"x","d":null}]}',
    )
  })

  it('tells numbers, texts and nothing apart, and keeps every digit', () => {
    const hashes = [0.1, '0.1', null, 0.10000000000000002, [], {}].map(sha256Of)
    expect(new Set(hashes).size).toBe(6)
  })

  it('drops what is undefined and writes dates as JSON does, as they will be read back', () => {
    const written = { at: new Date('2026-12-01T10:00:00Z'), gone: undefined }
    expect(canonicalJson(written)).toBe('{"at":"2026-12-01T10:00:00.000Z"}')
    expect(sha256Of(JSON.parse(canonicalJson(written)))).toBe(sha256Of(written))
  })

  it('hashes with SHA-256', () => {
    // SHA-256 of the two characters {} (computed with coreutils' sha256sum)
    expect(sha256Of({})).toBe('44136fa355b3678a1146ad16f7e8649e94fb4fc21fe77e8310c060f61caaff8a')
  })
})
