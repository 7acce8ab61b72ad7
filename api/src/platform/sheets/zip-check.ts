import { inflateRawSync } from 'node:zlib'
import { SheetRefused } from './sheet.js'

const LOCAL = 0x04034b50
const CENTRAL = 0x02014b50
const END = 0x06054b50
const MAX_ENTRIES = 200

export interface ZipEntry {
  name: string
  data: Buffer
}

/**
 * Unpacks an xlsx within a bound before the library does: a small file can unpack into gigabytes, and the
 * sizes it declares may lie.
 */
export function unpack(bytes: Buffer, maxBytes: number): ZipEntry[] {
  const end = bytes.lastIndexOf(Buffer.from([0x50, 0x4b, 0x05, 0x06]))
  if (end < 0 || end + 22 > bytes.length || bytes.readUInt32LE(end) !== END) throw damaged()
  const count = bytes.readUInt16LE(end + 10)
  if (count === 0 || count > MAX_ENTRIES) throw damaged()
  const entries: ZipEntry[] = []
  let at = bytes.readUInt32LE(end + 16)
  let left = maxBytes
  for (let n = 0; n < count; n += 1) {
    if (at + 46 > bytes.length || bytes.readUInt32LE(at) !== CENTRAL) throw damaged()
    const nameLength = bytes.readUInt16LE(at + 28)
    const name = bytes.toString('utf8', at + 46, at + 46 + nameLength)
    const data = entryData(bytes, { at, left })
    left -= data.length
    entries.push({ name, data })
    at += 46 + nameLength + bytes.readUInt16LE(at + 30) + bytes.readUInt16LE(at + 32)
  }
  return entries
}

function entryData(bytes: Buffer, { at, left }: { at: number; left: number }): Buffer {
  const flags = bytes.readUInt16LE(at + 8)
  if ((flags & 1) !== 0) throw new SheetRefused('The file is protected by a password. Save it without one.')
  const method = bytes.readUInt16LE(at + 10)
  const packedSize = bytes.readUInt32LE(at + 20)
  const local = bytes.readUInt32LE(at + 42)
  if (local + 30 > bytes.length || bytes.readUInt32LE(local) !== LOCAL) throw damaged()
  const start = local + 30 + bytes.readUInt16LE(local + 26) + bytes.readUInt16LE(local + 28)
  const packed = bytes.subarray(start, start + packedSize)
  if (packed.length !== packedSize) throw damaged()
  if (method === 0) {
    if (packed.length > left) throw tooLarge()
    return packed
  }
  if (method !== 8) throw damaged()
  try {
    return inflateRawSync(packed, { maxOutputLength: Math.max(1, left) })
  } catch (error) {
    const isTooLarge = error instanceof Error && 'code' in error && error.code === 'ERR_BUFFER_TOO_LARGE'
    throw isTooLarge ? tooLarge() : damaged()
  }
}

function damaged(): SheetRefused {
  return new SheetRefused('The file is damaged or not a spreadsheet. Save it again as xlsx or csv.')
}

function tooLarge(): SheetRefused {
  return new SheetRefused('The spreadsheet unpacks to far more than a list of readings. Send the rows alone.')
}
