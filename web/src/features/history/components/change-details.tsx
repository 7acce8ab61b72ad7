import { Link } from 'react-router-dom'
import { paths, useLaboratoryTime } from '../../../lib'
import type { HistoryRow } from '../api/history-queries'
import { operationWord } from '../words/action-words'
import { fieldsOf, fieldWord, isEmptyValue } from '../words/field-words'
import { thingWord } from '../words/thing-words'
import { isLong, valueWord, type Names } from '../words/value-words'

/** Old and new side by side, every field in words. */
export function ChangeDetails({ row, names }: { row: HistoryRow; names: Names }) {
  const { withOffset } = useLaboratoryTime()
  const isUpdate = row.operation === 'update'
  const fields = fieldsOf(row)
  const shown = isUpdate ? fields : fields.filter((field) => !isEmptyValue((row.new ?? row.old)?.[field]))
  const left = fields.length - shown.length
  return (
    <>
      <table className="pairs">
        <thead>
          <tr>
            <th scope="col">Field</th>
            {row.operation !== 'insert' && <th scope="col">Old</th>}
            {row.operation !== 'delete' && <th scope="col">New</th>}
          </tr>
        </thead>
        <tbody>
          {shown.map((field) => (
            <tr key={field}>
              <th scope="row">{fieldWord(field)}</th>
              {row.operation !== 'insert' && (
                <td className="is-old">
                  <Value row={row} side={row.old} field={field} names={names} />
                </td>
              )}
              {row.operation !== 'delete' && (
                <td className="is-new">
                  <Value row={row} side={row.new} field={field} names={names} />
                </td>
              )}
            </tr>
          ))}
        </tbody>
      </table>
      <div className="history-foot note">
        <span>
          Entry {row.id}, {operationWord(row.operation)}, {withOffset(row.at)}
        </span>
        {row.requestId !== '' && <span>Request {row.requestId}</span>}
        <span>
          Stored as {row.thing}, row {row.thingId || 'none'}
        </span>
        {row.thingId !== '' && (
          <Link to={`${paths.history}?thing=${row.thing}&thingId=${row.thingId}`}>
            Everything that happened to this {thingWord(row.thing).toLowerCase()}
          </Link>
        )}
        {left > 0 && <span>{left === 1 ? 'One field was' : `${left} fields were`} empty.</span>}
      </div>
    </>
  )
}

interface ValueProps {
  row: HistoryRow
  side: Record<string, unknown> | null
  field: string
  names: Names
}

function Value({ row, side, field, names }: ValueProps) {
  const { withOffset } = useLaboratoryTime()
  const words = valueWord({ thing: row.thing, field, value: side?.[field], names, at: withOffset })
  if (words === null) return <span className="quiet">nothing</span>
  if (!isLong(words)) return <>{words}</>
  return (
    <details>
      <summary>{words.slice(0, 60).replaceAll(/\s+/g, ' ')}…</summary>
      <pre>{words}</pre>
    </details>
  )
}
