import type {
  analyteCode,
  determinationState,
  form,
  receiveBody,
  sampleKind,
  sampleState,
} from '@weirlight/shared/contracts'
import type { z } from 'zod'

type Received = z.output<typeof receiveBody>
type Analyte = z.infer<typeof analyteCode>
type Form = z.infer<typeof form>
type State = z.infer<typeof sampleState>
type DeterminationState = z.infer<typeof determinationState>

export interface SampleFilter {
  before?: string | undefined
  state?: string | undefined
  clientId?: string | undefined
  pointId?: string | undefined
  number?: string | undefined
  limit: number
}

export interface SampleRow {
  id: string
  number: string
  clientId: string
  clientName: string
  pointId: string
  pointCode: string
  pointName: string
  state: State
  purpose: Received['purpose']
  kind: z.infer<typeof sampleKind>
  collectedAt: Date
  receivedAt: Date | null
  determinations: {
    analyte: Analyte
    form: Form
    state: DeterminationState
    dueAt: string
    rule: string
    soonWithinHours: number | null
  }[]
}

export interface SampleWhole extends SampleRow {
  collectedBy: string
  receivedBy: string | null
  receivedByName: string | null
  preservation: Received['preservation']
  ph: string
  temperatureC: string
  container: Received['container']
  filteredInField: boolean
  condition: string
  remarks: string
  acceptanceReason: string
  clientConsent: string
  version: number
  clientActive: boolean
  pointActive: boolean
  programmeCode: string
  certificates: { id: string; number: string; state: string }[]
}

export interface DeterminationRow {
  id: string
  analyte: Analyte
  form: Form
  methodId: string
  methodTitle: string
  state: DeterminationState
  holdingDueAt: Date
  holdingRule: string
  soonWithinHours: number | null
  version: number
  batchId: string | null
  batchNumber: string | null
  lastReadAt: Date | null
  resultId: string | null
  reportedText: string | null
  unit: string | null
  verdict: string | null
}

export interface LockedSample {
  id: string
  number: string
  clientId: string
  samplingPointId: string
  purpose: Received['purpose']
  state: State
  collectedAt: Date
  receivedAt: Date | null
  preservation: Received['preservation']
  ph: string
  temperatureC: string
  version: number
}

export interface LockedDetermination {
  id: string
  sampleId: string
  state: DeterminationState
  version: number
}

export interface NewSample extends Omit<Received, 'determinations'> {
  state: State
  receivedBy: string
  uploadId: string | null
}

export type Correction = Pick<
  Received,
  | 'collectedAt'
  | 'collectedBy'
  | 'preservation'
  | 'ph'
  | 'temperatureC'
  | 'container'
  | 'filteredInField'
  | 'condition'
  | 'remarks'
>

export interface WaitingRow {
  id: string
  sampleId: string
  sampleNumber: string
  clientName: string
  pointCode: string
  pointName: string
  methodId: string
  methodTitle: string
  collectedAt: Date
  receivedAt: Date
  holdingDueAt: Date
  holdingRule: string
  soonWithinHours: number | null
  sampleState: State
}
