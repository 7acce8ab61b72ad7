import type {
  CalibrationView,
  Criterion,
  MethodRecord,
  calibrationModel,
  calibrationState,
  calibrationWeighting,
  storedFit,
} from '@weirlight/shared/contracts'
import type { z } from 'zod'

export type CalibrationStateName = z.infer<typeof calibrationState>
export type StoredFit = z.infer<typeof storedFit>

export interface CalibrationListRow {
  id: string
  number: string
  methodId: string
  methodTitle: string
  analyte: CalibrationView['analyte']
  form: CalibrationView['form']
  instrumentId: string
  instrumentName: string
  cellPathCm: string
  state: CalibrationStateName
  preparedBy: string
  preparedByName: string
  submittedAt: Date | null
  validUntil: Date | null
  slope: number | null
  correlation: number | null
  criteriaFailed: number
  version: number
}

export interface LotName {
  id: string
  number: string
  name: string
}

export interface CalibrationWholeRow extends CalibrationListRow {
  draftId: string | null
  model: z.infer<typeof calibrationModel>
  weighting: z.infer<typeof calibrationWeighting>
  stockLotId: string | null
  stockLotNumber: string | null
  reagentLots: LotName[]
  colourStartedAt: Date | null
  temperatureC: string
  note: string
  createdAt: Date
  stored: StoredFit | null
  criteria: Criterion[]
  returnedReason: string
  justification: string
  endedReason: string
  signedAt: Date | null
  endedAt: Date | null
  replacedById: string | null
  replacedByNumber: string | null
  batches: { id: string; number: string }[]
  methodCode: string
  methodEdition: string
  definition: Pick<
    MethodRecord,
    | 'wavelengthNm'
    | 'molarMass'
    | 'acceptance'
    | 'absorbanceLimits'
    | 'slopeTolerancePercent'
    | 'reportingLimit'
    | 'molarAbsorptivity'
    | 'calibrationMaxAgeDays'
  >
}

export interface StandardRow {
  id: string
  position: number
  role: 'standard' | 'second-source'
  concentration: string
  lotId: string | null
  lotNumber: string | null
  leftOutReason: string
  removed: boolean
}

export interface ReadingRow {
  id: string
  standardId: string
  replicate: number
  /** null: the earlier reading was withdrawn */
  absorbanceText: string | null
  readAt: Date
  readBy: string
  readByName: string
  supersedesId: string | null
  reason: string
}

export interface LockedCalibration {
  id: string
  number: string
  state: CalibrationStateName
  methodId: string
  instrumentId: string
  cellPathCm: string
  preparedBy: string
  preparedByName: string
  validUntil: Date | null
  version: number
}

export interface CalibrationUse {
  number: string
  state: CalibrationStateName
  validUntil: Date | null
  now: Date
}
