import type { BodyInput, CalibrationView, saveCalibration } from '@weirlight/shared/contracts'

type SaveBody = BodyInput<typeof saveCalibration>

/** What the workbench sends for what it shows. */
export function asForm(view: CalibrationView): SaveBody {
  return {
    version: view.version,
    instrumentId: view.instrumentId,
    cellPathCm: view.cellPathCm,
    model: view.model,
    weighting: view.weighting,
    stockLotId: view.stockLotId,
    reagentLotIds: view.reagentLots.map(({ id }) => id),
    colourStartedAt: view.colourStartedAt,
    temperatureC: view.temperatureC,
    note: view.note,
    standards: view.standards.map(({ role, concentration, lotId, leftOutReason, readings }) => ({
      role,
      concentration,
      lotId,
      leftOutReason,
      readings: readings.length === 0 ? [''] : readings.map(({ absorbance }) => absorbance),
    })),
  }
}

/** The same with other readings of one standard, counted from 0. */
export const changed = (view: CalibrationView, standard: number, readings: string[]): SaveBody => ({
  ...asForm(view),
  standards: asForm(view).standards.map((one, index) => (index === standard ? { ...one, readings } : one)),
})
