import exceljs from 'exceljs'
import { deflateRawSync } from 'node:zlib'
import { afterAll, describe, expect, it } from 'vitest'
import { csvLine, toCsv } from './csv-writing.js'
import { SheetsService } from './sheets.service.js'
import { toXlsx } from './xlsx-writing.js'

const sheets = new SheetsService()
afterAll(() => sheets.onApplicationShutdown())

const csv = (text: string | Buffer, filename = 'readings.csv') =>
  sheets.read({ filename, bytes: Buffer.from(text) })

async function xlsx(fill: (sheet: exceljs.Worksheet) => void): Promise<Buffer> {
  const book = new exceljs.Workbook()
  fill(book.addWorksheet('Readings'))
  return Buffer.from(await book.xlsx.writeBuffer())
}

describe('reading csv', () => {
  it('reads quotes, line ends, byte-order mark and each separator, and keeps the numbers of lines', async () => {
    const comma = await csv('\ufeffposition,absorbance,remark\r\n1,0.123,"a, ""b""\nc"\r\n\r\n2,.5,\r\n')
    expect(comma).toEqual({
      kind: 'csv',
      rows: [
        { line: 1, cells: ['position', 'absorbance', 'remark'] },
        { line: 2, cells: ['1', '0.123', 'a, "b"\nc'] },
        { line: 5, cells: ['2', '.5', ''] },
      ],
    })
    expect((await csv('a;b\n1;0,5\n')).rows[1]?.cells).toEqual(['1', '0,5'])
    expect((await csv('a\tb\n1\t2', 'readings.txt')).rows[1]?.cells).toEqual(['1', '2'])
  })

  it.each([
    ['', 'empty'],
    ['\n\n \n', 'no rows'],
    ['a,b\n"1,2\n3,4', 'never closed'],
    [Buffer.from([0x61, 0x2c, 0xe9, 0x0a]), 'UTF-8'],
    [Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x00, 0x01]), 'UTF-8'],
    [`a\n${'1\n'.repeat(2001)}`, 'more than 2001 rows'],
    [`${'a,'.repeat(60)}b\n`, 'more than 60 columns'],
    [`a\n${'x'.repeat(2001)}\n`, 'longer than 2000'],
    ['%PDF-1.7 …', 'PDF'],
  ])('refuses %j with a sentence', async (content, sentence) => {
    await expect(csv(content)).rejects.toMatchObject({
      code: 'upload-unreadable',
      detail: expect.stringContaining(sentence) as string,
    })
  })

  it('refuses a file whose name says something else than its content', async () => {
    await expect(csv('a,b\n1,2\n', 'readings.xlsx')).rejects.toMatchObject({
      detail: expect.stringContaining('plain text') as string,
    })
    const book = await xlsx((sheet) => sheet.addRow(['a']))
    await expect(sheets.read({ filename: 'readings.csv', bytes: book })).rejects.toMatchObject({
      detail: expect.stringContaining('packed') as string,
    })
    await expect(sheets.read({ filename: 'readings.xlsm', bytes: book })).rejects.toMatchObject({
      detail: expect.stringContaining('macros') as string,
    })
  })
})

describe('reading xlsx', () => {
  it('gives numbers, dates and texts as they are read by a person', async () => {
    const bytes = await xlsx((sheet) => {
      sheet.addRow(['position', 'absorbance', 'day'])
      sheet.addRow([1, 0.123, new Date('2026-12-01T00:00:00Z')])
      sheet.addRow([])
      sheet.addRow([2, ' 0.500 ', new Date('2026-12-01T08:30:00Z')])
    })
    expect(await sheets.read({ filename: 'readings.xlsx', bytes })).toEqual({
      kind: 'xlsx',
      rows: [
        { line: 1, cells: ['position', 'absorbance', 'day'] },
        { line: 2, cells: ['1', '0.123', '2026-12-01'] },
        { line: 4, cells: ['2', '0.500', '2026-12-01T08:30'] },
      ],
    })
  })

  it('refuses formulas and names the cell', async () => {
    const bytes = await xlsx((sheet) => {
      sheet.addRow(['a'])
      sheet.getCell('A2').value = { formula: 'HYPERLINK("http://elsewhere.example")', result: 1 }
    })
    await expect(sheets.read({ filename: 'r.xlsx', bytes })).rejects.toMatchObject({
      detail: expect.stringContaining('Cell A2 holds a formula') as string,
    })
  })

  it('refuses a packed file that is no spreadsheet, is cut off, or unpacks without end', async () => {
    const bomb = zipOf('[Content_Types].xml', Buffer.alloc(60 * 1024 * 1024))
    expect(bomb.length).toBeLessThan(100_000)
    await expect(sheets.read({ filename: 'r.xlsx', bytes: bomb })).rejects.toMatchObject({
      detail: expect.stringContaining('unpacks') as string,
    })
    const other = zipOf('readme.txt', Buffer.from('hello'))
    await expect(sheets.read({ filename: 'r.xlsx', bytes: other })).rejects.toMatchObject({
      detail: expect.stringContaining('not a spreadsheet') as string,
    })
    const whole = await xlsx((sheet) => sheet.addRow(['a']))
    const cut = whole.subarray(0, whole.length - 100)
    await expect(sheets.read({ filename: 'r.xlsx', bytes: cut })).rejects.toMatchObject({
      detail: expect.stringContaining('damaged') as string,
    })
  })

  it('refuses macros hidden in a file named xlsx', async () => {
    const bytes = zipOf('xl/vbaProject.bin', Buffer.from('x'), ['[Content_Types].xml', 'xl/workbook.xml'])
    await expect(sheets.read({ filename: 'r.xlsx', bytes })).rejects.toMatchObject({
      detail: expect.stringContaining('macros') as string,
    })
  })
})

describe('writing', () => {
  // cases of the OWASP page on CSV injection
  it.each([
    ['=1+1', "'=1+1"],
    ['=HYPERLINK("http://x.example","y")', `"'=HYPERLINK(""http://x.example"",""y"")"`],
    ['+cmd|x', "'+cmd|x"],
    ['-2+3', "'-2+3"],
    ['@SUM(1)', "'@SUM(1)"],
    ['\t=1', `"'\t=1"`],
    ['-0.5', '-0.5'],
    ['Iron, total', '"Iron, total"'],
    [0.1, '0.1'],
    [null, ''],
  ])('writes %j as %s', (value, expected) => {
    expect(csvLine([value])).toBe(`${expected}\r\n`)
  })

  it('writes what it reads back, with nothing that runs', async () => {
    const rows = [
      ['S-26-00001', 0.312, '=1+1'],
      ['Südwerk', null, 'x'],
    ]
    const read = await csv(toCsv(['a', 'b', 'c'], rows))
    expect(read.rows[1]?.cells).toEqual(['S-26-00001', '0.312', "'=1+1"])
    const bytes = await toXlsx(
      [{ name: 'Results [1/2]', columns: [{ header: 'a' }, { header: 'b' }, { header: 'c' }], rows }],
      new Date('2026-12-01T00:00:00Z'),
    )
    const back = await sheets.read({ filename: 'r.xlsx', bytes })
    expect(back.rows[1]?.cells).toEqual(['S-26-00001', '0.312', '=1+1'])
  })
})

/** A zip made by hand, as somebody with bad intent would. */
function zipOf(name: string, data: Buffer, others: string[] = []): Buffer {
  const files = [{ name, data }, ...others.map((other) => ({ name: other, data: Buffer.from('<x/>') }))]
  const parts: Buffer[] = []
  const directory: Buffer[] = []
  let offset = 0
  for (const file of files) {
    const packed = deflateRawSync(file.data, { level: 9 })
    const local = Buffer.alloc(30)
    local.writeUInt32LE(0x04034b50, 0)
    local.writeUInt16LE(8, 8)
    local.writeUInt32LE(packed.length, 18)
    local.writeUInt32LE(10, 22)
    local.writeUInt16LE(file.name.length, 26)
    const central = Buffer.alloc(46)
    central.writeUInt32LE(0x02014b50, 0)
    central.writeUInt16LE(8, 10)
    central.writeUInt32LE(packed.length, 20)
    central.writeUInt32LE(10, 24)
    central.writeUInt16LE(file.name.length, 28)
    central.writeUInt32LE(offset, 42)
    parts.push(local, Buffer.from(file.name), packed)
    directory.push(central, Buffer.from(file.name))
    offset += 30 + file.name.length + packed.length
  }
  const central = Buffer.concat(directory)
  const end = Buffer.alloc(22)
  end.writeUInt32LE(0x06054b50, 0)
  end.writeUInt16LE(files.length, 8)
  end.writeUInt16LE(files.length, 10)
  end.writeUInt32LE(central.length, 12)
  end.writeUInt32LE(offset, 16)
  return Buffer.concat([...parts, central, end])
}
