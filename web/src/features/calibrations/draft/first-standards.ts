import type { MethodDefinition } from '@weirlight/shared/contracts'
import type { DraftStandard } from './calibration-draft'
import { significant } from './number-texts'

const SHARES = [0.25, 0.5, 0.75, 1] as const

/**
 * Rows to begin with: a blank, one at the reporting limit, then up to the top of what the cell reads by the method. A proposal in the
 * words of the method, to be overwritten by what was really pipetted.
 */
export function firstStandards(
  definition: Pick<MethodDefinition, 'cells' | 'range' | 'reportingLimit'>,
  cellPathCm: string,
): Omit<DraftStandard, 'key'>[] {
  const cell = definition.cells.find((each) => each.pathCm === Number(cellPathCm))
  const { high } = cell ?? definition.range
  const levels = SHARES.map((share) => significant(high * share, 2))
  const between = significant(high * 0.1, 2)
  const lowest = significant(definition.reportingLimit.value, 2)
  const standards = [...new Set(['0', lowest, between, ...levels])].toSorted((a, b) => Number(a) - Number(b))
  const row = (role: DraftStandard['role'], concentration: string) => ({
    role,
    concentration,
    lotId: null,
    readings: ['', '', ''],
    leftOutReason: '',
  })
  return [
    ...standards.map((concentration) => row('standard', concentration)),
    row('second-source', significant(high * 0.5, 2)),
  ]
}
