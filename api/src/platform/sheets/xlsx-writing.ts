import exceljs from 'exceljs'
import type { CellValue } from './csv-writing.js'

export interface SheetToWrite {
  name: string
  columns: readonly { header: string; width?: number; numberFormat?: string }[]
  rows: Iterable<readonly CellValue[]>
}

/** Numbers as numbers, everything else as text: a text cell is never run, whatever it begins with. */
export async function toXlsx(sheets: readonly SheetToWrite[], createdAt: Date): Promise<Buffer> {
  const book = new exceljs.Workbook()
  book.creator = 'Weirlight'
  book.created = createdAt
  book.modified = createdAt
  for (const { name, columns, rows } of sheets) {
    const sheet = book.addWorksheet(name.replaceAll(/[*?:/\\[\]]/g, ' ').slice(0, 31), {
      views: [{ state: 'frozen', ySplit: 1 }],
    })
    sheet.columns = columns.map(({ header, width, numberFormat }) => ({
      header,
      width: width ?? Math.max(10, header.length + 2),
      style: numberFormat ? { numFmt: numberFormat } : {},
    }))
    sheet.getRow(1).font = { bold: true }
    for (const row of rows) sheet.addRow(row.map(plain))
  }
  return Buffer.from(await book.xlsx.writeBuffer())
}

function plain(value: CellValue): string | number | boolean | Date | null {
  if (value === undefined || value === null) return null
  if (typeof value === 'number' && !Number.isFinite(value)) return null
  return value
}
