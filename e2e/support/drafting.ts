import {
  copyCalibration,
  getCalibration,
  listCalibrations,
  saveCalibration,
  type CalibrationView,
} from '@weirlight/shared/contracts'
import { randomUUID } from 'node:crypto'
import type { Api } from './api.js'
import { methodId } from './set-up.js'

/** How far the bench is: two readings of the first standards, one of the next. */
const READ_TWICE = 3
const READ_ONCE = 5

/** A calibration under way: the one of this method in force set up anew, with the first of its readings typed again. */
export async function draftUnderWay(api: Api, method: string): Promise<CalibrationView> {
  const query = { methodId: await methodId(api, method) }
  const { items } = await api.call(listCalibrations, { query: { ...query, state: 'in-force' } })
  const model = items.toSorted((a, b) => Number(a.id) - Number(b.id))[0]
  if (!model) throw new Error(`No calibration is in force for ${method}.`)
  const inForce = await api.call(getCalibration, { params: { id: model.id } })
  const draft = await api.call(copyCalibration, {
    params: { id: model.id },
    body: { draftId: randomUUID() },
  })
  return api.call(saveCalibration, {
    params: { id: draft.id },
    body: {
      version: draft.version,
      instrumentId: draft.instrumentId,
      cellPathCm: draft.cellPathCm,
      model: draft.model,
      weighting: draft.weighting,
      stockLotId: draft.stockLotId,
      reagentLotIds: draft.reagentLots.map((lot) => lot.id),
      colourStartedAt: draft.colourStartedAt,
      temperatureC: draft.temperatureC,
      note: draft.note,
      standards: draft.standards.map((standard, row) => {
        const count = row < READ_TWICE ? 2 : row < READ_ONCE ? 1 : 0
        const found = inForce.standards[row]?.readings.slice(0, count).map(({ absorbance }) => absorbance)
        return {
          id: standard.id,
          role: standard.role,
          concentration: standard.concentration,
          lotId: standard.lotId,
          readings: found && found.length > 0 ? found : [''],
          leftOutReason: '',
        }
      }),
    },
  })
}
