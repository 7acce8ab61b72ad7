import pg from 'pg'

/** One statement as the application sent it. */
export interface Statement {
  text: string
  values: readonly unknown[]
}

export interface SqlLog {
  /** what the application sends to the database while `work` runs, in its order */
  record<T>(work: () => Promise<T>): Promise<{ answer: T; statements: Statement[] }>
}

/** Listens at the driver of this process: exactly what goes over the wire, transactions included. */
export function listenToSql(): SqlLog {
  let heard: Statement[] | undefined
  type Query = (this: pg.Client, ...args: unknown[]) => unknown
  const prototype = pg.Client.prototype as unknown as { query: Query }
  const { query } = prototype
  prototype.query = function (...args) {
    heard?.push(toStatement(args))
    return query.apply(this, args)
  }
  return {
    record: async (work) => {
      heard = []
      try {
        const answer = await work()
        return { answer, statements: heard }
      } finally {
        heard = undefined
      }
    },
  }
}

function toStatement([first, second]: unknown[]): Statement {
  const listOf = (values: unknown) => (Array.isArray(values) ? [...(values as unknown[])] : [])
  if (typeof first === 'string') return { text: first, values: listOf(second) }
  const { text, values } = first as { text?: string; values?: unknown }
  if (text === undefined)
    throw new Error('The application asks the database in a way the bench cannot repeat.')
  return { text, values: listOf(values ?? second) }
}

type Row = Record<string, unknown>

/**
 * Sends the statements again over one connection. `change` may give a statement other values, from the rows that the
 * statements before it brought.
 */
export async function replay(
  client: pg.PoolClient,
  statements: readonly Statement[],
  change: (statement: Statement, seen: ReadonlyMap<Statement, Row[]>) => readonly unknown[] = ({ values }) =>
    values,
): Promise<void> {
  const seen = new Map<Statement, Row[]>()
  for (const statement of statements) {
    const { rows } = await client.query<Row>(statement.text, [...change(statement, seen)])
    seen.set(statement, rows)
  }
}
