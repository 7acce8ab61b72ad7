import type { BodyOf, saveCalibration } from '@weirlight/shared/contracts'

type StandardBody = BodyOf<typeof saveCalibration>['standards'][number]

export interface SavedStandard {
  id: string
  position: number
  role: StandardBody['role']
  concentration: string
  lotId: string | null
  leftOutReason: string
  /** the reading that counts in each cell; text null where it was withdrawn */
  cells: ReadonlyMap<number, { id: string; text: string | null }>
}

export interface ReadingChange {
  replicate: number
  text: string | null
  supersedesId: string | null
}

export interface StandardChange {
  /** null: a new standard */
  id: string | null
  position: number
  role: StandardBody['role']
  concentration: string
  lotId: string | null
  leftOutReason: string
  /** whether anything but readings differs from what is saved */
  isReworded: boolean
  readings: ReadingChange[]
}

export interface StandardsPlan {
  standards: StandardChange[]
  removedIds: string[]
}

/**
 * What a saved form changes: readings are only ever added, a changed or emptied cell by one that supersedes it.
 * Pure. Standards are recognised by their id; without ids as the longest run of unchanged rows, and what lies between
 * by its order, so that a row taken out of the middle does not make corrections of all that follow.
 */
export function planStandards(saved: readonly SavedStandard[], body: readonly StandardBody[]): StandardsPlan {
  const partner = pair(saved, body)
  const kept = new Set(partner.flatMap((one) => (one ? [one.id] : [])))
  const standards = body.map((one, index): StandardChange => {
    const before = partner[index]
    const after = {
      position: index + 1,
      role: one.role,
      concentration: one.concentration,
      lotId: one.lotId,
      leftOutReason: one.leftOutReason.trim(),
    }
    const isReworded =
      before !== undefined &&
      Object.entries(after).some(([key, value]) => before[key as keyof typeof after] !== value)
    return { id: before?.id ?? null, ...after, isReworded, readings: changedCells(before, one.readings) }
  })
  return { standards, removedIds: saved.map(({ id }) => id).filter((id) => !kept.has(id)) }
}

function changedCells(before: SavedStandard | undefined, texts: readonly string[]): ReadingChange[] {
  const replicates = new Set([...texts.keys()].map((index) => index + 1))
  for (const replicate of before?.cells.keys() ?? []) replicates.add(replicate)
  return [...replicates]
    .sort((a, b) => a - b)
    .flatMap((replicate) => {
      const now = before?.cells.get(replicate)
      const text = texts[replicate - 1] ?? ''
      if (text === (now?.text ?? '')) return []
      return [{ replicate, text: text === '' ? null : text, supersedesId: now?.id ?? null }]
    })
}

function pair(saved: readonly SavedStandard[], body: readonly StandardBody[]): (SavedStandard | undefined)[] {
  const partner: (SavedStandard | undefined)[] = body.map((one) => saved.find(({ id }) => id === one.id))
  if (partner.some((one) => one !== undefined)) return partner
  const anchors = [...longestRun(saved, body), { s: saved.length, b: body.length }]
  let from = { s: 0, b: 0 }
  for (const anchor of anchors) {
    for (let step = 0; from.b + step < anchor.b && from.s + step < anchor.s; step += 1) {
      partner[from.b + step] = saved[from.s + step]
    }
    if (anchor.b < body.length) partner[anchor.b] = saved[anchor.s]
    from = { s: anchor.s + 1, b: anchor.b + 1 }
  }
  return partner
}

const savedKey = (one: SavedStandard) => {
  const last = Math.max(0, ...one.cells.keys())
  const texts = Array.from({ length: last }, (_, index) => one.cells.get(index + 1)?.text ?? '')
  return key(one.role, one.concentration, texts)
}
const key = (role: string, concentration: string, texts: readonly string[]) =>
  `${role}|${concentration}|${texts.join('|').replace(/\|+$/, '')}`

/** longest common subsequence of unchanged rows */
function longestRun(
  saved: readonly SavedStandard[],
  body: readonly StandardBody[],
): { s: number; b: number }[] {
  const before = saved.map(savedKey)
  const after = body.map(({ role, concentration, readings }) => key(role, concentration, readings))
  const length = before.map(() => after.map(() => 0))
  const at = (s: number, b: number) => length[s]?.[b] ?? 0
  for (let s = before.length - 1; s >= 0; s -= 1) {
    const row = length[s] ?? []
    for (let b = after.length - 1; b >= 0; b -= 1) {
      row[b] = before[s] === after[b] ? at(s + 1, b + 1) + 1 : Math.max(at(s + 1, b), at(s, b + 1))
    }
  }
  const run: { s: number; b: number }[] = []
  for (let s = 0, b = 0; s < before.length && b < after.length;) {
    if (before[s] === after[b]) {
      run.push({ s, b })
      s += 1
      b += 1
    } else if (at(s + 1, b) >= at(s, b + 1)) s += 1
    else b += 1
  }
  return run
}
