import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { afterAll, describe, expect, it } from 'vitest'
import { SheetsService, toXlsx } from '../../platform/index.js'
import type { AssessedPosition } from './assess-batch.js'
import type { PositionKind, PositionReadingRow } from './batch-rows.js'
import { readReadings, runSheetColumns, runSheetRows } from './reading-file.js'

// Expected values: constructed, as are the files under fixtures/import.
const FILES = fileURLToPath(new URL('../../../../fixtures/import/', import.meta.url))
const sheets = new SheetsService()
afterAll(() => sheets.onApplicationShutdown())

const RUN: [PositionKind, string][] = [
  ['blank', 'Verification blank'],
  ['verification', 'Verification standard 2.00 mg/L'],
  ['method-blank', 'Method blank'],
  ['control', 'Control sample 1.00 mg/L'],
  ['sample', 'S-26-00001'],
  ['sample', 'S-26-00002'],
  ['sample', 'S-26-00003'],
  ['duplicate', 'Duplicate of S-26-00001'],
  ['verification', 'Verification standard 2.00 mg/L'],
  ['blank', 'Verification blank'],
]
const positions = RUN.map(
  ([kind, label], index) =>
    ({
      row: { id: String(index + 101), position: index + 1, kind, dilution: '1', pointName: null },
      label,
      readings:
        index === 1 ? [{ id: '900', replicate: 1, absorbanceText: '0.40' } as PositionReadingRow] : [],
    }) as unknown as AssessedPosition,
)

async function read(file: string, content?: Buffer) {
  const { rows } = await sheets.read({ filename: file, bytes: content ?? readFileSync(`${FILES}${file}`) })
  return readReadings(rows, { positions, replicates: 2 })
}
const problemsOf = ({ rows }: Awaited<ReturnType<typeof read>>) =>
  rows.flatMap(({ row, problems }) => problems.map(({ column, message }) => `${row} ${column}: ${message}`))

describe('a file of absorbances', () => {
  it.each(['ok/readings-iron-run.csv', 'ok/readings-iron-run.xlsx'])('%s enters every cell', async (file) => {
    const found = await read(file)
    expect(problemsOf(found)).toEqual([])
    expect(found.entries).toHaveLength(20)
    expect(found.entries[2]).toMatchObject({ positionId: '102', replicate: 1, supersedes: '900' })
    expect(found.rows[1]).toMatchObject({
      position: '2',
      label: 'Verification standard 2.00 mg/L',
      current: ['0.40', ''],
    })
  })
  it('an instrument’s export with other names, gaps and powers of ten', async () => {
    const found = await read('ok/readings-photometer-export.csv')
    expect(problemsOf(found)).toEqual([])
    expect(
      found.entries.map(({ positionId, replicate, absorbance }) => [positionId, replicate, absorbance]),
    ).toEqual([
      ['101', 1, '-0.0003'],
      ['101', 2, '0.0004'],
      ['102', 1, '0.3940'],
      ['102', 2, '0.3944'],
      ['105', 1, '5.00E-2'],
      ['105', 2, '0.0503'],
      ['106', 1, '.1182'],
    ])
  })
  it('the run sheet that was handed out comes back unchanged', async () => {
    const columns = runSheetColumns(2)
    const content = await toXlsx(
      [
        {
          name: 'B-26-0001',
          columns: columns.map(({ title }) => ({ header: title })),
          rows: runSheetRows(positions, 2),
        },
      ],
      new Date('2026-12-01T00:00:00Z'),
    )
    const found = await read('run-sheet.xlsx', content)
    expect(problemsOf(found)).toEqual([])
    expect(found.entries).toEqual([
      { positionId: '102', replicate: 1, absorbance: '0.40', supersedes: '900' },
    ])
  })

  it('a decimal comma is named with what to write', async () => {
    expect(problemsOf(await read('not-ok/readings-decimal-comma.csv'))).toEqual([
      '2 A1: Use a decimal point: -0.0003.',
      '2 A2: Use a decimal point: 0.0004.',
      '3 A1: Use a decimal point: 0.3940.',
      '3 A2: Use a decimal point: 0.3944.',
    ])
  })
  it('unknown and repeated positions, letters, absurd values, another sample, another dilution', async () => {
    const found = await read('not-ok/readings-bad-rows.csv')
    expect(problemsOf(found)).toEqual([
      '3 Position: This batch has no position “44”.',
      '4 Position: Position 1 stands in row 2 already.',
      '5 A1: “O.1971” is not a number.',
      '6 A1: The absorbance must lie between -0.5 and 4.',
      '6 A2: The absorbance must lie between -0.5 and 4.',
      '7 Position: Please fill this in.',
      '8 Sample: Position 7 is S-26-00003.',
      '9 Dilution: The batch says 1: set the dilution there before loading the readings.',
      '10 Position: This batch has no position “six”.',
    ])
    expect(found.entries).toHaveLength(2)
  })
  it('unknown columns, also a third reading where two are taken', async () => {
    const found = await read('not-ok/readings-unknown-columns.csv')
    expect(found.rows[0]?.problems.map(({ column }) => column)).toEqual(['A3', 'Temp'])
  })
  it('missing columns', async () => {
    const found = await read('not-ok/readings-missing-columns.csv')
    expect(found.rows).toHaveLength(1)
    expect(problemsOf(found).slice(1)).toEqual([
      '1 Position: The column “Position” is missing.',
      '1 A1: The column “A1” is missing.',
    ])
  })
})
