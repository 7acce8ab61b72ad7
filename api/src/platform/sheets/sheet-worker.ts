import { readCsv } from './csv-reading.js'
import { SheetRefused, type Sheet, type SheetBounds } from './sheet.js'
import { readXlsx } from './xlsx-reading.js'

export interface SheetTask {
  bytes: Uint8Array
  kind: 'xlsx' | 'csv'
  bounds: SheetBounds
}
export type SheetAnswer = { sheet: Sheet } | { refused: { message: string; line: number | undefined } }

/** Runs in a thread of its own. A refusal crosses as data: classes do not survive the way. */
export default async function read({ bytes, kind, bounds }: SheetTask): Promise<SheetAnswer> {
  try {
    const buffer = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength)
    return { sheet: kind === 'csv' ? readCsv(bytes, bounds) : await readXlsx(buffer, bounds) }
  } catch (error) {
    if (error instanceof SheetRefused) return { refused: { message: error.message, line: error.line } }
    throw error
  }
}
