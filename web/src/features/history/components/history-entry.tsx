import { ROLE_NAMES } from '@weirlight/shared/permissions'
import { Fragment, useId, useState } from 'react'
import { Link } from 'react-router-dom'
import { useLaboratoryTime } from '../../../lib'
import { unbroken } from '../../../ui'
import type { HistoryRow } from '../api/history-queries'
import { actionWord } from '../words/action-words'
import { fieldsOf, fieldWord, isEmptyValue } from '../words/field-words'
import { thingPath, thingWord } from '../words/thing-words'
import { isLong, valueWord, type Names } from '../words/value-words'
import { ChangeDetails } from './change-details'

const ROLE_WORDS: Record<string, string> = ROLE_NAMES
const LINES = 3
/** fields that name the row itself rather than what was done */
const QUIET_FIELDS: ReadonlySet<string> = new Set(['id', 'number', 'draft_id', 'created_at'])

interface HistoryEntryProps {
  row: HistoryRow
  previous: HistoryRow | undefined
  names: Names
}

/** One entry of the history: a line, and below it, when opened, old and new side by side. */
export function HistoryEntry({ row, previous, names }: HistoryEntryProps) {
  const [isOpen, setOpen] = useState(false)
  const detailsId = useId()
  const { at, clock } = useLaboratoryTime()
  const to = thingPath(row)
  // entries of one act stand together: the act is named once
  const isSameAct =
    previous?.requestId === row.requestId && row.requestId !== '' && previous.action === row.action
  const what = `${thingWord(row.thing)}${row.thingNumber ? ` ${row.thingNumber}` : ''}`
  return (
    <>
      <tr className={isOpen ? 'is-open' : undefined}>
        <td className="when">
          <button
            type="button"
            className="history-open"
            aria-expanded={isOpen}
            aria-controls={detailsId}
            onClick={() => setOpen(!isOpen)}
          >
            <time dateTime={row.at}>
              {at(row.at).slice(0, 10)} {clock(row.at)}
            </time>
          </button>
        </td>
        <td>
          <span className="nowrap">{row.actorName}</span>
          <br />
          <span className="note">{ROLE_WORDS[row.actorRole] ?? 'the system itself'}</span>
        </td>
        <td>
          {isSameAct ? <span className="quiet">″ {actionWord(row.action)}</span> : actionWord(row.action)}
        </td>
        <td>{to ? <Link to={to}>{unbroken(what)}</Link> : unbroken(what)}</td>
        <td>
          <Summary row={row} names={names} />
        </td>
        <td>{row.reason}</td>
      </tr>
      {isOpen && (
        <tr className="history-details" id={detailsId}>
          <td colSpan={6}>
            <ChangeDetails row={row} names={names} />
          </td>
        </tr>
      )}
    </>
  )
}

/** The first few changes in a line each. */
function Summary({ row, names }: { row: HistoryRow; names: Names }) {
  const { at } = useLaboratoryTime()
  const word = (side: Record<string, unknown> | null, field: string) =>
    valueWord({ thing: row.thing, field, value: side?.[field], names, at })
  const shown = fieldsOf(row).filter(
    (field) =>
      !QUIET_FIELDS.has(field) &&
      !(row.operation !== 'update' && isEmptyValue((row.new ?? row.old)?.[field])) &&
      !isLong(word(row.new, field)),
  )
  const lines = shown.slice(0, LINES).map((field) => (
    <Fragment key={field}>
      <span className="quiet">{fieldWord(field)}:</span>{' '}
      {row.operation === 'update' && <>{word(row.old, field) ?? 'nothing'} → </>}
      {word(row.new ?? row.old, field) ?? 'nothing'}
    </Fragment>
  ))
  const more = shown.length > LINES && <span className="note">and {shown.length - LINES} more</span>
  if (row.operation === 'update') {
    return (
      <ul className="change-lines">
        {lines.map((line, index) => (
          <li key={index}>{line}</li>
        ))}
        {more && <li>{more}</li>}
      </ul>
    )
  }
  return (
    <>
      {row.operation === 'delete' && <span className="above">removed · </span>}
      {lines.map((line, index) => (
        <Fragment key={index}>{line} · </Fragment>
      ))}
      {more || 'nothing else'}
    </>
  )
}
