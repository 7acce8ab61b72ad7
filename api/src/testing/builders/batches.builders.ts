import { randomUUID } from 'node:crypto'
import type { BatchView, BodyInput, openBatch } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { OpeningService, RunningService } from '../../modules/batches/index.js'
import type { TestApp } from '../test-app.js'
import { aLot, anAnalyst } from './bench.builders.js'
import { aCalibrationInForce } from './calibrations.builders.js'
import { anAcceptedSample, type aReceivingForm } from './samples.builders.js'

type Form = BodyInput<typeof openBatch>

/** What the page sends to open a batch of iron with the given determinations; with three new samples when none is given. */
export async function aBatchForm(
  at: TestApp,
  {
    sampleCount = 3,
    sample = {},
    ...changes
  }: Partial<Form> & { sampleCount?: number; sample?: Parameters<typeof aReceivingForm>[1] } = {},
): Promise<Form> {
  const calibration = changes.calibrationId === undefined ? await aCalibrationInForce(at) : undefined
  const determinationIds: string[] = []
  if (changes.determinationIds === undefined) {
    for (let n = 0; n < sampleCount; n += 1) {
      const made = await anAcceptedSample(at, sample)
      determinationIds.push(...made.details.map(({ id }) => id))
    }
  }
  return {
    draftId: randomUUID(),
    methodId: changes.methodId ?? calibration?.methodId ?? '',
    calibrationId: calibration?.id ?? '',
    replicates: 2,
    determinationIds,
    verificationConcentration: '2.00',
    verificationLotId: (await aLot(at.database, { kind: 'working-standard', concentration: '2.00' })).id,
    controlConcentration: '1.00',
    controlLotId: (await aLot(at.database, { kind: 'control', concentration: '1.00' })).id,
    duplicateOf: null,
    spikeOf: null,
    spikeAdded: null,
    reagentLotIds: [(await aLot(at.database, { kind: 'reagent' })).id],
    colourStartedAt: null,
    note: '',
    ...changes,
  }
}

export async function anOpenBatch(
  at: TestApp,
  { analyst, ...changes }: Parameters<typeof aBatchForm>[1] & { analyst?: Actor } = {},
): Promise<{ batch: BatchView; analyst: Actor }> {
  const actor = analyst ?? (await anAnalyst(at.database))
  const batch = await at.get(OpeningService).openBatch(actor, await aBatchForm(at, changes))
  return { batch, analyst: actor }
}

/** Constructed absorbances by kind, on the line of `IRON_STANDARDS`; a sample reads 0.05 A (about 0.25 mg/L). */
const GOOD: Record<BatchView['rows'][number]['kind'], [string, string]> = {
  blank: ['-0.0003', '0.0004'],
  verification: ['0.3940', '0.3944'],
  'method-blank': ['0.0005', '0.0002'],
  control: ['0.1971', '0.1969'],
  sample: ['0.0500', '0.0503'],
  duplicate: ['0.0498', '0.0502'],
  spike: ['0.1485', '0.1489'],
}

/** Every cell typed with what a good run gives; `samples` replaces the readings of samples in their order. */
export async function aReadBatch(
  at: TestApp,
  {
    samples = [],
    ...changes
  }: Parameters<typeof anOpenBatch>[1] & { samples?: readonly (readonly [string, string])[] } = {},
): Promise<{ batch: BatchView; analyst: Actor }> {
  const { batch, analyst } = await anOpenBatch(at, changes)
  let sample = 0
  const readings = batch.rows.flatMap((row) => {
    const own = row.kind === 'sample' ? samples[sample++] : undefined
    return (own ?? GOOD[row.kind]).map((absorbance, index) => ({
      positionId: row.id,
      replicate: index + 1,
      absorbance,
      supersedes: null,
    }))
  })
  return {
    batch: await at.get(RunningService).saveReadings(analyst, batch.id, { source: 'typed', readings }),
    analyst,
  }
}
