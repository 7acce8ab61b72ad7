import { setTimeout as wait } from 'node:timers/promises'
import { Injectable, Logger } from '@nestjs/common'
import { Clock } from '../clock/clock.js'
import { Database } from '../database/database.js'
import { MerkleTree, NO_HEAD, sealHead } from './merkle.js'
import { SealsRepository, type SealRow } from './seals.repository.js'

const ENTRIES_A_SEAL = 100_000
const TRIES = 40
/** before every id there can be, so that nothing hides in front of the first seal */
const START = '-9223372036854775808'

export interface SealCheck {
  checked: number
  entries: number
  ok: boolean
  /** the number of the first seal that does not fit, in order of age */
  brokenAt: string | null
  /** the newest head, to be compared with one that was kept outside */
  head: string | null
}

/** Closes the history: what is sealed cannot be changed, removed or slipped in without a head that differs. */
@Injectable()
export class SealsService {
  private readonly logger = new Logger(SealsService.name)

  constructor(
    private readonly db: Database,
    private readonly seals: SealsRepository,
    private readonly clock: Clock,
  ) {}

  /** @returns how many entries were sealed */
  async seal(): Promise<number> {
    const upTo = await this.settledUpTo()
    if (upTo === undefined) return 0
    let sealed = 0
    for (;;) {
      const entries = await this.sealNext(upTo)
      if (entries === 0) return sealed
      sealed += entries
    }
  }

  /** The newest first, before the seal of a number. */
  async list(page: { before?: string | undefined; limit: number }): Promise<SealRow[]> {
    return this.seals.list(this.db.read, page)
  }

  /** Recomputes the latest seals, oldest of them first, from the entries as they are now. */
  async check(limit: number): Promise<SealCheck> {
    const rows = (await this.seals.list(this.db.read, { limit: limit + 1 })).reverse()
    const [before, ...rest] = rows.length > limit ? rows : [undefined, ...rows]
    let previous = before
    let entries = 0
    for (const [index, row] of rest.entries()) {
      if (!row) continue
      const found = await this.compute(row, previous)
      entries += found.entries
      if (!found.fits) {
        return { checked: index + 1, entries, ok: false, brokenAt: row.number, head: headOf(rest.at(-1)) }
      }
      previous = row
    }
    return { checked: rest.length, entries, ok: true, brokenAt: null, head: headOf(rest.at(-1)) }
  }

  private async compute(
    row: SealRow,
    previous: SealRow | undefined,
  ): Promise<{ fits: boolean; entries: number }> {
    // from the end of the seal before: an entry slipped in between belongs to neither and is found
    const tree = new MerkleTree()
    let firstId: string | undefined
    let lastId: string | undefined
    for await (const { id, leaf } of this.seals.leaves(this.db.read, {
      after: previous?.lastId ?? START,
      upTo: row.lastId,
    })) {
      firstId ??= id
      lastId = id
      tree.add(leaf)
    }
    const previousHead = previous?.head ?? NO_HEAD
    const number = previous ? BigInt(previous.number) + 1n : 1n
    const head = sealHead(previousHead, {
      number,
      firstId: BigInt(firstId ?? 0),
      lastId: BigInt(lastId ?? 0),
      entries: BigInt(tree.size),
      root: tree.root(),
    })
    const fits =
      BigInt(row.number) === number &&
      row.firstId === firstId &&
      row.lastId === lastId &&
      row.entries === String(tree.size) &&
      row.previousHead.equals(previousHead) &&
      row.root.equals(tree.root()) &&
      row.head.equals(head)
    return { fits, entries: tree.size }
  }

  private async sealNext(upTo: string): Promise<number> {
    const last = await this.seals.findLast(this.db.fresh)
    const after = last?.lastId ?? START
    const end = await this.seals.endOfSeal(this.db.fresh, { after, upTo, limit: ENTRIES_A_SEAL })
    if (end === undefined) return 0
    const tree = new MerkleTree()
    let firstId: string | undefined
    for await (const { id, leaf } of this.seals.leaves(this.db.fresh, { after, upTo: end })) {
      firstId ??= id
      tree.add(leaf)
    }
    if (firstId === undefined) return 0
    const content = {
      number: BigInt(last?.number ?? 0) + 1n,
      firstId: BigInt(firstId),
      lastId: BigInt(end),
      entries: BigInt(tree.size),
      root: tree.root(),
    }
    const previousHead = last?.head ?? NO_HEAD
    const row = {
      number: String(content.number),
      firstId,
      lastId: end,
      entries: String(tree.size),
      root: content.root,
      previousHead,
      head: sealHead(previousHead, content),
    }
    const isOurs = await this.db.unwatched((trx) => this.seals.insert(trx, row, this.clock.now()))
    return isOurs ? tree.size : 0
  }

  /** Up to where no transaction can add an entry any more. Waits for a moment in which nobody writes. */
  private async settledUpTo(): Promise<string | undefined> {
    for (let n = 0; n < TRIES; n += 1) {
      const found = await this.db.unwatched(async (trx) => {
        if (!(await this.seals.tryHoldWriters(trx))) return undefined
        return { id: await this.seals.newestEntry(trx) }
      })
      if (found) return found.id
      await wait(100)
    }
    this.logger.log('History is written to all the time; the seal asks the writers to wait.')
    return this.db.unwatched(async (trx) => {
      await this.seals.holdWriters(trx)
      return this.seals.newestEntry(trx)
    })
  }
}

function headOf(row: SealRow | undefined): string | null {
  return row ? row.head.toString('hex') : null
}
