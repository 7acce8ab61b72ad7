import exceljs from 'exceljs'
import { SheetRefused, type Sheet, type SheetBounds, type SheetRow } from './sheet.js'
import { unpack } from './zip-check.js'

/** The first sheet that has rows. Formulas are refused: what they showed when saved is not what is true now. */
export async function readXlsx(bytes: Buffer, bounds: SheetBounds): Promise<Sheet> {
  checkParts(bytes, bounds)
  const book = new exceljs.Workbook()
  try {
    await book.xlsx.load(bytes as unknown as ArrayBuffer)
  } catch {
    throw new SheetRefused('The file is damaged or not a spreadsheet. Save it again as xlsx or csv.')
  }
  const sheet = book.worksheets.find((one) => one.actualRowCount > 0)
  if (!sheet) return { kind: 'xlsx', rows: [] }
  if (sheet.actualRowCount > bounds.maxRows) {
    throw new SheetRefused(`The sheet “${sheet.name}” has more than ${bounds.maxRows} rows.`)
  }
  const rows: SheetRow[] = []
  sheet.eachRow({ includeEmpty: false }, (row, line) => {
    if (row.cellCount > bounds.maxColumns) {
      throw new SheetRefused(`Row ${line} has more than ${bounds.maxColumns} columns.`, line)
    }
    const cells: string[] = []
    for (let column = 1; column <= row.cellCount; column += 1) {
      const text = textOf(row.getCell(column)).trim()
      if (text.length > bounds.maxCellLength) {
        throw new SheetRefused(
          `Cell ${row.getCell(column).address} is longer than ${bounds.maxCellLength} characters.`,
          line,
        )
      }
      cells.push(text)
    }
    if (cells.some((text) => text !== '')) rows.push({ line, cells })
  })
  return { kind: 'xlsx', rows }
}

function checkParts(bytes: Buffer, bounds: SheetBounds): void {
  const entries = unpack(bytes, bounds.maxUnpackedBytes)
  const names = new Set(entries.map(({ name }) => name))
  if (!names.has('[Content_Types].xml') || !names.has('xl/workbook.xml')) {
    throw new SheetRefused('This is a packed file but not a spreadsheet (xlsx).')
  }
  for (const { name, data } of entries) {
    if (/vbaProject|macrosheets|activeX/i.test(name)) {
      throw new SheetRefused('The file contains macros. Save it as xlsx without them.')
    }
    if (/\.(xml|rels)$/.test(name) && data.subarray(0, 2000).includes('<!DOCTYPE')) {
      throw new SheetRefused('The file is damaged or not a spreadsheet. Save it again as xlsx or csv.')
    }
  }
}

function textOf(cell: exceljs.Cell): string {
  const { value } = cell
  if (value === null || value === undefined) return ''
  if (typeof value === 'string') return value
  if (typeof value === 'number') return String(value)
  if (typeof value === 'boolean') return value ? 'TRUE' : 'FALSE'
  if (value instanceof Date) return wallTime(value)
  if ('formula' in value || 'sharedFormula' in value) {
    throw new SheetRefused(
      `Cell ${cell.address} holds a formula. Copy the sheet as values and send it again.`,
      Number(cell.row),
    )
  }
  if ('richText' in value) return value.richText.map(({ text }) => text).join('')
  if ('hyperlink' in value) return String(value.text)
  throw new SheetRefused(`Cell ${cell.address} shows an error (${String(value.error)}).`, Number(cell.row))
}

/** A spreadsheet's times have no zone and are kept as fractions of a day: given back as written, to the second. */
function wallTime(value: Date): string {
  const second = new Date(Math.round(value.getTime() / 1000) * 1000)
  return second
    .toISOString()
    .replace(/T00:00:00\.000Z$/, '')
    .replace(/(:00)?\.000Z$/, '')
}
