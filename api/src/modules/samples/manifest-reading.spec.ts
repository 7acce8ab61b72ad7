import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { afterAll, describe, expect, it } from 'vitest'
import { SheetsService } from '../../platform/index.js'
import { readManifest, type KnownToManifest } from './manifest-reading.js'
import type { KnownMethod, KnownPoint } from './receiving.repository.js'

// Expected values: constructed, as are the files under fixtures/import.
const FILES = fileURLToPath(new URL('../../../../fixtures/import/', import.meta.url))
const sheets = new SheetsService()
afterAll(() => sheets.onApplicationShutdown())

const CLIENTS = {
  PH: 'Pellam Hills Water Board',
  DM: 'Dunmarrow District Water',
  SP: 'Sorrel Point Utilities',
  AV: 'Ambry Vale Rural Water',
  KR: 'Keld River Treatment Company',
  TH: 'Thistle Heights Metropolitan District',
}
const NAMES: Record<string, string> = { 'DM-04': 'Market Square tap', 'PH-05': 'Well 5' }
const points: KnownPoint[] = Object.entries(CLIENTS).flatMap(([clientCode, clientName], client) =>
  [1, 2, 3, 4, 5, 6, 7].map((n) => {
    const code = `${clientCode}-0${n}`
    return {
      id: `${client + 1}0${n}`,
      code,
      name: NAMES[code] ?? `Point ${n} of ${clientCode}`,
      active: true,
      clientId: String(client + 1),
      clientCode,
      clientName,
      clientActive: true,
    }
  }),
)
const method = (
  id: string,
  code: string,
  analyte: KnownMethod['analyte'],
  form: KnownMethod['form'] = 'total',
) => ({
  id,
  code,
  edition: '1',
  title: code,
  analyte,
  form,
  active: true,
  container: 'plastic',
  approvals: [],
  holdTime: { code: 'x', text: 'x', container: 'x', rule: { hours: 1, conditions: [] } },
})
const known: KnownToManifest = {
  points,
  methods: [
    method('1', 'fe-phenanthroline', 'Fe'),
    method('2', 'cu-bathocuproine', 'Cu'),
    method('3', 'mn-persulfate', 'Mn'),
    method('4', 'cr6-diphenylcarbazide', 'Cr', 'hexavalent'),
    { ...method('5', 'fe-ferrozine', 'Fe'), active: false },
    method('6', 'mn-formaldoxime', 'Mn'),
  ],
  timeZone: 'America/New_York',
  now: new Date('2026-12-01T12:00:00Z'),
  newDraftId: () => '6f9619ff-8b86-4d01-b42d-00cf4fc964ff',
}

async function read(file: string) {
  const { rows } = await sheets.read({ filename: file, bytes: readFileSync(`${FILES}${file}`) })
  return readManifest(rows, known)
}
const problemsOf = ({ rows }: Awaited<ReturnType<typeof read>>) =>
  rows.flatMap(({ row, problems }) => problems.map(({ column, message }) => `${row} ${column}: ${message}`))

describe('a manifest that can be received', () => {
  it('reads commas, quotes, names of points and short names of methods', async () => {
    const manifest = await read('ok/manifest-field-round.csv')
    expect(problemsOf(manifest)).toEqual([])
    expect(manifest.bodies).toHaveLength(4)
    expect(manifest.bodies[0]).toMatchObject({
      clientId: '1',
      pointId: '101',
      collectedAt: '2026-11-30T13:15:00.000Z',
      receivedAt: '2026-11-30T16:40:00.000Z',
      preservation: 'nitric-acid',
      ph: '1.6',
      temperatureC: '7.5',
      filteredInField: false,
      determinations: [{ methodId: '1' }, { methodId: '3' }],
    })
    expect(manifest.bodies[1]?.remarks).toBe('well pumped 10 min, then filled')
    expect(manifest.bodies[2]).toMatchObject({ pointId: '204', collectedBy: 'Quill, P.' })
    expect(manifest.bodies[3]).toMatchObject({
      kind: 'confirmation',
      preservation: 'ammonium-sulfate-buffer',
      determinations: [{ methodId: '4' }],
    })
  })
  it('reads other words for the same columns, offsets, and receives now where no time is given', async () => {
    const manifest = await read('ok/manifest-semicolons.csv')
    expect(problemsOf(manifest)).toEqual([])
    expect(manifest.bodies[0]).toMatchObject({
      pointId: '105',
      kind: 'routine',
      collectedAt: '2026-11-30T12:20:00.000Z',
      receivedAt: '2026-12-01T12:00:00.000Z',
      determinations: [{ methodId: '1' }, { methodId: '2' }],
    })
  })
  it('reads a workbook with dates and numbers in its cells, by its own row numbers', async () => {
    const manifest = await read('ok/manifest-field-team.xlsx')
    expect(problemsOf(manifest)).toEqual([])
    expect(manifest.rows.map(({ row }) => row)).toEqual([2, 3, 5])
    expect(manifest.bodies[0]).toMatchObject({ collectedAt: '2026-11-30T11:45:00.000Z', ph: '1.5' })
  })
})

describe('a manifest that needs another look', () => {
  it('names every unknown column', async () => {
    const manifest = await read('not-ok/manifest-unknown-column.csv')
    expect(manifest.rows[0]?.problems.map(({ column }) => column)).toEqual(['Weather', 'Sampler phone'])
    expect(manifest.rows[0]?.problems[0]?.message).toContain('Known: Client, Sampling point')
  })
  it('names every missing column and judges no row without them', async () => {
    const manifest = await read('not-ok/manifest-missing-columns.csv')
    expect(problemsOf(manifest)).toEqual([
      '1 Collected at: The column “Collected at” is missing.',
      '1 Determinations: The column “Determinations” is missing.',
    ])
  })
  it('names every bad value of every row', async () => {
    const manifest = await read('not-ok/manifest-bad-values.csv')
    expect(problemsOf(manifest)).toEqual([
      '2 pH: Use a decimal point: 1.6.',
      '2 Temperature, °C: Use a decimal point: 7.5.',
      '3 Client: There is no client “PX”.',
      '4 Sampling point: Pellam Hills Water Board has no sampling point “DM-01”.',
      '5 Purpose: “urgent” is none of: compliance, operational, operation.',
      '5 Collected at: “30.11.2026 08:15” is not a date and time. Write it like 2026-12-01 14:05.',
      '5 Preservation: “vinegar” is none of: none, no, unpreserved, nitric acid, hno3, ammonium sulfate buffer, ammonium sulphate buffer.',
      '5 Container: “bucket” is none of: plastic, polyethylene, fluoropolymer, glass.',
      '5 Filtered in field: “perhaps” is none of: 0, 1, no, n, false, yes, y, true.',
      '5 Determinations: “lead” names no method of the laboratory.',
      '5 Collected by: Please fill this in.',
      '5 pH: “acid” is not a number.',
      '6 Received at: Received before it was collected: check both times.',
      '7 Collected at: Collected in the future: check the date.',
      '7 Received at: Received in the future: check the date.',
      '8 Collected at: 2026-11-01 01:30 came twice when clocks were put back: add the offset, like 2026-11-01 01:30+01:00.',
      '10 Sampling point: The same sample stands in row 9.',
      '11 Determinations: Choose at least one determination.',
      '12 Determinations: “Mn total” names 2 methods: write mn-persulfate or mn-formaldoxime.',
      '13 Determinations: This row has more entries than columns: put an entry that holds the separator in quotation marks.',
    ])
    expect(manifest.rows.filter(({ ok }) => ok).map(({ row }) => row)).toEqual([9])
  })
  it.each([
    ['manifest-empty.csv', 'empty'],
    ['manifest-old-format.xls', 'old or protected spreadsheet'],
    ['manifest-named-wrongly.xlsx', 'plain text'],
    ['manifest-with-formula.xlsx', 'holds a formula'],
  ])('%s is refused with a sentence', async (file, sentence) => {
    await expect(read(`not-ok/${file}`)).rejects.toMatchObject({
      code: 'upload-unreadable',
      detail: expect.stringContaining(sentence) as string,
    })
  })
})
