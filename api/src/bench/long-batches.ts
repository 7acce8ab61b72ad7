import { randomUUID } from 'node:crypto'
import {
  decideAcceptance,
  getBatch,
  getMethod,
  getSample,
  listBatches,
  listCalibrations,
  listSamples,
  openBatch,
  receiveSample,
  type BatchView,
  type BodyInput,
  type MethodRecord,
} from '@weirlight/shared/contracts'
import { layRun } from '../modules/batches/run-layout.js'
import type { Agent } from '../testing/agent.js'

export const POSITIONS = 40

type Opening = Omit<BodyInput<typeof openBatch>, 'draftId' | 'determinationIds'>
/** A method that can be run today, and how its last batch was opened. */
interface Runnable {
  methodId: string
  sampleCount: number
  opening: Opening
}

/** Opens batches of 40 positions through the API, from samples received for them. */
export async function openLongBatches(
  agent: Agent,
  { count, now }: { count: number; now: Date },
): Promise<BatchView[]> {
  const runnable = await findRunnable(agent)
  if (runnable.length === 0)
    throw new Error('No method has both a calibration in force and an earlier batch.')
  const points = await findPoints(agent)
  const samplesEach = Math.max(...runnable.map(({ sampleCount }) => sampleCount))
  const batches: BatchView[] = []
  while (batches.length < count) {
    const waiting = new Map<string, string[]>(runnable.map(({ methodId }) => [methodId, []]))
    for (let index = 0; index < samplesEach; index += 1) {
      const point = points[index % points.length]
      if (!point) throw new Error('The demo laboratory has no sampling points.')
      const sample = await receive(agent, { ...point, methodIds: [...waiting.keys()], now })
      for (const { methodId, id } of sample.details) waiting.get(methodId)?.push(id)
    }
    for (const { methodId, sampleCount, opening } of runnable) {
      if (batches.length === count) break
      const determinationIds = (waiting.get(methodId) ?? []).slice(0, sampleCount)
      const batch = await agent.call(openBatch, {
        body: { ...opening, draftId: randomUUID(), determinationIds },
      })
      if (batch.rows.length !== POSITIONS) throw new Error(`A batch of ${batch.rows.length} positions.`)
      batches.push(batch)
    }
  }
  return batches
}

async function findRunnable(agent: Agent): Promise<Runnable[]> {
  const { items: calibrations } = await agent.call(listCalibrations, {
    query: { state: 'in-force', limit: 50 },
  })
  const found: Runnable[] = []
  for (const { id, methodId } of calibrations) {
    if (found.some((one) => one.methodId === methodId)) continue
    const { items } = await agent.call(listBatches, { query: { methodId, limit: 1 } })
    const method = await agent.call(getMethod, { params: { id: methodId } })
    const sampleCount = samplesFor((method.definition as MethodRecord).acceptance)
    if (!items[0] || sampleCount === undefined) continue
    const before = await agent.call(getBatch, { params: { id: items[0].id } })
    found.push({ methodId, sampleCount, opening: openingLike(before, id) })
  }
  return found
}

/** As many samples as fill 40 positions with the controls that the method asks for. */
function samplesFor(acceptance: {
  verificationEvery: { value: number }
  batchSize: { value: number }
}): number | undefined {
  const counts = Array.from({ length: POSITIONS }, (_, index) => index + 1)
  return counts.find((count) => {
    const laid = layRun({
      determinationIds: counts.slice(0, count).map(String),
      duplicateOf: null,
      spikeOf: null,
      verificationEvery: acceptance.verificationEvery.value,
      groupSize: acceptance.batchSize.value,
    })
    return laid.length === POSITIONS
  })
}

function openingLike(before: BatchView, calibrationId: string): Opening {
  const control = (kind: string) => before.rows.find((row) => row.kind === kind)
  return {
    methodId: before.methodId,
    calibrationId,
    replicates: 1,
    verificationConcentration: control('verification')?.expected ?? '',
    verificationLotId: control('verification')?.lotId ?? null,
    controlConcentration: control('control')?.expected ?? '',
    controlLotId: control('control')?.lotId ?? null,
    duplicateOf: null,
    spikeOf: null,
    spikeAdded: null,
    reagentLotIds: before.reagentLots.map(({ id }) => id),
    colourStartedAt: null,
    note: '',
  }
}

async function findPoints(agent: Agent): Promise<{ clientId: string; pointId: string }[]> {
  const { items } = await agent.call(listSamples, { query: { limit: 200 } })
  const points = new Map(items.map(({ clientId, pointId }) => [pointId, { clientId, pointId }]))
  return [...points.values()]
}

async function receive(
  agent: Agent,
  given: { clientId: string; pointId: string; methodIds: readonly string[]; now: Date },
) {
  const hoursAgo = (hours: number) => new Date(given.now.getTime() - hours * 3_600_000).toISOString()
  const sample = await agent.call(receiveSample, {
    body: {
      draftId: randomUUID(),
      clientId: given.clientId,
      pointId: given.pointId,
      purpose: 'operational',
      kind: 'routine',
      collectedAt: hoursAgo(3),
      collectedBy: 'Duty operator',
      receivedAt: hoursAgo(1),
      preservation: 'nitric-acid',
      ph: '1.6',
      temperatureC: '4.0',
      container: 'plastic',
      filteredInField: false,
      condition: '',
      remarks: '',
      determinations: given.methodIds.map((methodId) => ({ methodId })),
    },
  })
  const decision = (await agent.call(getSample, { params: { id: sample.id } })).suggested
  return agent.call(decideAcceptance, {
    params: { id: sample.id },
    body: {
      version: sample.version,
      verdict: decision === 'accepted' ? decision : 'accepted-with-qualification',
      reason: decision === 'accepted' ? '' : 'One bottle for all determinations, for the bench.',
      clientConsent: decision === 'accepted' ? '' : 'Agreed for the bench.',
    },
  })
}
