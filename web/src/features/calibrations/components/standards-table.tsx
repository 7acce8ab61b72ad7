import type { CalibrationView, MethodDefinition } from '@weirlight/shared/contracts'
import { trueMinus, useLaboratoryTime } from '../../../lib'
import { DataTable, type Column } from '../../../ui'
import { Tint } from '../../../ui/tint'
import { serverKey, type DraftAssessment } from '../draft/calibration-draft'
import { decimals, signedPercent } from '../draft/number-texts'

type Standard = CalibrationView['standards'][number]

interface StandardsTableProps {
  view: CalibrationView
  live: DraftAssessment
  definition: MethodDefinition
}

/** The standards as they were read. */
export function StandardsTable({ view, live, definition }: StandardsTableProps) {
  const { clock } = useLaboratoryTime()
  const replicates = Math.max(
    1,
    ...view.standards.flatMap((standard) => standard.readings.map((reading) => reading.replicate)),
  )
  const backOf = (row: Standard) => live.readBack.get(serverKey(row.id))
  const columns: Column<Standard>[] = [
    {
      key: 'concentration',
      title: 'Standard',
      unit: 'mg/L',
      kind: 'number',
      text: (row) => row.concentration,
      wrap: (row, aligned) => (row.leftOutReason ? <s>{aligned}</s> : aligned),
    },
    ...Array.from({ length: replicates }, (_, index): Column<Standard> => {
      const find = (row: Standard) => row.readings.find((reading) => reading.replicate === index + 1)
      return {
        key: `a${index + 1}`,
        title: `A${'₁₂₃₄₅'[index] ?? ''}`,
        kind: 'number',
        text: (row) => find(row)?.absorbance ?? '–',
        wrap: (row, aligned) => {
          const reading = find(row)
          if (!reading) return aligned
          return (
            <span title={`${reading.readBy.name}, ${clock(reading.readAt)}`}>
              {reading.corrected && <span className="copper">corrected </span>}
              {aligned}
            </span>
          )
        },
      }
    }),
    {
      key: 'tint',
      title: 'Tint',
      cell: (row) => <Tint band={definition.band} absorbance={backOf(row)?.meanAbsorbance ?? null} />,
    },
    {
      key: 'back',
      title: 'Read back',
      unit: 'mg/L',
      kind: 'number',
      text: (row) => trueMinus(decimals(backOf(row)?.concentration, 3)),
    },
    { key: 'error', title: 'Error', kind: 'number', text: (row) => signedPercent(backOf(row)?.errorPercent) },
    {
      key: 'from',
      title: 'Made from',
      cell: (row) => (
        <>
          {row.lotNumber ?? (Number(row.concentration) === 0 ? 'reagent water' : 'the stock')}
          {row.role === 'second-source' && <span className="quiet"> · second source</span>}
        </>
      ),
    },
  ]
  return (
    <DataTable
      label="Standards and their readings"
      rows={view.standards.toSorted((a, b) => a.position - b.position)}
      columns={columns}
      isTableOnPhone
      rowKey={(row) => row.id}
      rowTone={(row) => (row.role === 'second-source' ? 'qc' : undefined)}
      empty={{ title: 'No standard was read' }}
    />
  )
}
