import type { FormInstance } from 'antd'
import type { FieldProblem } from '@weirlight/shared/errors'

export type NamePath = (string | number)[]

/** `standards.2.readings.0` as antd names it: `['standards', 2, 'readings', 0]` */
export function namePathOf(path: string): NamePath {
  return path
    .split('.')
    .filter((step) => step !== '')
    .map((step) => (/^\d+$/.test(step) ? Number(step) : step))
}

const keyOf = (path: NamePath) => path.join('.')

/**
 * Puts each complaint on the field that has its path, or on the nearest field above it. What belongs to no field
 * comes back, to be said above the form.
 */
export function placeProblems(form: FormInstance, problems: readonly FieldProblem[]): string[] {
  const known = new Map(
    form.getFieldsError().map((field) => [keyOf(field.name as NamePath), field.name as NamePath]),
  )
  const placed = new Map<string, string[]>()
  const homeless: string[] = []
  for (const problem of problems) {
    const path = namePathOf(problem.path)
    while (path.length > 0 && !known.has(keyOf(path))) path.pop()
    const key = keyOf(path)
    if (path.length === 0) homeless.push(problem.message)
    else placed.set(key, [...(placed.get(key) ?? []), problem.message])
  }
  form.setFields(
    [...placed].flatMap(([key, errors]) => {
      const name = known.get(key)
      return name ? [{ name, errors }] : []
    }),
  )
  const first = [...placed.keys()][0]
  const firstName = first === undefined ? undefined : known.get(first)
  if (firstName) form.scrollToField(firstName, { block: 'center', focus: true })
  return homeless
}

function hasPath(value: unknown, path: NamePath): boolean {
  let at = value
  for (const step of path) {
    if (typeof at !== 'object' || at === null || !(step in at)) return false
    at = (at as Record<string | number, unknown>)[step]
  }
  return true
}

/** A complaint leaves its field with the first key typed there; without `changed`, every complaint leaves. */
export function clearProblems(form: FormInstance, changed?: unknown): void {
  const stale = form.getFieldsError().filter((field) => {
    const name = field.name as NamePath
    return field.errors.length > 0 && (changed === undefined || hasPath(changed, name))
  })
  form.setFields(stale.map((field) => ({ name: field.name, errors: [] })))
}

/** Fields that nobody touched take what the form is filled from now; what was typed stays. */
export function followThing(form: FormInstance): void {
  const untouched = form
    .getFieldsError()
    .map((field) => field.name as NamePath)
    .filter((name) => !form.isFieldTouched(name))
  form.resetFields(untouched)
}
