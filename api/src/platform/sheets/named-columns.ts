/** A column of a sheet that people fill in: found by its title or another name, however it is written. */
export interface NamedColumn<Key extends string> {
  readonly key: Key
  readonly title: string
  readonly otherNames?: readonly string[]
  readonly isRequired?: boolean
}

export interface ColumnProblem {
  column: string
  message: string
}

export interface FoundColumns<Key extends string> {
  /** where each column stands; absent when the sheet has none */
  indexOf: ReadonlyMap<Key, number>
  /** unknown, repeated and missing columns, all at once */
  problems: ColumnProblem[]
}

/** `Collected at`, `collected_at` and `COLLECTED AT:` are one name; so are `Temperature, °C` and `temperature c`. */
export function plainName(text: string): string {
  return text
    .normalize('NFKC')
    .toLowerCase()
    .replaceAll(/[^\p{L}\p{N}]+/gu, ' ')
    .trim()
}

export function findColumns<Key extends string>(
  header: readonly string[],
  columns: readonly NamedColumn<Key>[],
): FoundColumns<Key> {
  const byName = new Map(
    columns.flatMap((column) =>
      [column.title, column.key, ...(column.otherNames ?? [])].map(
        (name) => [plainName(name), column] as const,
      ),
    ),
  )
  const indexOf = new Map<Key, number>()
  const problems: ColumnProblem[] = []
  header.forEach((text, index) => {
    if (text.trim() === '') return
    const column = byName.get(plainName(text))
    if (!column) {
      const known = columns.map(({ title }) => title).join(', ')
      problems.push({ column: text, message: `The column “${text}” is not known here. Known: ${known}.` })
    } else if (indexOf.has(column.key)) {
      problems.push({ column: text, message: `The column “${column.title}” stands there twice.` })
    } else indexOf.set(column.key, index)
  })
  for (const { key, title, isRequired } of columns) {
    if (isRequired && !indexOf.has(key))
      problems.push({ column: title, message: `The column “${title}” is missing.` })
  }
  return { indexOf, problems }
}
