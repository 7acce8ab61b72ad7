import { ANALYTE_NAMES } from '@weirlight/shared/contracts'
import { StatusTag, type Column } from '../../../ui'
import type { MaterialRow } from '../api/material-queries'
import { KIND_WORDS, strengthWords, usableMark } from '../material-words'

/** A lot as it stands in lists. */
export function materialColumns(today: string): Column<MaterialRow>[] {
  return [
    { key: 'number', title: 'Lot', isNarrow: true, text: (row) => row.number },
    {
      key: 'name',
      title: 'Name',
      cell: (row) => (
        <>
          {row.name} <span className="quiet">{strengthWords(row)}</span>
        </>
      ),
    },
    { key: 'usable', title: 'May be used', cell: (row) => <StatusTag mark={usableMark(row, today)} /> },
    { key: 'kind', title: 'Kind', text: (row) => KIND_WORDS[row.kind] },
    { key: 'metal', title: 'Metal', text: (row) => (row.analyte ? ANALYTE_NAMES[row.analyte] : '') },
    { key: 'expires', title: 'Expires', isNarrow: true, text: (row) => row.expiresOn },
    {
      key: 'from',
      title: 'Made from or by',
      isSecondary: true,
      text: (row) => row.parentNumber ?? [row.producer, row.lotCode].filter(Boolean).join(', lot '),
    },
  ]
}
