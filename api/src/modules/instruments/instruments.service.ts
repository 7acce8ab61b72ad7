import { Injectable } from '@nestjs/common'
import type {
  BodyOf,
  ResponseOf,
  addInstrument,
  getInstrument,
  recordCheck,
} from '@weirlight/shared/contracts'
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
import { InstrumentsRepository, type InstrumentRow } from './instruments.repository.js'

type InstrumentView = ResponseOf<typeof getInstrument>

interface Move {
  id: string
  version: number
  reason: string
}

/** Spectrophotometers and the checks that say whether to trust them. */
@Injectable()
export class InstrumentsService {
  constructor(
    private readonly db: Database,
    private readonly instruments: InstrumentsRepository,
  ) {}

  async list(): Promise<{ items: InstrumentRow[] }> {
    return { items: await this.listAll(this.db.read) }
  }

  async listAll(db: Executor): Promise<InstrumentRow[]> {
    return this.instruments.list(db)
  }

  /** @returns why no reading may be taken on it today, or undefined */
  async findObstacle(db: Executor, id: string): Promise<string | undefined> {
    const instrument = await this.instruments.find(db, id)
    if (!instrument) throw notFound('instrument')
    return instrument.usable ? undefined : whyNotUsable(instrument)
  }

  async view(id: string): Promise<InstrumentView> {
    return this.get(this.db.read, id)
  }

  async add(actor: Actor, body: BodyOf<typeof addInstrument>): Promise<InstrumentView> {
    return this.db.transaction(actor, 'instrument.add', null, async (trx) =>
      this.get(trx, await this.instruments.insert(trx, body)),
    )
  }

  /** A check that fails takes the instrument out of use in the same moment. */
  async recordCheck(actor: Actor, id: string, body: BodyOf<typeof recordCheck>): Promise<InstrumentView> {
    return this.db.transaction(actor, 'instrument.check', null, async (trx) => {
      const instrument = await this.lock(trx, id)
      await this.requirePlausible(trx, body)
      const passed = await this.instruments.isWithin(trx, body)
      await this.instruments.insertCheck(trx, {
        ...body,
        instrumentId: id,
        passed,
        checkedById: actor.userId,
      })
      if (!passed && instrument.state === 'in-use') await this.instruments.updateState(trx, id, 'out-of-use')
      return this.get(trx, id)
    })
  }

  async takeOut(actor: Actor, { id, version, reason }: Move): Promise<InstrumentView> {
    return this.db.transaction(actor, 'instrument.take-out', reason, async (trx) => {
      const instrument = await this.lock(trx, id, version)
      if (instrument.state === 'out-of-use')
        throw notAllowedNow(`${instrument.number} is out of use already.`)
      await this.instruments.updateState(trx, id, 'out-of-use')
      return this.get(trx, id)
    })
  }

  async putBack(actor: Actor, { id, version, reason }: Move): Promise<InstrumentView> {
    return this.db.transaction(actor, 'instrument.return', reason, async (trx) => {
      const instrument = await this.lock(trx, id, version)
      if (instrument.state === 'in-use') throw notAllowedNow(`${instrument.number} is in use already.`)
      if (instrument.hasFailedCheck) {
        throw notAllowedNow('The last check of one kind failed. Record a passed one of the same kind first.')
      }
      if (!(await this.instruments.hasPassedSinceTakenOut(trx, id))) {
        throw notAllowedNow('No check has passed since it was taken out of use. Record one first.')
      }
      await this.instruments.updateState(trx, id, 'in-use')
      return this.get(trx, id)
    })
  }

  private async lock(trx: Trx, id: string, version?: number): Promise<InstrumentRow> {
    const row = await this.instruments.lock(trx, id)
    if (!row) throw notFound('instrument')
    if (version !== undefined) {
      await assertVersion(trx, { thing: 'instruments', id, has: row.version, sent: version })
    }
    return row
  }

  private async get(db: Executor, id: string): Promise<InstrumentView> {
    const instrument = await this.instruments.find(db, id)
    if (!instrument) throw notFound('instrument')
    const checks = await this.instruments.listChecks(db, id)
    return {
      ...instrument,
      checks: checks.map(({ checkedAt, checkedById, checkedByName, ...check }) => ({
        ...check,
        checkedAt: checkedAt.toISOString(),
        checkedBy: { id: checkedById, name: checkedByName },
      })),
      usedIn: await this.instruments.listUses(db, id),
    }
  }

  private async requirePlausible(db: Executor, body: BodyOf<typeof recordCheck>): Promise<void> {
    if (Number(body.tolerance) < 0) {
      throw invalidInput([
        { path: 'tolerance', message: 'A tolerance is zero or more, either side of nominal.' },
      ])
    }
    if (body.nextDueOn <= (await this.instruments.today(db))) {
      throw invalidInput([{ path: 'nextDueOn', message: 'The next check lies ahead, not today or before.' }])
    }
  }
}

export function whyNotUsable(instrument: InstrumentRow): string {
  const name = `${instrument.number}, ${instrument.name},`
  if (instrument.state === 'out-of-use') return `${name} is out of use.`
  if (instrument.nextCheckDueOn === null) return `${name} has no check on record.`
  if (instrument.hasFailedCheck) return `${name} failed its last check.`
  return `${name} was due for a check on ${instrument.nextCheckDueOn}.`
}
