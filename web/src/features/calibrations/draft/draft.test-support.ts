import { readFileSync } from 'node:fs'
import type { CalibrationView, MethodDefinition } from '@weirlight/shared/contracts'
import type { CalibrationDraft, DraftStandard } from './calibration-draft'

/** The shipped iron method, from the reference data. */
export function ironMethod(): { definition: MethodDefinition; molarMass: number } {
  const read = (name: string): unknown =>
    JSON.parse(readFileSync(new URL(`../../../../../fixtures/reference/${name}`, import.meta.url), 'utf8'))
  const analytes = read('analytes.json') as { code: string; molarMass: number }[]
  return {
    definition: read('methods/fe-phenanthroline.json') as MethodDefinition,
    molarMass: analytes.find((analyte) => analyte.code === 'Fe')?.molarMass ?? 0,
  }
}

export function aStandard(part: Partial<DraftStandard> = {}): DraftStandard {
  return {
    key: 's1',
    role: 'standard',
    concentration: '1.00',
    lotId: null,
    readings: ['0.1994', '0.1982'],
    leftOutReason: '',
    ...part,
  }
}

export function aDraft(part: Partial<CalibrationDraft> = {}): CalibrationDraft {
  return {
    instrumentId: '5',
    cellPathCm: '1',
    model: 'linear',
    weighting: 'none',
    stockLotId: '31',
    reagentLotIds: ['35'],
    colourStartedAt: null,
    temperatureC: '',
    note: '',
    standards: [aStandard(), aStandard({ key: 's2', concentration: '2.00', readings: ['0.3968', '0.3978'] })],
    ...part,
  }
}

const AT = '2026-11-30T10:00:00-05:00'

/** What the server answers for a draft (constructed). */
export function aView(draft: CalibrationDraft, part: Partial<CalibrationView> = {}): CalibrationView {
  return {
    id: '87',
    number: 'K-26-0087',
    methodId: '1',
    methodTitle: 'Iron by 1,10-phenanthroline',
    analyte: 'Fe',
    form: 'total',
    instrumentId: draft.instrumentId,
    instrumentName: 'Spectrophotometer 2',
    cellPathCm: draft.cellPathCm,
    state: 'draft',
    preparedBy: { id: '11', name: 'Ines Okafor' },
    submittedAt: null,
    validUntil: null,
    slope: null,
    correlation: null,
    criteriaFailed: 0,
    version: 1,
    wavelengthNm: 510,
    model: draft.model,
    weighting: draft.weighting,
    stockLotId: draft.stockLotId,
    stockLotNumber: null,
    reagentLots: draft.reagentLotIds.map((id) => ({ id, number: `R-${id}`, name: 'reagent' })),
    standards: draft.standards.map((standard, index) => ({
      id: standard.key.replace(/\D/g, ''),
      position: index + 1,
      role: standard.role,
      concentration: standard.concentration,
      lotId: standard.lotId,
      lotNumber: null,
      readings: standard.readings.flatMap((absorbance, at) =>
        absorbance === ''
          ? []
          : [
              {
                id: String(100 * (index + 1) + at),
                replicate: at + 1,
                absorbance,
                readAt: AT,
                readBy: { id: '11', name: 'Ines Okafor' },
                corrected: false,
              },
            ],
      ),
      leftOutReason: standard.leftOutReason,
    })),
    colourStartedAt: draft.colourStartedAt,
    temperatureC: draft.temperatureC,
    note: draft.note,
    createdAt: AT,
    stored: null,
    criteria: [],
    signatures: [],
    corrections: [],
    returnedReason: '',
    justification: '',
    endedReason: '',
    validFrom: null,
    replacedBy: null,
    batches: [],
    ...part,
  }
}
