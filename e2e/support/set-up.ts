import {
  decideAcceptance,
  getBatch,
  getCalibration,
  listCalibrations,
  listClients,
  getClient,
  listMethods,
  listWaiting,
  openBatch,
  receiveSample,
  releaseBatch,
  saveReadings,
  submitBatch,
  type BatchView,
  type BodyOf,
  type SampleView,
} from '@weirlight/shared/contracts'
import { randomUUID } from 'node:crypto'
import type { Account } from './accounts.js'
import type { Api } from './api.js'
import { constructedRun } from './running.js'
import { hoursAgo } from './times.js'

/* What a test stands on, made past the page by the people who would make it. */

export async function methodId(api: Api, code: string): Promise<string> {
  const { items } = await api.call(listMethods, {})
  const found = items.find((each) => each.code === code)
  if (!found) throw new Error(`There is no method ${code}.`)
  return found.id
}

export async function pointOf(api: Api, given: { client: string; point: string }) {
  const { items } = await api.call(listClients, {})
  const client = items.find((each) => each.code === given.client)
  if (!client) throw new Error(`There is no client ${given.client}.`)
  const { points } = await api.call(getClient, { params: { id: client.id } })
  const point = points.find((each) => each.code === given.point)
  if (!point) throw new Error(`${given.client} has no point ${given.point}.`)
  return { clientId: client.id, pointId: point.id }
}

interface Wanted {
  client: string
  point: string
  method: string
}

/** What the receiving form sends of an acidified bottle with one determination. */
export async function receiptOf(api: Api, given: Wanted): Promise<BodyOf<typeof receiveSample>> {
  return {
    ...(await pointOf(api, given)),
    draftId: randomUUID(),
    purpose: 'operational',
    kind: 'routine',
    collectedAt: hoursAgo(3).toISOString(),
    collectedBy: 'Field round',
    receivedAt: hoursAgo(1).toISOString(),
    preservation: 'nitric-acid',
    ph: '1.6',
    temperatureC: '5.0',
    container: 'plastic',
    filteredInField: false,
    condition: 'Intact',
    remarks: '',
    determinations: [{ methodId: await methodId(api, given.method) }],
  }
}

export async function acceptedSample(api: Api, given: Wanted): Promise<SampleView> {
  const received = await api.call(receiveSample, { body: await receiptOf(api, given) })
  return api.call(decideAcceptance, {
    params: { id: received.id },
    body: { version: received.version, verdict: 'accepted', reason: '', clientConsent: '' },
  })
}

/** An open batch of these samples, against the demonstration's own calibration, which no other test replaces. */
export async function openedBatch(
  api: Api,
  given: { method: string; samples: readonly SampleView[] },
): Promise<BatchView> {
  const method = await methodId(api, given.method)
  const { items } = await api.call(listCalibrations, { query: { methodId: method, state: 'in-force' } })
  const calibration = items.toSorted((a, b) => Number(a.id) - Number(b.id))[0]
  if (!calibration) throw new Error(`No calibration is in force for ${given.method}.`)
  const waiting = await api.call(listWaiting, { query: { methodId: method } })
  const numbers = new Set(given.samples.map((sample) => sample.number))
  return api.call(openBatch, {
    body: {
      draftId: randomUUID(),
      methodId: method,
      calibrationId: calibration.id,
      replicates: 2,
      determinationIds: waiting.items.filter((row) => numbers.has(row.sampleNumber)).map((row) => row.id),
      verificationConcentration: '2',
      verificationLotId: null,
      controlConcentration: '2',
      controlLotId: null,
      duplicateOf: null,
      spikeOf: null,
      spikeAdded: null,
      reagentLotIds: [],
      colourStartedAt: null,
      note: '',
    },
  })
}

/** A well whose iron no other test counts. */
export const ironPoint = { client: 'AV', point: 'AV-05', method: 'fe-phenanthroline' }

/** An open batch of one new sample of that well. */
export const openedIronBatch = async (api: Api): Promise<BatchView> =>
  openedBatch(api, { method: ironPoint.method, samples: [await acceptedSample(api, ironPoint)] })

/** What the server holds of the batch's readings, in order of size as text. */
export async function savedAbsorbances(api: Api, id: string): Promise<string[]> {
  const { rows } = await api.call(getBatch, { params: { id } })
  return rows.flatMap((row) => row.readings.map((reading) => reading.absorbance)).toSorted()
}

/** Its readings, as its own calibration gives them for these concentrations (mg/L by sample number). */
export async function readBatch(
  api: Api,
  batch: BatchView,
  truth: Record<string, number>,
): Promise<BatchView> {
  const calibration = await api.call(getCalibration, { params: { id: batch.calibrationId } })
  const readings = constructedRun(batch, { slope: calibration.stored?.slope ?? 0, truth })
  return api.call(saveReadings, {
    params: { id: batch.id },
    body: {
      source: 'typed',
      readings: [...readings].flatMap(([positionId, texts]) =>
        texts.map((absorbance, index) => ({
          positionId,
          replicate: index + 1,
          absorbance,
          supersedes: null,
        })),
      ),
    },
  })
}

export async function submittedBatch(
  api: Api,
  given: { method: string; samples: readonly SampleView[]; truth: Record<string, number> },
): Promise<BatchView> {
  const opened = await openedBatch(api, given)
  const read = await readBatch(api, opened, given.truth)
  return api.call(submitBatch, { params: { id: read.id }, body: { version: read.version } })
}

export async function release(api: Api, by: Account, batch: BatchView): Promise<BatchView> {
  const current = await api.call(getBatch, { params: { id: batch.id } })
  return api.call(releaseBatch, {
    params: { id: batch.id },
    body: {
      passphrase: by.passphrase,
      version: current.version,
      rerunPositionIds: [],
      comment: '',
    },
  })
}
