import type {
  AssessmentRules,
  BatchView,
  MethodRecord,
  PositionLimit,
  PositionView,
  ReportingRules,
  batchState,
} from '@weirlight/shared/contracts'
import type { z } from 'zod'

export type BatchStateName = z.infer<typeof batchState>
export type PositionKind = PositionView['kind']

export interface BatchListRow {
  id: string
  number: string
  methodId: string
  methodTitle: string
  analyte: BatchView['analyte']
  form: BatchView['form']
  calibrationId: string
  calibrationNumber: string
  state: BatchStateName
  openedBy: string
  openedByName: string
  openedAt: Date
  submittedAt: Date | null
  releasedAt: Date | null
  positions: number
  positionsRead: number
  samples: number
  aboveLimit: number
  openFindings: number
  /** by the laboratory's own clock, kept as data; null where none is kept */
  reviewDueAt: Date | null
  version: number
}

export interface FindingActionRow {
  findingId: string
  kind: 'read-again' | 'flagged' | 'explained' | 'rerun'
  text: string
  by: string
  at: string
}

export interface BatchWholeRow extends BatchListRow {
  instrumentId: string
  instrumentName: string
  replicates: number
  calibrationValidUntil: Date | null
  cellPathCm: string
  definition: Pick<MethodRecord, 'wavelengthNm' | 'development' | 'band' | 'cautions'>
  reagentLots: { id: string; number: string; name: string }[]
  rules: AssessmentRules
  /** oldest first */
  findingActions: FindingActionRow[]
  returnedReason: string
  note: string
  colourStartedAt: Date | null
}

export interface LockedBatch {
  id: string
  number: string
  state: BatchStateName
  methodId: string
  calibrationId: string
  instrumentId: string
  replicates: number
  colourStartedAt: Date | null
  version: number
}

export interface PositionRow {
  id: string
  position: number
  kind: PositionKind
  determinationId: string | null
  ofPositionId: string | null
  expected: string | null
  added: string | null
  lotId: string | null
  lotNumber: string | null
  dilution: string
  note: string
  limits: PositionLimit[]
  reporting: ReportingRules
  version: number
  sampleId: string | null
  sampleNumber: string | null
  pointName: string | null
  clientName: string | null
  collectedAt: Date | null
  holdingDueAt: Date | null
  holdingRule: string | null
  soonWithinHours: number | null
  resultId: string | null
}

export interface PositionReadingRow {
  id: string
  positionId: string
  replicate: number
  absorbanceText: string
  readAt: Date
  readBy: string
  readByName: string
  source: 'typed' | 'pasted' | 'file'
  supersedesId: string | null
  reason: string
}

export interface DilutionChangeRow {
  positionId: string
  from: string
  to: string
  by: string
  at: Date
  reason: string
}

export interface WaitingToOpen {
  id: string
  state: string
  methodId: string
  sampleId: string
  sampleNumber: string
  sampleState: string
  collectedAt: Date
  /** the batch it is in, when it is */
  batchNumber: string | null
  limits: PositionLimit[]
  displayUnit: ReportingRules['displayUnit']
  ties: ReportingRules['ties']
  nonDetect: string
  nonDetectFor: { analyte: string; rule: string }[] | null
  reportedDigits: number | null
}

export interface NewReading {
  positionId: string
  replicate: number
  absorbance: string
  supersedesId: string | null
  reason: string
}
