import type { PositionLimit, ResultRow } from '@weirlight/shared/contracts'
import type { ResultRecord } from './results.repository.js'

/** A stored result as the contracts show it. */
export function toResultRow(row: ResultRecord): ResultRow {
  const limit = row.limitSnapshot as unknown as PositionLimit | null
  return {
    id: row.id,
    state: row.state as ResultRow['state'],
    sampleId: row.sampleId,
    sampleNumber: row.sampleNumber,
    clientId: row.clientId,
    clientName: row.clientName,
    pointId: row.pointId,
    pointCode: row.pointCode,
    pointName: row.pointName,
    analyte: row.analyte as ResultRow['analyte'],
    form: row.form as ResultRow['form'],
    methodId: row.methodId,
    methodTitle: row.methodTitle,
    batchId: row.batchId,
    batchNumber: row.batchNumber,
    collectedAt: row.collectedAt.toISOString(),
    measuredAt: row.measuredAt.toISOString(),
    releasedAt: row.releasedAt?.toISOString() ?? null,
    text: row.reportedText,
    unit: row.unit as ResultRow['unit'],
    concentration: row.concentration,
    expandedUncertainty: row.expandedUncertainty,
    uncertaintyText: row.uncertaintyText === '' ? null : row.uncertaintyText,
    verdict: row.verdict as ResultRow['verdict'],
    limitName: limit?.name ?? null,
    limitValue: limit?.value ?? null,
    limitUnit: limit?.unit ?? null,
    flags: row.flags,
  }
}
