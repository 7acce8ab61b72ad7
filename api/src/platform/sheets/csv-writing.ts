import { Readable } from 'node:stream'

export type CellValue = string | number | boolean | Date | null | undefined

const NUMBER = /^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d+)?$/

/**
 * A text that a spreadsheet would run (=, +, -, @, tab, return in front) gets an apostrophe in front, as
 * OWASP advises; a number stays a number.
 */
export function csvCell(value: CellValue): string {
  if (value === null || value === undefined) return ''
  if (value instanceof Date) return value.toISOString()
  if (typeof value !== 'string') return String(value)
  const safe = /^[=+\-@\t\r\n]/.test(value) && !NUMBER.test(value) ? `'${value}` : value
  return /[",;\r\n\t]|^\s|\s$/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

export function csvLine(cells: readonly CellValue[]): string {
  return `${cells.map(csvCell).join(',')}\r\n`
}

/** UTF-8 with a byte-order mark, without which spreadsheets read the wrong letters. */
export function toCsv(header: readonly string[], rows: Iterable<readonly CellValue[]>): Buffer {
  let text = `\ufeff${csvLine(header)}`
  for (const row of rows) text += csvLine(row)
  return Buffer.from(text, 'utf8')
}

/** The same for a list that is too long to hold. */
export function toCsvStream(header: readonly string[], rows: AsyncIterable<readonly CellValue[]>): Readable {
  async function* lines() {
    yield `\ufeff${csvLine(header)}`
    for await (const row of rows) yield csvLine(row)
  }
  return Readable.from(lines(), { objectMode: false, encoding: 'utf8' })
}
