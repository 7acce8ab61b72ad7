import type { InfiniteData, UseInfiniteQueryResult } from '@tanstack/react-query'
import type { ReactNode } from 'react'
import { Link, useNavigate } from 'react-router-dom'
import { asProblem } from '../lib/problem-error'
import { Aligned, longestFraction } from './aligned'
import { Empty, Failed, Forbidden } from './page-states'
import './styles/list.css'

export interface Column<Row> {
  key: string
  title: ReactNode
  /** stands small under the title */
  unit?: string
  /** numbers are right-aligned at the decimal point and need `text` */
  kind?: 'text' | 'number'
  text?: (row: Row) => string | null | undefined
  cell?: (row: Row, index: number) => ReactNode
  /** puts something around an aligned number, e.g. `NumberWithStory` */
  wrap?: (row: Row, aligned: ReactNode) => ReactNode
  isNarrow?: boolean
  /** left out on a phone */
  isSecondary?: boolean
  /** on a phone: at the right of the row’s heading (a state), or in one line with the column before (a unit) */
  onPhone?: 'corner' | 'beside'
  /** said before the value on a phone where the title is more than words */
  label?: string
}

interface Page<Row> {
  items: readonly Row[]
  next: string | null
}

interface DataTableProps<Row> {
  /** what the table is, for screen readers */
  label: string
  columns: readonly Column<Row>[]
  rowKey: (row: Row) => string
  rows?: readonly Row[] | undefined
  query?: UseInfiniteQueryResult<InfiniteData<Page<Row>>, Error>
  isLoading?: boolean
  /** the whole row leads there; the first column is the link */
  rowTo?: (row: Row) => string | null
  rowTone?: (row: Row) => 'qc' | 'now' | undefined
  /** figures to be compared down a column: scrolls sideways on a phone */
  isTableOnPhone?: boolean
  empty: { title: string; text?: string; action?: ReactNode }
}

const SKELETON_ROWS = 6
/** so many fit beside each other on a phone; with more, each row becomes a block of labelled values there */
const COLUMNS_ON_A_PHONE = 3

/** A list: paged by key, scrolling inside itself or in blocks where the page is narrow, with all its states. */
export function DataTable<Row>(props: DataTableProps<Row>) {
  const { label, columns, query, empty } = props
  const rows = props.rows ?? query?.data?.pages.flatMap((page) => page.items)
  if (!rows && query?.isError) {
    const problem = asProblem(query.error)
    return problem.code === 'forbidden' ? (
      <Forbidden />
    ) : (
      <Failed problem={problem} retry={() => void query.refetch()} />
    )
  }
  const isInBlocks =
    !props.isTableOnPhone &&
    (columns.filter((column) => !column.isSecondary).length > COLUMNS_ON_A_PHONE ||
      columns.some((column) => column.onPhone))
  return (
    <>
      {/* scrolls sideways by keyboard as well */}
      <div className="table-wrap" tabIndex={0} role="region" aria-label={label}>
        {/* the roles are written out: in blocks it is drawn as no table, and some browsers would forget them */}
        <table className={isInBlocks ? 'table is-list' : 'table'} role="table" aria-busy={!rows}>
          <caption className="visually-hidden">{label}</caption>
          <thead role="rowgroup">
            <tr role="row">
              {columns.map((column) => (
                <th key={column.key} scope="col" role="columnheader" className={classOf(column)}>
                  {column.title}
                  {column.unit && <small>{column.unit}</small>}
                </th>
              ))}
            </tr>
          </thead>
          <tbody role="rowgroup">
            {rows ? <Rows {...props} rows={rows} /> : <SkeletonRows columns={columns.length} />}
          </tbody>
        </table>
        {rows?.length === 0 && (
          <Empty title={empty.title} action={empty.action}>
            {empty.text}
          </Empty>
        )}
      </div>
      {rows && query && <Foot query={query} shown={rows.length} />}
    </>
  )
}

function classOf<Row>(column: Column<Row>): string | undefined {
  const names = [
    column.kind === 'number' && 'n',
    column.isNarrow && 'narrow',
    column.isSecondary && 'is-secondary',
    column.onPhone && `is-${column.onPhone}`,
  ].filter(Boolean)
  return names.length > 0 ? names.join(' ') : undefined
}

/** What stands before a value where the column heads are out of sight. */
function labelOf<Row>({ label, title, unit }: Column<Row>): string | undefined {
  const words = label ?? (typeof title === 'string' ? title : '')
  return [words, unit].filter(Boolean).join(', ') || undefined
}

function Rows<Row>({
  rows,
  columns,
  rowKey,
  rowTo,
  rowTone,
}: DataTableProps<Row> & { rows: readonly Row[] }) {
  const navigate = useNavigate()
  const places = new Map(
    columns
      .filter((column) => column.kind === 'number')
      .map((column) => [column.key, longestFraction(rows.map((row) => column.text?.(row)))]),
  )
  return rows.map((row, index) => {
    const to = rowTo?.(row) ?? null
    const tone = rowTone?.(row)
    const names = [tone && `is-${tone}`, to && 'has-link'].filter(Boolean).join(' ')
    return (
      <tr
        key={rowKey(row)}
        role="row"
        className={names || undefined}
        onClick={(event) => {
          // links, buttons and marked text inside a row keep their own meaning
          if (!to || isOwnTarget(event.target) || window.getSelection()?.toString()) return
          void navigate(to)
        }}
      >
        {columns.map((column, position) => {
          const content = contentOf({ column, row, index, places: places.get(column.key) ?? 0 })
          return (
            <td key={column.key} role="cell" className={classOf(column)} data-label={labelOf(column)}>
              <div className="table-value">
                {position === 0 && to ? (
                  <Link className="table-link" to={to}>
                    {content}
                  </Link>
                ) : (
                  content
                )}
              </div>
            </td>
          )
        })}
      </tr>
    )
  })
}

function isOwnTarget(target: EventTarget): boolean {
  return target instanceof Element && target.closest('a, button, input, select, label, summary') !== null
}

function contentOf<Row>(given: { column: Column<Row>; row: Row; index: number; places: number }): ReactNode {
  const { column, row, index, places } = given
  const text = column.text?.(row)
  const plain = column.kind === 'number' && text ? <Aligned text={text} places={places} /> : (text ?? null)
  if (column.wrap && plain !== null) return column.wrap(row, plain)
  return column.cell ? column.cell(row, index) : plain
}

function SkeletonRows({ columns }: { columns: number }) {
  return Array.from({ length: SKELETON_ROWS }, (_, row) => (
    <tr key={row} role="row">
      {Array.from({ length: columns }, (_, column) => (
        <td key={column} role="cell">
          <span className="skeleton" />
          {row + column === 0 && <span className="visually-hidden">Loading</span>}
        </td>
      ))}
    </tr>
  ))
}

function Foot<Row>({ query, shown }: { query: NonNullable<DataTableProps<Row>['query']>; shown: number }) {
  if (shown === 0) return null
  const isOldData = query.isError && query.data !== undefined
  return (
    <div className="table-foot note">
      <span aria-live="polite">
        {query.hasNextPage
          ? `The first ${shown} are shown.`
          : shown === 1
            ? 'One entry.'
            : `All ${shown} are shown.`}
        {isOldData && ' The list could not be read again; it may be out of date.'}
      </span>
      {query.hasNextPage && (
        <button
          type="button"
          className="button"
          disabled={query.isFetchingNextPage}
          onClick={() => void query.fetchNextPage()}
        >
          {query.isFetchingNextPage ? 'Loading more…' : 'Show more'}
        </button>
      )}
    </div>
  )
}
