import { createHmac } from 'node:crypto'

const LETTERS = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567'

function bytesOf(base32: string): Buffer {
  let bits = 0
  let held = 0
  const bytes: number[] = []
  for (const letter of base32.replaceAll(/\s/g, '')) {
    held = ((held << 5) | LETTERS.indexOf(letter)) & 0xfff
    bits += 5
    if (bits < 8) continue
    bits -= 8
    bytes.push((held >> bits) & 0xff)
  }
  return Buffer.from(bytes)
}

/** What a person's device shows, as RFC 6238 and RFC 4226 (section 5.3) say it: written anew, to be compared with the product's. */
export function codeOf(secret: string, { stepsAhead = 0 } = {}): string {
  const counter = Buffer.alloc(8)
  counter.writeBigUInt64BE(BigInt(Math.floor(Date.now() / 30_000) + stepsAhead))
  const digest = createHmac('sha1', bytesOf(secret)).update(counter).digest()
  const offset = (digest.at(-1) ?? 0) & 0xf
  return String((digest.readUInt32BE(offset) & 0x7fffffff) % 1_000_000).padStart(6, '0')
}
