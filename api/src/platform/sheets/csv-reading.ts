import { SheetRefused, type Sheet, type SheetBounds, type SheetRow } from './sheet.js'

/** RFC 4180 with the separators that laboratories meet: comma, semicolon, tab. */
export function readCsv(bytes: Uint8Array, bounds: SheetBounds): Sheet {
  const text = decode(bytes)
  const separator = separatorOf(text)
  const rows: SheetRow[] = []
  let cells: string[] = []
  let cell = ''
  let isQuoted = false
  let wasQuoted = false
  let line = 1
  let startLine = 1

  const endCell = () => {
    if (cell.length > bounds.maxCellLength) {
      throw new SheetRefused(
        `Line ${startLine} has an entry longer than ${bounds.maxCellLength} characters.`,
        startLine,
      )
    }
    cells.push(cell.trim())
    if (cells.length > bounds.maxColumns) {
      throw new SheetRefused(`Line ${startLine} has more than ${bounds.maxColumns} columns.`, startLine)
    }
    cell = ''
    wasQuoted = false
  }
  const endRow = () => {
    endCell()
    if (cells.some((one) => one !== '')) rows.push({ line: startLine, cells })
    if (rows.length > bounds.maxRows) throw new SheetRefused(`The file has more than ${bounds.maxRows} rows.`)
    cells = []
    startLine = line
  }

  for (let i = 0; i < text.length; i += 1) {
    const char = text.charAt(i)
    if (char === '\n') line += 1
    if (isQuoted) {
      if (char !== '"') cell += char
      else if (text.charAt(i + 1) === '"') {
        cell += '"'
        i += 1
      } else isQuoted = false
    } else if (char === '"' && cell.trim() === '' && !wasQuoted) {
      isQuoted = true
      wasQuoted = true
      cell = ''
    } else if (char === separator) endCell()
    else if (char === '\n') endRow()
    else if (char !== '\r') cell += char
  }
  if (isQuoted)
    throw new SheetRefused(`A quotation mark opened on line ${startLine} is never closed.`, startLine)
  if (cell !== '' || cells.length > 0) endRow()
  return { kind: 'csv', rows }
}

function decode(bytes: Uint8Array): string {
  const isUtf16 = bytes[0] === 0xff && bytes[1] === 0xfe
  try {
    const text = new TextDecoder(isUtf16 ? 'utf-16le' : 'utf-8', { fatal: true }).decode(bytes)
    if (/[\u0000-\u0008\u000e-\u001f]/.test(text)) throw new Error('binary')
    return text
  } catch {
    throw new SheetRefused('This is not a text file in UTF-8. Save it as “CSV UTF-8” or as xlsx.')
  }
}

/** The separator found most often outside quotes in the first line that has any. */
function separatorOf(text: string): string {
  const firstLine = text.split('\n').find((one) => one.trim() !== '') ?? ''
  const plain = firstLine.replaceAll(/"[^"]*"/g, '')
  const counted = [',', ';', '\t'].map((separator) => ({ separator, count: plain.split(separator).length }))
  counted.sort((a, b) => b.count - a.count)
  return counted[0]?.separator ?? ','
}
