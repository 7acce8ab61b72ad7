import {
  absorbanceText,
  concentrationText,
  decimalText,
  type BodyInput,
  type CalibrationView,
  type MethodDefinition,
  type saveCalibration,
} from '@weirlight/shared/contracts'
import { assessCalibration, readBackStandards } from '@weirlight/shared/worksheet'

export interface DraftStandard {
  /** stays with its row while rows come and go; never sent */
  key: string
  role: 'standard' | 'second-source'
  concentration: string
  lotId: string | null
  readings: string[]
  leftOutReason: string
}
export interface CalibrationDraft {
  instrumentId: string
  cellPathCm: string
  model: CalibrationView['model']
  weighting: CalibrationView['weighting']
  stockLotId: string | null
  reagentLotIds: string[]
  colourStartedAt: string | null
  temperatureC: string
  note: string
  standards: DraftStandard[]
}

export const readingColumn = (index: number) => String(index + 1)
export const CONCENTRATION = 'concentration'

/** the key of a row that the server has */
export const serverKey = (standardId: string) => `s${standardId}`
export const idInKey = (key: string) => /^s(\d+)$/.exec(key)?.[1] ?? null

/** readings of a standard before the first one is entered: three, as most methods have it */
const FIRST_REPLICATES = 3

export function draftOf(view: CalibrationView, keyOf = serverKey): CalibrationDraft {
  const isUnread = view.standards.every((standard) => standard.readings.length === 0)
  const least = isUnread ? FIRST_REPLICATES : 1
  return {
    instrumentId: view.instrumentId,
    cellPathCm: view.cellPathCm,
    model: view.model,
    weighting: view.weighting,
    stockLotId: view.stockLotId,
    reagentLotIds: view.reagentLots.map((lot) => lot.id),
    colourStartedAt: view.colourStartedAt,
    temperatureC: view.temperatureC,
    note: view.note,
    standards: view.standards
      .toSorted((a, b) => a.position - b.position)
      .map((standard) => {
        const last = Math.max(least, ...standard.readings.map((reading) => reading.replicate))
        const readings = Array.from({ length: last }, (_, index) => textAt(standard.readings, index + 1))
        return {
          key: keyOf(standard.id),
          role: standard.role,
          concentration: standard.concentration,
          lotId: standard.lotId,
          readings,
          leftOutReason: standard.leftOutReason,
        }
      }),
  }
}

function textAt(readings: CalibrationView['standards'][number]['readings'], replicate: number): string {
  return readings.find((reading) => reading.replicate === replicate)?.absorbance ?? ''
}

/** Rows of a sheet have as many cells as the widest has readings. */
export function replicatesOf(draft: CalibrationDraft): number {
  return Math.max(1, ...draft.standards.map((standard) => standard.readings.length))
}

/** `idOf` gives the server's id of a row that it already has */
export function bodyOf(
  draft: CalibrationDraft,
  idOf: (key: string) => string | null = () => null,
): Omit<BodyInput<typeof saveCalibration>, 'version' | 'reason'> {
  return {
    ...draft,
    standards: draft.standards.map(({ key, readings, ...standard }) => ({
      ...standard,
      id: idOf(key),
      readings: (readings.length > 0 ? readings : ['']).map((text) => text.trim()),
    })),
  }
}

const cellPathText = decimalText({ low: 0.1, high: 20, what: 'cell path', unit: 'cm' })
const problemIn = (schema: typeof absorbanceText, text: string): string | null =>
  schema.safeParse(text).error?.issues[0]?.message ?? null

/** What is wrong with a cell as typed, in the words of the contract; an empty reading is not read yet. */
export const readingProblem = (text: string) => (text.trim() === '' ? null : problemIn(absorbanceText, text))
export const concentrationProblem = (text: string) => problemIn(concentrationText, text)
export const cellPathProblem = (text: string) => problemIn(cellPathText, text)

function numbersOf(texts: readonly string[]): number[] {
  return texts.filter((text) => text.trim() !== '' && readingProblem(text) === null).map(Number)
}

/**
 * Everything that is computed of a sheet as it stands, cell by cell as typed: the same functions of the engine that the
 * server decides with. Rows without a concentration and cells that are no numbers are left aside.
 */
export function assessDraft(
  draft: Pick<CalibrationDraft, 'standards' | 'model' | 'weighting' | 'cellPathCm'>,
  method: { definition: MethodDefinition; molarMass: number },
) {
  const rows = draft.standards.map((standard) => ({
    key: standard.key,
    role: standard.role,
    concentration: concentrationProblem(standard.concentration) ? null : Number(standard.concentration),
    absorbances: numbersOf(standard.readings),
    leftOut: standard.leftOutReason.trim() !== '',
  }))
  const known = rows.flatMap((row) =>
    row.concentration === null ? [] : [{ ...row, concentration: row.concentration }],
  )
  const assessment = assessCalibration({
    standards: known,
    model: draft.model,
    weighting: draft.weighting,
    cellPathCm: cellPathProblem(draft.cellPathCm) ? 1 : Number(draft.cellPathCm),
    molarMass: method.molarMass,
    method: method.definition,
  })
  const back = readBackStandards(assessment.fit, known)
  const readBack = new Map(known.map((row, index) => [row.key, back[index]]))
  return { ...assessment, readBack, rows: known }
}
export type DraftAssessment = ReturnType<typeof assessDraft>

/** Saved readings that the draft changes or takes away, by row and column: each needs a reason. */
export function changedReadings(base: CalibrationDraft, draft: CalibrationDraft): string[] {
  const now = new Map(draft.standards.map((standard) => [standard.key, standard]))
  return base.standards.flatMap((standard) =>
    standard.readings.flatMap((text, index) => {
      if (text === '') return []
      const kept = now.get(standard.key)?.readings[index] ?? ''
      return kept === text ? [] : [cellName(standard.key, readingColumn(index))]
    }),
  )
}

export const cellName = (rowKey: string, columnKey: string) => `${rowKey} ${columnKey}`

export function isSameDraft(a: CalibrationDraft, b: CalibrationDraft): boolean {
  return JSON.stringify(bodyOf(a)) === JSON.stringify(bodyOf(b))
}

export function setCell(
  draft: CalibrationDraft,
  cell: { rowKey: string; columnKey: string; text: string },
): CalibrationDraft {
  return {
    ...draft,
    standards: draft.standards.map((standard) => {
      if (standard.key !== cell.rowKey) return standard
      if (cell.columnKey === CONCENTRATION) return { ...standard, concentration: cell.text }
      const index = Number(cell.columnKey) - 1
      const length = Math.max(standard.readings.length, index + 1)
      const readings = Array.from({ length }, (_, at) =>
        at === index ? cell.text : (standard.readings[at] ?? ''),
      )
      return { ...standard, readings }
    }),
  }
}

export function cellText(draft: CalibrationDraft, rowKey: string, columnKey: string): string {
  const standard = draft.standards.find((each) => each.key === rowKey)
  if (!standard) return ''
  if (columnKey === CONCENTRATION) return standard.concentration
  return standard.readings[Number(columnKey) - 1] ?? ''
}

/** The cell or field of the sheet that a complaint of the server belongs to, e.g. `standards.2.readings.0`. */
export function placeOf(path: string, draft: CalibrationDraft): { rowKey: string; columnKey: string } | null {
  const match = /^standards\.(\d+)\.(concentration|lotId|leftOutReason|readings)(?:\.(\d+))?$/.exec(path)
  if (!match) return null
  const standard = draft.standards[Number(match[1])]
  if (!standard) return null
  const columnKey = match[2] === 'readings' ? readingColumn(Number(match[3] ?? 0)) : (match[2] ?? '')
  return { rowKey: standard.key, columnKey }
}
