import { receiveBody, type manifestRow } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { findColumns, plainName, readTime, type ColumnProblem, type SheetRow } from '../../platform/index.js'
import {
  CONTAINERS,
  KINDS,
  MANIFEST_COLUMNS,
  PRESERVATIONS,
  PURPOSES,
  YES_NO,
  type ManifestColumn,
} from './manifest-columns.js'
import { checkReceived } from './received-sample.js'
import type { KnownMethod, KnownPoint } from './receiving.repository.js'

type Receiving = z.output<typeof receiveBody>
type RowView = z.infer<typeof manifestRow>

export interface KnownToManifest {
  points: readonly KnownPoint[]
  methods: readonly KnownMethod[]
  timeZone: string
  now: Date
  newDraftId: () => string
}

export interface ReadManifest {
  rows: RowView[]
  /** of the good rows, in order */
  bodies: Receiving[]
}

const TOO_MANY =
  'This row has more entries than columns: put an entry that holds the separator in quotation marks.'
const TITLES = new Map(MANIFEST_COLUMNS.map(({ key, title }) => [key, title]))
const titleOf = (key: ManifestColumn) => TITLES.get(key) ?? key

/**
 * A manifest read against what the laboratory knows: for each row what would be received, or everything that stands
 * against it, named by column. Pure; nothing is guessed.
 */
export function readManifest(sheet: readonly SheetRow[], known: KnownToManifest): ReadManifest {
  const [top, ...lines] = sheet
  const { indexOf, problems } = findColumns(top?.cells ?? [], MANIFEST_COLUMNS)
  const header: RowView[] =
    problems.length > 0 ? [{ row: top?.line ?? 1, ok: false, problems, values: {} }] : []
  // without its columns a row says nothing
  if (MANIFEST_COLUMNS.some(({ key, isRequired }) => isRequired && !indexOf.has(key)))
    return { rows: header, bodies: [] }
  const seen = new Map<string, number>()
  const read = lines.map(({ line: row, cells }) => {
    const text = (key: ManifestColumn) => cells[indexOf.get(key) ?? -1]?.trim() ?? ''
    const one = readRow(text, known)
    const tooMany = cells.slice(top?.cells.length ?? 0).some((cell) => cell.trim() !== '')
    if (tooMany) one.problems.push({ column: titleOf('determinations'), message: TOO_MANY })
    if (one.body) {
      const same = `${one.body.pointId} ${one.body.collectedAt} ${one.body.determinations.map((d) => d.methodId).join()}`
      const first = seen.get(same)
      if (first === undefined) seen.set(same, row)
      else one.problems.push({ column: titleOf('point'), message: `The same sample stands in row ${first}.` })
    }
    const values = Object.fromEntries(
      [...indexOf].map(([key, index]) => [titleOf(key), cells[index]?.trim() ?? '']),
    )
    return { view: { row, ok: one.problems.length === 0, problems: one.problems, values }, body: one.body }
  })
  return {
    rows: [...header, ...read.map(({ view }) => view)],
    bodies: read.flatMap(({ view, body }) => (view.ok && body ? [body] : [])),
  }
}

function readRow(
  text: (key: ManifestColumn) => string,
  known: KnownToManifest,
): { body: Receiving | undefined; problems: ColumnProblem[] } {
  const problems: ColumnProblem[] = []
  const say = (key: ManifestColumn, message: string) => {
    problems.push({ column: titleOf(key), message })
    return undefined
  }
  const choose = <T>(key: ManifestColumn, words: Readonly<Record<string, T>>): T | undefined => {
    const found = Object.entries(words).find(([word]) => word === plainName(text(key)))
    if (found) return found[1]
    const offered = Object.keys(words).filter((word) => word !== '')
    return say(
      key,
      text(key) === '' ? 'Please fill this in.' : `“${text(key)}” is none of: ${offered.join(', ')}.`,
    )
  }
  const time = (key: 'collectedAt' | 'receivedAt'): string | undefined => {
    const read = readTime(text(key), known.timeZone)
    if ('at' in read) return read.at.toISOString()
    return say(key, TIME_PROBLEMS[read.problem](text(key)))
  }
  const found = {
    draftId: known.newDraftId(),
    ...findPoint(text, { points: known.points, say }),
    purpose: choose('purpose', PURPOSES),
    kind: choose('kind', KINDS),
    collectedAt: time('collectedAt'),
    collectedBy: text('collectedBy'),
    receivedAt: text('receivedAt') === '' ? known.now.toISOString() : time('receivedAt'),
    preservation: choose('preservation', PRESERVATIONS),
    ph: text('ph'),
    temperatureC: text('temperatureC'),
    container: choose('container', CONTAINERS),
    filteredInField: choose('filteredInField', YES_NO),
    condition: text('condition'),
    remarks: text('remarks'),
    determinations: findMethods(text('determinations'), { methods: known.methods, say }),
  }
  const parsed = receiveBody.safeParse(found)
  if (!parsed.success) {
    for (const issue of parsed.error.issues) {
      const field = String(issue.path[0])
      const column = COLUMN_OF[field] ?? 'remarks'
      // what could not be read at all was said above
      const isUnread = found[field as keyof typeof found] === undefined
      if (!isUnread && !problems.some((one) => one.column === titleOf(column))) say(column, issue.message)
    }
    return { body: undefined, problems }
  }
  const points = new Map(known.points.map((point) => [point.id, point]))
  const methods = new Map(known.methods.map((method) => [method.id, method]))
  for (const problem of checkReceived(parsed.data, { points, methods, now: known.now })) {
    say(COLUMN_OF[problem.path.split('.')[0] ?? ''] ?? 'remarks', problem.message)
  }
  return { body: problems.length === 0 ? parsed.data : undefined, problems }
}

const COLUMN_OF: Record<string, ManifestColumn> = {
  clientId: 'client',
  pointId: 'point',
  purpose: 'purpose',
  kind: 'kind',
  collectedAt: 'collectedAt',
  collectedBy: 'collectedBy',
  receivedAt: 'receivedAt',
  preservation: 'preservation',
  ph: 'ph',
  temperatureC: 'temperatureC',
  container: 'container',
  filteredInField: 'filteredInField',
  condition: 'condition',
  remarks: 'remarks',
  determinations: 'determinations',
}

const TIME_PROBLEMS = {
  unreadable: (text: string) =>
    text === ''
      ? 'Please fill this in.'
      : `“${text}” is not a date and time. Write it like 2026-12-01 14:05.`,
  'no-such-time': (text: string) => `${text} does not exist: clocks were put forward over it.`,
  twice: (text: string) =>
    `${text} came twice when clocks were put back: add the offset, like ${text}+01:00.`,
} as const

type Say = (key: ManifestColumn, message: string) => undefined

function findPoint(
  text: (key: ManifestColumn) => string,
  { points, say }: { points: readonly KnownPoint[]; say: Say },
): { clientId?: string; pointId?: string } {
  const client = plainName(text('client'))
  const ofClient = points.filter(
    ({ clientCode, clientName }) => plainName(clientCode) === client || plainName(clientName) === client,
  )
  const [one] = ofClient
  if (client === '' || !one) {
    say('client', client === '' ? 'Please fill this in.' : `There is no client “${text('client')}”.`)
    return {}
  }
  const wanted = plainName(text('point'))
  const point = ofClient.find(({ code, name }) => plainName(code) === wanted || plainName(name) === wanted)
  if (!point) {
    const message = `${one.clientName} has no sampling point “${text('point')}”.`
    say('point', wanted === '' ? 'Please fill this in.' : message)
    return { clientId: one.clientId }
  }
  return { clientId: point.clientId, pointId: point.id }
}

/** `Fe total; Mn total`, a method's code, or its title. */
function findMethods(
  text: string,
  { methods, say }: { methods: readonly KnownMethod[]; say: Say },
): { methodId: string }[] {
  const pieces = text
    .split(/[;|\n]/)
    .flatMap((piece) => (named(piece, methods).length > 0 ? [piece] : piece.split(',')))
    .map((piece) => piece.trim())
    .filter((piece) => piece !== '')
  return pieces.flatMap((piece) => {
    const found = named(piece, methods)
    const [one] = found
    if (!one) {
      say('determinations', `“${piece}” names no method of the laboratory.`)
      return []
    }
    if (found.length > 1) {
      const codes = found.map(({ code }) => code).join(' or ')
      say('determinations', `“${piece}” names ${found.length} methods: write ${codes}.`)
      return []
    }
    return [{ methodId: one.id }]
  })
}

function named(piece: string, methods: readonly KnownMethod[]): KnownMethod[] {
  const name = plainName(piece)
  const exact = methods.filter(({ code, title }) => plainName(code) === name || plainName(title) === name)
  if (exact.length > 0) return exact
  return methods.filter(
    ({ analyte, form, active }) =>
      active && shortNames(analyte, form).some((short) => plainName(short) === name),
  )
}

const ELEMENTS = { Fe: 'iron', Cu: 'copper', Mn: 'manganese', Cr: 'chromium' } as const

/** `Fe`, `Fe total`, `iron, total`, `total iron`; chromium(VI) has names of its own */
function shortNames(analyte: KnownMethod['analyte'], form: KnownMethod['form']): string[] {
  const names = [analyte, ELEMENTS[analyte]]
  const all = names.flatMap((name) => [name, `${name} ${form}`, `${form} ${name}`])
  return form === 'hexavalent' ? [...all, 'Cr(VI)', 'chromium(VI)', 'Cr6', 'Cr6+'] : all
}
