import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  QueryOf,
  ResponseOf,
  addMaterial,
  getMaterial,
  listMaterials,
} from '@weirlight/shared/contracts'
import type { FieldProblem } from '@weirlight/shared/errors'
import type { Actor } from '@weirlight/shared/permissions'
import {
  assertVersion,
  Database,
  type Executor,
  invalidInput,
  notAllowedNow,
  notFound,
  type Trx,
} from '../../platform/index.js'
import { MaterialsRepository, type MaterialRow } from './materials.repository.js'

type MaterialView = ResponseOf<typeof getMaterial>
type NewMaterial = BodyOf<typeof addMaterial>

/** Reagents, stocks, working standards and control material, lot by lot. */
@Injectable()
export class MaterialsService {
  constructor(
    private readonly db: Database,
    private readonly materials: MaterialsRepository,
  ) {}

  async list(query: QueryOf<typeof listMaterials>): Promise<{ items: MaterialRow[] }> {
    const { kind, analyte, usable } = query
    return { items: await this.materials.list(this.db.read, { kind, analyte, isUsable: usable === 'yes' }) }
  }

  /** Lots that may be worked with today. */
  async listUsable(db: Executor): Promise<MaterialRow[]> {
    return this.materials.list(db, { isUsable: true })
  }

  async listAll(db: Executor): Promise<MaterialRow[]> {
    return this.materials.list(db, {})
  }

  async listByIds(db: Executor, ids: readonly string[]): Promise<MaterialRow[]> {
    return ids.length === 0 ? [] : this.materials.list(db, { ids })
  }

  /**
   * Before a lot is put to work: each that is unknown, expired, used up or withdrawn, with the reason.
   * `const [first] = await materials.findUnusable(trx, lotIds)`
   */
  async findUnusable(db: Executor, ids: readonly string[]): Promise<{ id: string; why: string }[]> {
    if (ids.length === 0) return []
    const found = new Map((await this.materials.list(db, { ids })).map((lot) => [lot.id, lot]))
    return ids.flatMap((id) => {
      const lot = found.get(id)
      if (!lot) return [{ id, why: 'There is no such lot.' }]
      return lot.usable ? [] : [{ id, why: whyUnusable(lot) }]
    })
  }

  async view(id: string): Promise<MaterialView> {
    return this.get(this.db.read, id)
  }

  async add(actor: Actor, body: NewMaterial): Promise<MaterialView> {
    return this.db.transaction(actor, 'material.add', null, async (trx) => {
      if (body.parentId !== null) await this.requireParent(trx, body.parentId, body)
      const id = await this.materials.insert(trx, { ...body, preparedBy: actor.userId })
      return this.get(trx, id)
    })
  }

  /** A lot that is empty: no longer offered, and nothing is said against what was made with it. */
  async finish(actor: Actor, { id, version }: { id: string; version: number }): Promise<MaterialView> {
    return this.db.transaction(actor, 'material.finish', null, async (trx) => {
      const lot = await this.materials.lock(trx, id)
      if (!lot) throw notFound('lot')
      await assertVersion(trx, { thing: 'materialLots', id, has: lot.version, sent: version })
      if (lot.state === 'used-up') throw notAllowedNow(`${lot.number} is used up already.`)
      if (lot.state === 'withdrawn') throw notAllowedNow(`${lot.number} is withdrawn already.`)
      await this.materials.setState(trx, id, 'used-up')
      return this.get(trx, id)
    })
  }

  async withdraw(
    actor: Actor,
    { id, version, reason }: { id: string; version: number; reason: string },
  ): Promise<MaterialView> {
    return this.db.transaction(actor, 'material.withdraw', reason, async (trx) => {
      const lot = await this.materials.lock(trx, id)
      if (!lot) throw notFound('lot')
      await assertVersion(trx, { thing: 'materialLots', id, has: lot.version, sent: version })
      if (lot.state === 'withdrawn') throw notAllowedNow(`${lot.number} is withdrawn already.`)
      await this.materials.setState(trx, id, 'withdrawn')
      return this.get(trx, id)
    })
  }

  private async get(db: Executor, id: string): Promise<MaterialView> {
    const lot = await this.materials.find(db, id)
    if (!lot) throw notFound('lot')
    const { preparedById, preparedByName, preparedAt, ...rest } = lot
    return {
      ...rest,
      preparedBy: preparedById === null ? null : { id: preparedById, name: preparedByName ?? '' },
      preparedAt: preparedAt.toISOString(),
      ancestry: await this.materials.listAncestry(db, id),
      usedIn: await this.materials.listUses(db, id),
    }
  }

  /** Locked, so that it cannot be withdrawn while something is made from it. */
  private async requireParent(trx: Trx, parentId: string, lot: NewMaterial): Promise<void> {
    const parent = await this.materials.lock(trx, parentId)
    const problems: FieldProblem[] = []
    const say = (path: keyof NewMaterial, message: string) => problems.push({ path, message })
    if (!parent) throw invalidInput([{ path: 'parentId', message: 'There is no such lot.' }])
    if (!parent.usable) say('parentId', whyUnusable(parent))
    if (lot.kind !== 'reagent' && parent.kind !== 'reagent' && parent.analyte !== lot.analyte) {
      say('parentId', `${parent.number} holds ${parent.analyte ?? 'no metal'}, not ${lot.analyte ?? 'none'}.`)
    }
    if (lot.expiresOn > parent.expiresOn) {
      say(
        'expiresOn',
        `It cannot outlast what it is made from: ${parent.number} expires on ${parent.expiresOn}.`,
      )
    }
    if (
      lot.concentration &&
      parent.concentration &&
      Number(lot.concentration) > Number(parent.concentration)
    ) {
      say(
        'concentration',
        `A dilution cannot be stronger than ${parent.number}, ${parent.concentration} mg/L.`,
      )
    }
    if (problems.length > 0) throw invalidInput(problems)
  }
}

export function whyUnusable(lot: MaterialRow): string {
  if (lot.state === 'withdrawn') return `${lot.number}, ${lot.name}, is withdrawn.`
  if (lot.state === 'used-up') return `${lot.number}, ${lot.name}, is used up.`
  return `${lot.number}, ${lot.name}, expired on ${lot.expiresOn}.`
}
