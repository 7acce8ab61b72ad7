import { Injectable } from '@nestjs/common'
import type {
  exportResults,
  listResults,
  portalResults,
  QueryOf,
  resultTrend,
} from '@weirlight/shared/contracts'
import { determinationName, showUnit, type PositionLimit } from '@weirlight/shared/contracts'
import { convertUnit } from '@weirlight/shared/assay'
import { drawnLimit } from '@weirlight/shared/charts'
import {
  Clock,
  Database,
  invalidInput,
  notFound,
  toCsv,
  toPage,
  toXlsx,
  type AnswerOf,
  type CellValue,
  type Executor,
  type FileAnswer,
} from '../../platform/index.js'
import { toResultRow } from './result-row.js'
import { ResultsRepository, type ResultRecord } from './results.repository.js'

const EXPORT_ROWS = 20_000

@Injectable()
export class ResultsService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly results: ResultsRepository,
  ) {}

  async list({
    after,
    limit,
    ...filter
  }: QueryOf<typeof listResults>): Promise<AnswerOf<typeof listResults>> {
    const rows = await this.results.list(this.db.read, { after, limit, filter })
    return toPage(rows, { limit, key: (row) => [row.id], item: toResultRow })
  }

  async get(db: Executor, id: string): Promise<ResultRecord> {
    const row = await this.results.find(db, id)
    if (!row) throw notFound('result')
    return row
  }

  /** Released results of one client; `limit + 1` rows, for a page. */
  async releasedTo(
    clientId: string,
    { after, limit, ...filter }: QueryOf<typeof portalResults>,
  ): Promise<ResultRecord[]> {
    return this.results.list(this.db.read, {
      after,
      limit,
      filter: { ...filter, clientId, state: 'released' },
    })
  }

  /** Released results of one sample: what a certificate may say. */
  async releasedOf(db: Executor, sampleId: string): Promise<ResultRecord[]> {
    return this.results.released(db, { sampleId })
  }

  /** `clientId` narrows to one client's rows; another client's point gives an empty trend. */
  async trend(
    query: QueryOf<typeof resultTrend>,
    clientId: string | null,
  ): Promise<AnswerOf<typeof resultTrend>> {
    const rows = await this.results.trend(this.db.read, { ...query, form: query.form, clientId })
    const newest = rows.at(-1)
    const unit = (newest?.unit ?? 'mg/L') as 'mg/L' | 'ug/L'
    const limit = newest?.limitSnapshot as unknown as PositionLimit | null | undefined
    return {
      unit,
      limit: limit ? drawnLimit(limit, unit) : null,
      points: rows.map((row) => ({
        resultId: row.id,
        at: row.collectedAt.toISOString(),
        value: drawnValue(row, unit),
        text: row.reportedText,
        verdict: toResultRow(row).verdict,
        nonDetect: row.reportedText.startsWith('<'),
      })),
    }
  }

  async export({ format, ...filter }: QueryOf<typeof exportResults>): Promise<FileAnswer> {
    const found = await this.results.list(this.db.read, { after: undefined, limit: EXPORT_ROWS, filter })
    if (found.length > EXPORT_ROWS) {
      const message = `These are more than ${EXPORT_ROWS} results; choose a shorter time.`
      throw invalidInput([{ path: 'from', message }])
    }
    const rows = found.map(exportRow)
    const now = this.clock.now()
    const name = `results-${now.toISOString().slice(0, 10)}`
    if (format === 'csv') {
      const content = toCsv(EXPORT_COLUMNS, rows)
      return { content, mediaType: 'text/csv', filename: `${name}.csv` }
    }
    const columns = EXPORT_COLUMNS.map((header) => ({ header }))
    const content = await toXlsx([{ name: 'Results', columns, rows }], now)
    const mediaType = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'
    return { content, mediaType, filename: `${name}.xlsx` }
  }
}

/** Where a chart draws a result: as measured, a non-detect at the limit behind its `<`, whatever a rule counts it as. */
function drawnValue(row: ResultRecord, unit: 'mg/L' | 'ug/L'): number {
  if (!row.reportedText.startsWith('<')) {
    return convertUnit({ value: row.concentration, from: 'mg/L', to: unit })
  }
  const limit = Number(row.reportedText.slice(1))
  return convertUnit({ value: limit, from: row.unit as 'mg/L' | 'ug/L', to: unit })
}

const EXPORT_COLUMNS = [
  'Sample',
  'Client',
  'Point',
  'Point name',
  'Determination',
  'Method',
  'Collected',
  'Measured',
  'Released',
  'State',
  'Result',
  'U (k=2)',
  'Unit',
  'Unrounded mg/L',
  'Limit',
  'Limit value',
  'Limit unit',
  'Finding',
  'Flags',
  'Batch',
]

function exportRow(row: ResultRecord): CellValue[] {
  const shown = toResultRow(row)
  return [
    shown.sampleNumber,
    shown.clientName,
    shown.pointCode,
    shown.pointName,
    determinationName(shown.analyte, shown.form),
    shown.methodTitle,
    shown.collectedAt,
    shown.measuredAt,
    shown.releasedAt,
    shown.state,
    shown.text,
    shown.uncertaintyText,
    showUnit(shown.unit),
    shown.concentration,
    shown.limitName,
    shown.limitValue,
    shown.limitUnit ? showUnit(shown.limitUnit) : null,
    shown.verdict,
    shown.flags.join(', '),
    shown.batchNumber,
  ]
}
