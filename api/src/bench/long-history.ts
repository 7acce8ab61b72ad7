import type pg from 'pg'

export const HISTORY_ROWS = 120_000

/**
 * Lengthens the history of a throw-away database: the demo's own entries again and again, half a year earlier each time.
 * @returns how many entries there are
 */
export async function lengthenHistory(owner: pg.Pool): Promise<number> {
  const before = await countHistory(owner)
  if (before === 0) throw new Error('The history is empty: the bench wants the demo laboratory.')
  const copies = Math.ceil(HISTORY_ROWS / before) - 1
  if (copies > 0) {
    // two steps: a month cannot be made while the same statement reads the history
    const { rows } = await owner.query<{ first: string; last: string }>(
      `select (min(at) - $1::int * interval '6 months')::date::text as first, max(at)::date::text as last from history`,
      [copies],
    )
    await owner.query('select history_make_partitions($1::date, $2::date)', [rows[0]?.first, rows[0]?.last])
    await owner.query(
      `insert into history (at, actor_id, actor_name, actor_role, action, reason, request_id, thing, thing_id, thing_number,
         client_id, operation, old, new)
       select at - copy * interval '6 months', actor_id, actor_name, actor_role, action, reason, request_id, thing, thing_id,
         thing_number, client_id, operation, old, new
       from generate_series(1, $1::int) as copy cross join history order by 1`,
      [copies],
    )
  }
  await owner.query('vacuum analyze')
  return countHistory(owner)
}

async function countHistory(owner: pg.Pool): Promise<number> {
  const { rows } = await owner.query<{ count: string }>('select count(*) from history')
  return Number(rows[0]?.count ?? 0)
}
