import { randomUUID } from 'node:crypto'
import type {
  BodyInput,
  CalibrationView,
  saveCalibration,
  startCalibration,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { DecisionsService, DraftsService } from '../../modules/calibrations/index.js'
import type { TestApp } from '../test-app.js'
import { aLot, anAnalyst, anInstrument, aSigner, PASSPHRASE } from './bench.builders.js'
import { methodId } from './reference.builders.js'

type Form = BodyInput<typeof startCalibration>
type Standard = BodyInput<typeof saveCalibration>['standards'][number]

/** Constructed: 0.197 A per mg/L with a scatter of a few ten-thousandths; 1.5 mg/L from a second source. */
export const IRON_STANDARDS: readonly [string, readonly string[]][] = [
  ['0', ['0.0003', '-0.0002']],
  ['0.05', ['0.0102', '0.0099']],
  ['0.50', ['0.0986', '0.0991']],
  ['1.00', ['0.1973', '0.1968']],
  ['2.00', ['0.3938', '0.3946']],
  ['3.00', ['0.5915', '0.5909']],
  ['4.00', ['0.7881', '0.7877']],
]

export async function ironStandards(at: TestApp): Promise<Standard[]> {
  const second = await aLot(at.database, { kind: 'second-source' })
  return [
    ...IRON_STANDARDS.map(([concentration, readings]): Standard => ({
      role: 'standard',
      concentration,
      lotId: null,
      readings: [...readings],
      leftOutReason: '',
    })),
    {
      role: 'second-source',
      concentration: '1.50',
      lotId: second.id,
      readings: ['0.2951', '0.2957'],
      leftOutReason: '',
    },
  ]
}

/** What the workbench sends for iron in a 1 cm cell, good in every respect. */
export async function aCalibrationForm(at: TestApp, changes: Partial<Form> = {}): Promise<Form> {
  return {
    draftId: randomUUID(),
    methodId: await methodId(at.database, 'fe-phenanthroline'),
    instrumentId: changes.instrumentId ?? (await anInstrument(at.database)).id,
    cellPathCm: '1',
    model: 'linear',
    weighting: 'none',
    stockLotId: changes.stockLotId ?? (await aLot(at.database)).id,
    reagentLotIds: changes.reagentLotIds ?? [(await aLot(at.database, { kind: 'reagent' })).id],
    colourStartedAt: null,
    temperatureC: '21.5',
    note: '',
    standards: changes.standards ?? (await ironStandards(at)),
    ...changes,
  }
}

export async function aDraftCalibration(
  at: TestApp,
  { analyst, ...changes }: Partial<Form> & { analyst?: Actor } = {},
): Promise<CalibrationView> {
  const actor = analyst ?? (await anAnalyst(at.database))
  const form = await aCalibrationForm(at, changes)
  return at.get(DraftsService).start(actor, {
    ...form,
    standards: form.standards.map((one) => ({ ...one, leftOutReason: one.leftOutReason ?? '' })),
  })
}

export async function aSubmittedCalibration(
  at: TestApp,
  { analyst, ...changes }: Partial<Form> & { analyst?: Actor } = {},
): Promise<CalibrationView> {
  const actor = analyst ?? (await anAnalyst(at.database))
  const draft = await aDraftCalibration(at, { ...changes, analyst: actor })
  return at.get(DecisionsService).submit(actor, draft.id, { version: draft.version })
}

/** Iron in a 1 cm cell, prepared by an analyst and signed by a QA manager. */
export async function aCalibrationInForce(
  at: TestApp,
  { signer, ...changes }: Partial<Form> & { analyst?: Actor; signer?: Actor } = {},
): Promise<CalibrationView> {
  const submitted = await aSubmittedCalibration(at, changes)
  const actor = signer ?? (await aSigner(at.database))
  return at.get(DecisionsService).sign(actor, submitted.id, {
    version: submitted.version,
    passphrase: PASSPHRASE,
    justification: '',
  })
}
