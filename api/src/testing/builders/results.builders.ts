import type { BatchView, BodyInput, ResultRow, saveReadings } from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { RunningService } from '../../modules/batches/index.js'
import { toResultRow } from '../../modules/results/index.js'
import { ResultsRepository } from '../../modules/results/results.repository.js'
import { ReviewService } from '../../modules/results/review.service.js'
import { SYSTEM } from '../../platform/database/acting.js'
import type { TestApp } from '../test-app.js'
import type { TestDatabase } from '../test-database.js'
import { anOpenBatch, type aBatchForm } from './batches.builders.js'
import { aLot, anAnalyst, anInstrument, aSigner, PASSPHRASE } from './bench.builders.js'
import { aCalibrationInForce, ironStandards } from './calibrations.builders.js'
import { methodId as methodIdOf } from './reference.builders.js'
import { anAcceptedSample, aPoint } from './samples.builders.js'

/** Two absorbances of one tube. On the line of `IRON_STANDARDS`, 0.197 A per mg/L: constructed. */
export type Pair = readonly [string, string]
/** about 0.25 mg/L: above the 200 µg/L of `eu-fe-indicator`, under the simple rule */
export const ABOVE: Pair = ['0.0500', '0.0503']
/** about 0.10 mg/L: below it */
export const BELOW: Pair = ['0.0201', '0.0199']
/** at the reagent blank: not detected */
export const NOTHING: Pair = ['0.0004', '0.0001']

const CONTROLS: Partial<Record<BatchView['rows'][number]['kind'], Pair>> = {
  blank: ['-0.0003', '0.0004'],
  verification: ['0.3940', '0.3944'],
  'method-blank': ['0.0005', '0.0002'],
  control: ['0.1971', '0.1969'],
}

export type Metal = 'Fe' | 'Cu'
const METHODS = { Fe: 'fe-phenanthroline', Cu: 'cu-bathocuproine' } as const

export interface Bench {
  analyst: Actor
  reviewer: Actor
  instrumentId: string
  calibrationId: string
  methodId: string
}

const benches = new WeakMap<TestDatabase, Map<Metal, Promise<Bench>>>()

/** One bench for a metal, made once a test database: an analyst, a QA manager who may sign, a calibration in force. */
export function theBench(at: TestApp, metal: Metal = 'Fe'): Promise<Bench> {
  const made = benches.get(at.database) ?? new Map<Metal, Promise<Bench>>()
  benches.set(at.database, made)
  const bench = made.get(metal) ?? makeBench(at, metal)
  made.set(metal, bench)
  return bench
}

/** Copper by bathocuproine has, to three digits, the slope of iron by phenanthroline (their absorptivities over their molar masses): the same absorbances serve. */
async function makeBench(at: TestApp, metal: Metal): Promise<Bench> {
  const methodCode = METHODS[metal]
  const analyst = await anAnalyst(at.database, { methodCode, name: 'Ana Lyst' })
  const reviewer = await aSigner(at.database, { methodCode, name: 'Quentin Abel' })
  const instrument = await anInstrument(at.database)
  const methodId = await methodIdOf(at.database, methodCode)
  const stock = await aLot(at.database, { analyte: metal })
  const second = await aLot(at.database, { kind: 'second-source', analyte: metal })
  const calibration = await aCalibrationInForce(at, {
    analyst,
    signer: reviewer,
    methodId,
    instrumentId: instrument.id,
    stockLotId: stock.id,
    standards: (await ironStandards(at)).map((standard) =>
      standard.role === 'second-source' ? { ...standard, lotId: second.id } : standard,
    ),
  })
  return { analyst, reviewer, instrumentId: instrument.id, calibrationId: calibration.id, methodId }
}

/** Another calibration in force on its own instrument, so that nothing else in the file is touched by it. */
export async function aSecondCalibration(at: TestApp): Promise<string> {
  const { analyst, reviewer } = await theBench(at)
  return (await aCalibrationInForce(at, { analyst, signer: reviewer })).id
}

export async function aContact(
  { db }: TestDatabase,
  contact: {
    clientId: string
    email: string
    name?: string
    getsAlerts?: boolean
    getsCertificates?: boolean
    active?: boolean
  },
): Promise<{ id: string; email: string }> {
  const {
    clientId,
    email,
    name = 'Contact',
    getsAlerts = true,
    getsCertificates = true,
    active = true,
  } = contact
  return db.transaction(SYSTEM, 'contact.add', null, (trx) =>
    trx
      .insertInto('contacts')
      .values({ clientId, name, email, getsAlerts, getsCertificates, active })
      .returning(['id', 'email'])
      .executeTakeFirstOrThrow(),
  )
}

/** Every cell of the run: controls as they should be, samples as given (the first pair for those without), duplicates as their sample. */
export function runReadings(
  batch: BatchView,
  samples: readonly Pair[] = [],
  controls: typeof CONTROLS = {},
): BodyInput<typeof saveReadings>['readings'] {
  const ofSample = new Map<string, Pair>()
  batch.rows
    .filter((row) => row.kind === 'sample')
    .forEach((row, index) => ofSample.set(row.id, samples[index] ?? samples[0] ?? ABOVE))
  return batch.rows.flatMap((row) => {
    const pair: Pair =
      controls[row.kind] ??
      CONTROLS[row.kind] ??
      ofSample.get(row.kind === 'sample' ? row.id : (row.ofPositionId ?? '')) ??
      ABOVE
    return pair.slice(0, batch.replicates).map((absorbance, index) => ({
      positionId: row.id,
      replicate: index + 1,
      absorbance,
      supersedes: row.readings.find((reading) => reading.replicate === index + 1)?.id ?? null,
    }))
  })
}

type BatchChanges = Parameters<typeof aBatchForm>[1] & {
  analyst?: Actor
  metal?: Metal
  samples?: readonly Pair[]
  controls?: typeof CONTROLS
}
export interface MadeBatch {
  batch: BatchView
  analyst: Actor
}

/** A fully read run on the bench's calibration; one new sample when no determination is given. */
export async function aRun(
  at: TestApp,
  { samples = [], controls = {}, metal = 'Fe', ...changes }: BatchChanges = {},
): Promise<MadeBatch> {
  const bench = await theBench(at, metal)
  const lots =
    metal === 'Fe'
      ? {}
      : {
          verificationLotId: (await aLot(at.database, { kind: 'working-standard', analyte: metal })).id,
          controlLotId: (await aLot(at.database, { kind: 'control', analyte: metal })).id,
        }
  const analyst = changes.analyst ?? bench.analyst
  const { batch } = await anOpenBatch(at, {
    methodId: bench.methodId,
    calibrationId: bench.calibrationId,
    sampleCount: Math.max(1, samples.length),
    ...lots,
    ...changes,
    analyst,
  })
  return {
    batch: await at.get(RunningService).saveReadings(analyst, batch.id, {
      source: 'typed',
      readings: runReadings(batch, samples, controls),
    }),
    analyst,
  }
}

export async function aSubmittedBatch(at: TestApp, changes: BatchChanges = {}): Promise<MadeBatch> {
  const { batch, analyst } = await aRun(at, changes)
  return { batch: await at.get(ReviewService).submit(analyst, batch.id, { version: batch.version }), analyst }
}

export async function aReleasedBatch(
  at: TestApp,
  {
    reviewer,
    rerunPositionIds = [],
    comment = '',
    ...changes
  }: BatchChanges & { reviewer?: Actor; rerunPositionIds?: string[]; comment?: string } = {},
): Promise<MadeBatch & { reviewer: Actor }> {
  const { batch, analyst } = await aSubmittedBatch(at, changes)
  const actor = reviewer ?? (await theBench(at, changes.metal)).reviewer
  const released = await at.get(ReviewService).release(actor, batch.id, {
    version: batch.version,
    passphrase: PASSPHRASE,
    rerunPositionIds,
    comment,
  })
  return { batch: released, analyst, reviewer: actor }
}

export async function resultsOf(at: TestApp, batchId: string): Promise<ResultRow[]> {
  const rows = await at.get(ResultsRepository).ofBatch(at.database.db.fresh, batchId)
  return rows.map(toResultRow)
}

/** One sample from the bottle to the released result: of a client with one contact, when none is given. */
export async function aReleasedResult(
  at: TestApp,
  {
    reading = ABOVE,
    pointId,
    clientId,
    ...changes
  }: BatchChanges & { reading?: Pair; clientId?: string; pointId?: string } = {},
): Promise<{ result: ResultRow; batch: BatchView; clientId: string; sampleId: string; pointId: string }> {
  const point =
    clientId === undefined || pointId === undefined
      ? await aPoint(at.database, clientId === undefined ? {} : { clientId })
      : { clientId, id: pointId }
  if (clientId === undefined) {
    await aContact(at.database, {
      clientId: point.clientId,
      email: `works-${point.clientId}@utility.example`,
    })
  }
  const sample = await anAcceptedSample(at, {
    ...changes.sample,
    clientId: point.clientId,
    pointId: point.id,
  })
  const { batch } = await aReleasedBatch(at, {
    ...changes,
    samples: [reading],
    determinationIds: sample.details.map(({ id }) => id),
  })
  const [result] = await resultsOf(at, batch.id)
  if (!result) throw new Error('The batch has no result.')
  return { result, batch, clientId: point.clientId, sampleId: sample.id, pointId: point.id }
}
