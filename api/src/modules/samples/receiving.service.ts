import { Injectable } from '@nestjs/common'
import type { BodyOf, receiveSample, sampleView } from '@weirlight/shared/contracts'
import type { FieldProblem } from '@weirlight/shared/errors'
import type { Actor } from '@weirlight/shared/permissions'
import { sampleStates } from '@weirlight/shared/states'
import type { z } from 'zod'
import { Clock, Database, invalidInput, type Executor, type Trx } from '../../platform/index.js'
import { holdingOf } from './holding.js'
import { checkReceived } from './received-sample.js'
import { ReceivingRepository } from './receiving.repository.js'
import { SamplesRepository } from './samples.repository.js'
import { SamplesService } from './samples.service.js'

export type Receiving = BodyOf<typeof receiveSample>

/** The moment a bottle becomes a sample with a number: one by its form, many by a manifest. */
@Injectable()
export class ReceivingService {
  constructor(
    private readonly db: Database,
    private readonly clock: Clock,
    private readonly samples: SamplesRepository,
    private readonly receiving: ReceivingRepository,
    private readonly views: SamplesService,
  ) {}

  async receive(actor: Actor, body: Receiving): Promise<z.input<typeof sampleView>> {
    return this.db.transaction(actor, 'sample.receive', null, async (trx) => {
      const before = await this.samples.findByDraft(trx, body.draftId)
      if (before !== undefined) return this.views.view(trx, before)
      const [problems] = await this.check(trx, [body])
      if (problems && problems.length > 0) throw invalidInput(problems)
      const [made] = await this.insert(trx, actor, { bodies: [body], uploadId: null })
      // the same form arriving twice at once: the other one made it
      const id = made?.id ?? (await this.samples.findByDraft(trx, body.draftId))
      if (id === undefined) throw new Error('The sample was not written.')
      return this.views.view(trx, id)
    })
  }

  /** For each sample what stands against receiving it; everything is looked up once for all of them. */
  async check(db: Executor, bodies: readonly Receiving[]): Promise<FieldProblem[][]> {
    const points = await this.receiving.listPoints(db, {
      ids: [...new Set(bodies.map(({ pointId }) => pointId))],
    })
    const methods = await this.methodsOf(db, bodies)
    const known = {
      points: new Map(points.map((point) => [point.id, point])),
      methods,
      now: this.clock.now(),
    }
    return bodies.map((body) => checkReceived(body, known))
  }

  /** Writes samples that were checked. A form that was sent before is left out of what comes back. */
  async insert(
    trx: Trx,
    actor: Actor,
    { bodies, uploadId }: { bodies: readonly Receiving[]; uploadId: string | null },
  ): Promise<{ id: string; number: string }[]> {
    const methods = await this.methodsOf(trx, bodies)
    const state = sampleStates.move('expected', 'receive')
    const made = await this.samples.insert(
      trx,
      bodies.map(({ determinations: _, ...body }) => ({
        ...body,
        state,
        receivedBy: actor.userId,
        uploadId,
      })),
    )
    const determinations = made.flatMap(({ id, index }) => {
      const body = bodies[index]
      if (!body) return []
      return body.determinations.flatMap(({ methodId }) => {
        const method = methods.get(methodId)
        if (!method) return []
        const { dueAt, ruleText: rule } = holdingOf(
          { ...body, collectedAt: new Date(body.collectedAt) },
          method.holdTime,
        )
        const { analyte, form } = method
        return [{ sampleId: id, clientId: body.clientId, methodId, analyte, form, dueAt, rule }]
      })
    })
    if (determinations.length > 0) await this.samples.insertDeterminations(trx, determinations)
    return made.sort((a, b) => a.index - b.index).map(({ id, number }) => ({ id, number }))
  }

  private async methodsOf(db: Executor, bodies: readonly Receiving[]) {
    const ids = [
      ...new Set(bodies.flatMap(({ determinations }) => determinations.map(({ methodId }) => methodId))),
    ]
    return new Map((await this.receiving.listMethods(db, { ids })).map((method) => [method.id, method]))
  }
}
