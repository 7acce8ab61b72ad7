import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  QueryOf,
  addDetermination,
  correctSample,
  decideAcceptance,
  listSamples,
  listWaiting,
  sampleView,
  withdrawDetermination,
} from '@weirlight/shared/contracts'
import type { Actor } from '@weirlight/shared/permissions'
import { determinationStates, sampleStates } from '@weirlight/shared/states'
import type { z } from 'zod'
import {
  assertVersion,
  Clock,
  Database,
  DomainEvents,
  idFromCursor,
  invalidInput,
  isUniqueViolation,
  notAllowedNow,
  notFound,
  toPage,
  type AnswerOf,
  type Executor,
  type Trx,
} from '../../platform/index.js'
import { determinationWithdrawn } from './events.js'
import { holdingOf } from './holding.js'
import { ReceivingRepository } from './receiving.repository.js'
import type { LockedSample } from './sample-rows.js'
import { toRow, toView, toWaiting } from './sample-view.js'
import { SamplesRepository } from './samples.repository.js'

type SampleView = z.input<typeof sampleView>

/** Samples from the register to the bench: reading, accepting, correcting, and what is still to be determined. */
@Injectable()
export class SamplesService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly samples: SamplesRepository,
    private readonly receiving: ReceivingRepository,
    private readonly events: DomainEvents,
  ) {}

  async list(query: QueryOf<typeof listSamples>): Promise<AnswerOf<typeof listSamples>> {
    const at = this.clock.now()
    const { after, limit, ...filter } = query
    const rows = await this.samples.list(this.db.read, { ...filter, before: idFromCursor(after), limit })
    return toPage(rows, { limit, key: (row) => [row.id], item: (row) => toRow(row, at) })
  }

  async get(id: string): Promise<SampleView> {
    return this.view(this.db.read, id)
  }

  async view(db: Executor, id: string): Promise<SampleView> {
    const sample = await this.samples.find(db, id)
    if (!sample) throw notFound('sample')
    const details = await this.samples.listDeterminations(db, id)
    const methods = await this.receiving.listSampleMethods(db, id)
    return toView({ sample, details, methods, at: this.clock.now() })
  }

  async decide(actor: Actor, id: string, body: BodyOf<typeof decideAcceptance>): Promise<SampleView> {
    const reason = body.reason.trim()
    return this.db.transaction(actor, `sample.${VERB[body.verdict]}`, reason || null, async (trx) => {
      const row = await this.lockForChange(trx, id, body.version)
      const state = sampleStates.move(row.state, VERB[body.verdict])
      const view = await this.view(trx, id)
      requireVerdict(body, view)
      await this.samples.decide(trx, {
        id,
        state,
        reason,
        consent: body.clientConsent.trim(),
        qualified: body.verdict === 'accepted-with-qualification',
      })
      if (body.verdict === 'rejected') {
        const waiting = view.details.filter(({ state: one }) => determinationStates.may(one, 'withdraw'))
        await this.samples.withdraw(
          trx,
          waiting.map((one) => one.id),
          `Sample rejected: ${reason}`,
        )
      }
      return this.view(trx, id)
    })
  }

  async correct(actor: Actor, id: string, body: BodyOf<typeof correctSample>): Promise<SampleView> {
    return this.db.transaction(actor, 'sample.correct', body.reason, async (trx) => {
      const row = await this.lockForChange(trx, id, body.version)
      if (row.state === 'disposed' || row.state === 'rejected') {
        throw notAllowedNow(`This sample is ${sampleStates.words[row.state]}; its record is closed.`)
      }
      const collectedAt = Date.parse(body.collectedAt)
      if (collectedAt > this.clock.now().getTime()) {
        throw invalidInput([{ path: 'collectedAt', message: 'Collected in the future: check the date.' }])
      }
      if (row.receivedAt && collectedAt > row.receivedAt.getTime()) {
        throw invalidInput([{ path: 'collectedAt', message: 'It was received before that: check the time.' }])
      }
      await this.samples.correct(trx, id, body)
      await this.recomputeHolding(trx, id, body)
      return this.view(trx, id)
    })
  }

  async addDetermination(
    actor: Actor,
    id: string,
    body: BodyOf<typeof addDetermination>,
  ): Promise<SampleView> {
    return this.db.transaction(actor, 'determination.request', null, async (trx) => {
      const row = await this.lockForChange(trx, id, body.version)
      if (row.state === 'rejected' || row.state === 'disposed') {
        throw notAllowedNow(
          `This sample is ${sampleStates.words[row.state]}; nothing more can be determined in it.`,
        )
      }
      const [method] = await this.receiving.listMethods(trx, { ids: [body.methodId] })
      if (!method) throw invalidInput([{ path: 'methodId', message: 'There is no such method.' }])
      if (!method.active)
        throw invalidInput([{ path: 'methodId', message: `${method.title} is no longer in use.` }])
      const { dueAt, ruleText: rule } = holdingOf(row, method.holdTime)
      const { analyte, form } = method
      await this.samples
        .insertDeterminations(trx, [
          { sampleId: id, clientId: row.clientId, methodId: method.id, analyte, form, dueAt, rule },
        ])
        .catch((error: unknown) => {
          if (!isUniqueViolation(error)) throw error
          throw invalidInput([{ path: 'methodId', message: 'This determination was asked for already.' }])
        })
      await this.samples.touch(trx, id)
      return this.view(trx, id)
    })
  }

  async withdraw(actor: Actor, id: string, body: BodyOf<typeof withdrawDetermination>): Promise<SampleView> {
    return this.db.transaction(actor, 'determination.withdraw', body.reason, async (trx) => {
      const row = await this.samples.lockDetermination(trx, id)
      if (!row) throw notFound('determination')
      await assertVersion(trx, { thing: 'determinations', id, has: row.version, sent: body.version })
      determinationStates.move(row.state, 'withdraw')
      await this.samples.withdraw(trx, [id], body.reason)
      await this.events.publish(trx, determinationWithdrawn, { sampleId: row.sampleId, actor })
      return this.view(trx, row.sampleId)
    })
  }

  async waiting(query: QueryOf<typeof listWaiting>): Promise<AnswerOf<typeof listWaiting>> {
    const at = this.clock.now()
    const rows = await this.samples.listWaiting(this.db.read, query.methodId)
    return {
      items: rows.map((row) => toWaiting(row, at)),
      counts: await this.samples.countWaiting(this.db.read),
    }
  }

  private async lockForChange(trx: Trx, id: string, version: number): Promise<LockedSample> {
    const row = await this.samples.lock(trx, id)
    if (!row) throw notFound('sample')
    await assertVersion(trx, { thing: 'samples', id, has: row.version, sent: version })
    return row
  }

  /** Of what was measured too: a time of collection that is wrong now was wrong then. */
  private async recomputeHolding(trx: Trx, id: string, body: BodyOf<typeof correctSample>): Promise<void> {
    const open = (await this.samples.listDeterminations(trx, id)).filter(({ state }) => state !== 'withdrawn')
    const methods = new Map((await this.receiving.listSampleMethods(trx, id)).map((one) => [one.id, one]))
    const kept = { ...body, collectedAt: new Date(body.collectedAt) }
    const rows = open.flatMap((one) => {
      const method = methods.get(one.methodId)
      if (!method) return []
      const { dueAt, ruleText: rule } = holdingOf(kept, method.holdTime)
      return [{ id: one.id, dueAt, rule }]
    })
    await this.samples.setHolding(trx, rows)
  }
}

const VERB = {
  accepted: 'accept',
  'accepted-with-qualification': 'qualify',
  rejected: 'reject',
} as const

/**
 * A sample that fails a check is never accepted silently; a compliance sample goes on only when its client asks for
 * it in writing (sample acceptance rule, Wis. NR 149; ISO/IEC 17025, 7.4.3).
 */
function requireVerdict(body: BodyOf<typeof decideAcceptance>, sample: SampleView): void {
  if (body.verdict === 'accepted' && sample.suggested !== 'accepted') {
    const bad = sample.checks.filter(({ ok }) => !ok).map(({ check, finding }) => `${check}: ${finding}`)
    throw invalidInput([
      { path: 'verdict', message: `Accept it with a qualification, or reject it. ${bad.join(' ')}` },
    ])
  }
  const needsConsent = body.verdict === 'accepted-with-qualification' && sample.purpose === 'compliance'
  if (needsConsent && body.clientConsent.trim().length < 3) {
    throw invalidInput([
      {
        path: 'clientConsent',
        message:
          'A compliance sample goes on only when the client asks for it in writing: enter who wrote it and when.',
      },
    ])
  }
}
