import { Injectable } from '@nestjs/common'
import type {
  HistoryRow,
  QueryOf,
  ResponseOf,
  exportHistory,
  historyFilters,
  listHistory,
} from '@weirlight/shared/contracts'
import {
  Database,
  fromCursor,
  invalidInput,
  toCsvStream,
  toPage,
  type CellValue,
  type FileAnswer,
} from '../../platform/index.js'
import { FamilyRepository } from './family.repository.js'
import { HistoryRepository, type HistoryEntry, type HistoryFilter } from './history.repository.js'

type Asked = QueryOf<typeof exportHistory>

const EXPORT_PAGE = 2000
/** the tables whose rows people know by a number of their own */
const NUMBERED: ReadonlySet<string> = new Set([
  'batches',
  'samples',
  'calibrations',
  'alerts',
  'certificates',
  'material_lots',
  'instruments',
])
const HEADER = [
  'id',
  'at (UTC)',
  'person id',
  'person',
  'role',
  'action',
  'reason',
  'thing',
  'thing id',
  'number',
  'operation',
  'old',
  'new',
  'request id',
]

/** Reading the history; it is written by the tables themselves. */
@Injectable()
export class HistoryService {
  constructor(
    private readonly db: Database,
    private readonly history: HistoryRepository,
    private readonly families: FamilyRepository,
  ) {}

  async list({
    after,
    limit,
    ...asked
  }: QueryOf<typeof listHistory>): Promise<ResponseOf<typeof listHistory>> {
    const filter = await this.filterOf(asked)
    const rows = await this.history.list(this.db.read, filter, {
      after: keyOf(after),
      limit: limit + 1,
    })
    return toPage(rows, { limit, key: ({ atText, id }) => [atText, id], item: toRow })
  }

  async filters(): Promise<ResponseOf<typeof historyFilters>> {
    const [people, things, actions] = await Promise.all([
      this.history.listPeople(this.db.read),
      this.history.listThings(this.db.read),
      this.history.listActions(this.db.read),
    ])
    return { people, things, actions }
  }

  /** Whatever the filter finds, page by page as it is sent. */
  async export(asked: Asked): Promise<FileAnswer> {
    const filter = await this.filterOf(asked)
    return {
      content: toCsvStream(HEADER, this.cells(filter)),
      mediaType: 'text/csv; charset=utf-8',
      filename: 'history.csv',
    }
  }

  private async *cells(filter: HistoryFilter): AsyncGenerator<CellValue[]> {
    let after: [string, string] | undefined
    for (;;) {
      const rows = await this.history.list(this.db.read, filter, { after, limit: EXPORT_PAGE })
      yield* rows.map(toCells)
      const last = rows.at(-1)
      if (!last || rows.length < EXPORT_PAGE) return
      after = [last.atText, last.id]
    }
  }

  private async filterOf({ from, to, number, ...rest }: Asked): Promise<HistoryFilter> {
    if (from && to && to < from) {
      throw invalidInput([{ path: 'to', message: 'The last day lies before the first.' }])
    }
    if (rest.thingId !== undefined && !/^\d{1,18}$/.test(rest.thingId)) {
      throw invalidInput([{ path: 'thingId', message: 'This is not a valid reference.' }])
    }
    const first = from && (await this.history.boundsOf(this.db.read, from))
    const last = to && (await this.history.boundsOf(this.db.read, to))
    const wanted = number?.trim().toUpperCase() || undefined
    const family = wanted === undefined ? [] : await this.families.find(this.db.read, wanted)
    // whatever belongs to a numbered thing was written after the thing itself
    const numbered = family.filter(({ thing }) => NUMBERED.has(thing))
    const familySince = numbered.length === 0 ? undefined : await this.history.firstOf(this.db.read, numbered)
    return {
      ...rest,
      since: first ? first.begins : undefined,
      until: last ? last.ends : undefined,
      number: wanted,
      family: family.length > 0 ? family : undefined,
      familySince,
    }
  }
}

function keyOf(after: string | undefined): string[] | undefined {
  const key = fromCursor(after, 2)
  const [at = '', id = ''] = key ?? []
  if (!key || (/^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{6}Z$/.test(at) && /^\d{1,18}$/.test(id))) return key
  throw invalidInput([
    { path: 'after', message: 'This page of the history cannot be found; start again at the top.' },
  ])
}

function toRow({ at, atText: _, ...entry }: HistoryEntry): HistoryRow {
  return {
    ...entry,
    at: at.toISOString(),
    reason: entry.reason ?? '',
    requestId: entry.requestId ?? '',
    thingId: entry.thingId ?? '',
    thingNumber: entry.thingNumber ?? '',
  }
}

function toCells(entry: HistoryEntry): CellValue[] {
  return [
    entry.id,
    entry.atText,
    entry.actorId,
    entry.actorName,
    entry.actorRole,
    entry.action,
    entry.reason,
    entry.thing,
    entry.thingId,
    entry.thingNumber,
    entry.operation,
    entry.old && JSON.stringify(entry.old),
    entry.new && JSON.stringify(entry.new),
    entry.requestId,
  ]
}
