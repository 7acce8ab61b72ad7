import { absorbanceText, type readingsPreview } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import {
  findColumns,
  plainName,
  type ColumnProblem,
  type NamedColumn,
  type SheetRow,
} from '../../platform/index.js'
import type { AssessedPosition } from './assess-batch.js'
import type { Entry } from './new-readings.js'

type RowView = z.infer<typeof readingsPreview>['rows'][number]
type Key = 'position' | 'kind' | 'sample' | 'point' | 'dilution' | `A${number}`

export const KIND_WORDS: Record<AssessedPosition['row']['kind'], string> = {
  blank: 'blank',
  verification: 'verification',
  'method-blank': 'method blank',
  control: 'control',
  sample: 'sample',
  duplicate: 'duplicate',
  spike: 'spike',
}

/** The columns of the run sheet we hand out; only position and readings are needed to load one. */
export function runSheetColumns(replicates: number): NamedColumn<Key>[] {
  const readings = Array.from({ length: replicates }, (_, index): NamedColumn<Key> => {
    const n = index + 1
    const alone = replicates === 1 ? ['A', 'Abs', 'Absorbance', 'Reading'] : []
    return {
      key: `A${n}`,
      title: `A${n}`,
      otherNames: [`Abs ${n}`, `Absorbance ${n}`, `Reading ${n}`, ...alone],
      isRequired: n === 1,
    }
  })
  return [
    {
      key: 'position',
      title: 'Position',
      otherNames: ['Pos', 'No', 'Number', 'Cell', 'Tube'],
      isRequired: true,
    },
    { key: 'kind', title: 'Kind' },
    { key: 'sample', title: 'Sample', otherNames: ['Label', 'Sample number', 'Sample ID'] },
    { key: 'point', title: 'Sampling point', otherNames: ['Point'] },
    { key: 'dilution', title: 'Dilution', otherNames: ['Dilution factor'] },
    ...readings,
  ]
}

/** The run sheet as rows, in the order of its columns; readings as they were typed, so that they come back unchanged. */
export function runSheetRows(
  positions: readonly AssessedPosition[],
  replicates: number,
): (string | number)[][] {
  return positions.map(({ row, label, readings }) => [
    row.position,
    KIND_WORDS[row.kind],
    label,
    row.pointName ?? '',
    row.dilution,
    ...Array.from({ length: replicates }, (_, index) => {
      return readings.find(({ replicate }) => replicate === index + 1)?.absorbanceText ?? ''
    }),
  ])
}

export interface ReadReadings {
  rows: RowView[]
  /** of the good rows: what would be entered */
  entries: Entry[]
}

/** A file of absorbances read against the run: what it would enter, or what stands against it, by row and column. Pure. */
export function readReadings(
  sheet: readonly SheetRow[],
  { positions, replicates }: { positions: readonly AssessedPosition[]; replicates: number },
): ReadReadings {
  const [top, ...lines] = sheet
  const columns = runSheetColumns(replicates)
  const { indexOf, problems } = findColumns(top?.cells ?? [], columns)
  const header: RowView[] =
    problems.length > 0
      ? [{ row: top?.line ?? 1, ok: false, position: '', label: '', readings: [], current: [], problems }]
      : []
  if (!indexOf.has('position') || !indexOf.has('A1')) return { rows: header, entries: [] }
  const byNumber = new Map(positions.map((one) => [one.row.position, one]))
  const seen = new Map<number, number>()
  const read = lines.map(({ line, cells }) => {
    const text = (key: Key) => cells[indexOf.get(key) ?? -1]?.trim() ?? ''
    const one = readRow(text, { byNumber, replicates })
    const number = one.found?.row.position
    const first = number === undefined ? undefined : seen.get(number)
    if (number !== undefined && first === undefined) seen.set(number, line)
    if (first !== undefined)
      one.problems.push({
        column: 'Position',
        message: `Position ${number ?? ''} stands in row ${first} already.`,
      })
    return { line, ...one }
  })
  return {
    rows: [...header, ...read.map(toRowView)],
    entries: read.flatMap((one) => (one.problems.length === 0 ? one.entries : [])),
  }
}

interface Read {
  found: AssessedPosition | undefined
  position: string
  texts: string[]
  problems: ColumnProblem[]
  entries: Entry[]
}

function readRow(
  text: (key: Key) => string,
  { byNumber, replicates }: { byNumber: ReadonlyMap<number, AssessedPosition>; replicates: number },
): Read {
  const position = text('position')
  const found = /^\d{1,3}$/.test(position) ? byNumber.get(Number(position)) : undefined
  const problems: ColumnProblem[] = []
  if (position === '') problems.push({ column: 'Position', message: 'Please fill this in.' })
  else if (!found) problems.push({ column: 'Position', message: `This batch has no position “${position}”.` })
  if (found) {
    const sample = plainName(text('sample'))
    if (sample !== '' && sample !== plainName(found.label))
      problems.push({ column: 'Sample', message: `Position ${position} is ${found.label}.` })
    const dilution = text('dilution')
    if (dilution !== '' && Number(dilution) !== Number(found.row.dilution)) {
      const message = `The batch says ${found.row.dilution}: set the dilution there before loading the readings.`
      problems.push({ column: 'Dilution', message })
    }
  }
  const texts = Array.from({ length: replicates }, (_, index) => text(`A${index + 1}`))
  const entries = texts.flatMap((absorbance, index): Entry[] => {
    if (absorbance === '') return []
    const parsed = absorbanceText.safeParse(absorbance)
    const message = parsed.error?.issues[0]?.message
    if (message !== undefined) problems.push({ column: `A${index + 1}`, message })
    if (!found || !parsed.success) return []
    const now = found.readings.find(({ replicate }) => replicate === index + 1)
    return [
      {
        positionId: found.row.id,
        replicate: index + 1,
        absorbance: parsed.data,
        supersedes: now?.id ?? null,
      },
    ]
  })
  return { found, position, texts, problems, entries }
}

function toRowView({ line, found, position, texts, problems }: Read & { line: number }): RowView {
  return {
    row: line,
    ok: problems.length === 0,
    position,
    label: found?.label ?? '',
    readings: texts,
    current: texts.map((_, index) => {
      return found?.readings.find(({ replicate }) => replicate === index + 1)?.absorbanceText ?? ''
    }),
    problems,
  }
}
