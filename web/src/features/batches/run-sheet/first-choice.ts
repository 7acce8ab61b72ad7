import type { CalibrationView } from '@weirlight/shared/contracts'
import type { WaitingDetermination } from '../api/batch-queries'

/** Those whose holding time runs out first, as many as one batch may hold; what is already too late is left to the person. */
export function firstChoice(waiting: readonly WaitingDetermination[], batchSize: number): string[] {
  return waiting
    .filter((each) => each.holding.state !== 'breached')
    .slice(0, batchSize)
    .map((each) => each.id)
}

/** A level in the middle of the calibration, as it was written on its standard. */
export function middleLevel(calibration: Pick<CalibrationView, 'standards'>): string {
  const levels = calibration.standards
    .filter((standard) => standard.role === 'standard' && Number(standard.concentration) > 0)
    .map((standard) => standard.concentration)
    .toSorted((a, b) => Number(a) - Number(b))
  return levels[Math.floor(levels.length / 2)] ?? ''
}
