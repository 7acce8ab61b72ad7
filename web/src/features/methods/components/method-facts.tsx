import type { MethodRecord } from '@weirlight/shared/contracts'
import type { ReactNode } from 'react'
import { Box, DataTable, factMark, Provenance, StatusTag, type Column } from '../../../ui'
import { acceptanceRows, constantRows, thresholdWords, type FactRow } from '../method-words'

const FACT_COLUMNS: Column<FactRow>[] = [
  { key: 'what', title: 'What', text: (row) => row.what },
  {
    key: 'value',
    title: 'Value',
    onPhone: 'corner',
    cell: (row) => <span className="strong">{row.value}</span>,
  },
  { key: 'source', title: 'Source and how it is known', cell: (row) => <Provenance of={row} /> },
]

function FactTable({ title, rows }: { title: string; rows: FactRow[] }) {
  return (
    <Box title={title}>
      <DataTable
        label={title}
        rows={rows}
        columns={FACT_COLUMNS}
        rowKey={(row) => row.what}
        empty={{ title: 'Nothing is recorded' }}
      />
    </Box>
  )
}

/** What the method stands on, each number with its source. */
export function MethodConstants({ record }: { record: MethodRecord }) {
  return <FactTable title="Numbers of the method" rows={constantRows(record)} />
}

export function MethodAcceptance({ record }: { record: MethodRecord }) {
  return <FactTable title="Acceptance criteria" rows={acceptanceRows(record.acceptance)} />
}

export function MethodInterferences({ record }: { record: MethodRecord }) {
  const columns: Column<MethodRecord['interferences'][number]>[] = [
    { key: 'what', title: 'What interferes', text: (row) => row.what },
    { key: 'from', title: 'From', text: (row) => thresholdWords(row.threshold) },
    { key: 'effect', title: 'What it does', text: (row) => row.effect },
    { key: 'remedy', title: 'What helps', text: (row) => row.remedy },
    { key: 'source', title: 'Source', isSecondary: true, cell: (row) => <Provenance of={row} /> },
  ]
  return (
    <Box title="Interferences">
      <DataTable
        label="Interferences"
        rows={record.interferences}
        columns={columns}
        rowKey={(row) => row.what}
        empty={{ title: 'None is recorded' }}
      />
    </Box>
  )
}

export function MethodCells({ record }: { record: MethodRecord }) {
  const columns: Column<MethodRecord['cells'][number]>[] = [
    { key: 'path', title: 'Cell', unit: 'cm', kind: 'number', text: (row) => String(row.pathCm) },
    { key: 'low', title: 'From', unit: 'mg/L', kind: 'number', text: (row) => String(row.low) },
    { key: 'high', title: 'To', unit: 'mg/L', kind: 'number', text: (row) => String(row.high) },
    { key: 'mark', title: 'Known', cell: (row) => <StatusTag mark={factMark(row.mark)} /> },
  ]
  return (
    <Box title="What each cell reads">
      <DataTable
        label="Cells"
        rows={record.cells}
        columns={columns}
        rowKey={(row) => String(row.pathCm)}
        empty={{ title: 'No cell is named' }}
      />
    </Box>
  )
}

/** Hazards and what to do about them, each with its source. */
export function MethodCautions({ record }: { record: MethodRecord }) {
  return (
    <Box title="Cautions">
      <ul className="plain-list stack">
        {record.cautions.map((caution) => (
          <li key={caution.hazard}>
            <span className="strong">
              {caution.hazard.charAt(0).toUpperCase() + caution.hazard.slice(1)}.
            </span>{' '}
            {caution.text} <Provenance of={caution} />
          </li>
        ))}
      </ul>
    </Box>
  )
}

export function Sentence({ title, children }: { title: string; children: ReactNode }) {
  return (
    <div>
      <div className="note">{title}</div>
      <div>{children}</div>
    </div>
  )
}
