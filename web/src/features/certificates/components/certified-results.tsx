import { STATE_MARKS } from '@weirlight/shared/states'
import { useLaboratoryTime } from '../../../lib'
import { Box, DataTable, NumberWithStory, StatusTag, type Column } from '../../../ui'
import type { CertificateSnapshot } from '../api/certificate-queries'
import './certificates.css'

type Line = CertificateSnapshot['results'][number]
const isVerdict = (verdict: string): verdict is keyof typeof STATE_MARKS.verdict =>
  verdict in STATE_MARKS.verdict

export function Statement({ line }: { line: Line }) {
  if (line.verdict === null || !isVerdict(line.verdict)) {
    return <StatusTag mark={{ word: line.statement, shape: 'ring', tone: 'quiet' }} />
  }
  return <StatusTag mark={STATE_MARKS.verdict[line.verdict]}>{line.statement}</StatusTag>
}

/** The results as certified. Each number opens its story for those who may read it. */
export function CertifiedResults({ snapshot }: { snapshot: CertificateSnapshot }) {
  const { at } = useLaboratoryTime()
  const columns: Column<Line>[] = [
    {
      key: 'determination',
      title: 'Determination',
      cell: (line) => (
        <>
          <span className="strong">{line.determination}</span>
          <span className="certificate-extra quiet">{line.method}</span>
        </>
      ),
    },
    {
      key: 'text',
      title: 'Result',
      kind: 'number',
      text: (line) => line.text,
      wrap: (line, aligned) => (
        <NumberWithStory resultId={line.resultId} text={line.text} unit={line.unit}>
          <strong className="strong">{aligned}</strong>
        </NumberWithStory>
      ),
    },
    {
      key: 'uncertainty',
      title: 'U, k = 2',
      kind: 'number',
      onPhone: 'beside',
      text: (line) => (line.uncertaintyText === '' ? null : `± ${line.uncertaintyText.replace(/^±\s*/, '')}`),
    },
    { key: 'unit', title: 'Unit', isNarrow: true, onPhone: 'beside', text: (line) => line.unit },
    {
      key: 'quantification',
      title: 'Quantif. limit',
      kind: 'number',
      isSecondary: true,
      text: (line) => line.quantificationLimit || null,
    },
    {
      key: 'limit',
      title: 'Limit',
      cell: (line) =>
        line.limitName === '' ? (
          <span className="quiet">none</span>
        ) : (
          <>
            {line.limitValue} {line.limitUnit === line.unit ? '' : line.limitUnit}
            <span className="certificate-extra quiet">{line.limitName}</span>
          </>
        ),
    },
    {
      key: 'statement',
      title: 'Statement',
      cell: (line) => (
        <>
          <Statement line={line} />
          {line.flags.length > 0 && <span className="certificate-extra quiet">{line.flags.join(', ')}</span>}
        </>
      ),
    },
  ]
  const rules = [...new Set(snapshot.results.map((line) => line.decisionRule).filter(Boolean))]
  return (
    <Box title="Results as certified">
      <DataTable
        label="Results as certified"
        rows={snapshot.results}
        columns={columns}
        rowKey={(line) => line.resultId}
        empty={{ title: 'This certificate carries no result' }}
      />
      <ul className="note small-list">
        {rules.map((rule) => (
          <li key={rule}>Statement: {rule}.</li>
        ))}
        {snapshot.results.map((line) => (
          <li key={line.resultId}>
            {line.determination}: analysed {at(line.analysedAt)} by {line.analyst}, batch {line.batch},
            calibration {line.calibration}. {line.limitSource && `Limit: ${line.limitSource}. `}
            {line.approval}
          </li>
        ))}
      </ul>
    </Box>
  )
}
