import { useLaboratoryTime } from '../../../lib'
import { Box, DataTable, KeyValues, Strip, type Column } from '../../../ui'
import type { CertificateSnapshot } from '../api/certificate-queries'

const words = (code: string) => code.replaceAll('-', ' ')

/** For whom, and what lay in the bottle. */
export function CertifiedSample({ snapshot }: { snapshot: CertificateSnapshot }) {
  const { at } = useLaboratoryTime()
  const { client, sample } = snapshot
  return (
    <Box title="For whom and what">
      <KeyValues
        items={[
          { term: 'For', detail: client.name },
          client.contact !== '' && { term: 'Contact', detail: client.contact },
          client.systemId !== '' && { term: 'System', detail: client.systemId },
          { term: 'Point', detail: `${sample.point} (${sample.pointCode})` },
          { term: 'Purpose', detail: words(sample.purpose) },
          { term: 'Collected', detail: `${at(sample.collectedAt)} by ${sample.collectedBy}` },
          {
            term: 'Received',
            detail: `${at(sample.receivedAt)}${sample.temperatureC === '' ? '' : ` at ${sample.temperatureC} °C`}`,
          },
          { term: 'Preservation', detail: words(sample.preservation) || 'none' },
          sample.ph !== '' && { term: 'pH', detail: sample.ph },
          sample.condition !== '' && { term: 'Condition', detail: sample.condition },
          sample.qualification !== '' && { term: 'Qualification', detail: sample.qualification },
          {
            term: 'Released',
            detail: `${at(snapshot.releasedAt)} by ${snapshot.releasedBy}, ${snapshot.releasedByRole}`,
          },
        ]}
      />
    </Box>
  )
}

type Change = CertificateSnapshot['changes'][number]

/** What an amendment changed, and why. */
export function CertifiedChanges({ snapshot }: { snapshot: CertificateSnapshot }) {
  if (snapshot.replaces === null) return null
  const columns: Column<Change>[] = [
    { key: 'what', title: 'What', text: (row) => row.what },
    { key: 'was', title: 'Was', text: (row) => row.was },
    { key: 'is', title: 'Is', text: (row) => row.is },
  ]
  return (
    <Box title={`What it changes of ${snapshot.replaces}`}>
      <Strip tone="quiet" title="Why">
        {snapshot.replacementReason}
      </Strip>
      <DataTable
        label="Changes"
        rows={snapshot.changes}
        columns={columns}
        rowKey={(row) => row.what}
        empty={{ title: 'No value changed', text: 'The reason above says why it was issued again.' }}
      />
    </Box>
  )
}

export function CertifiedNotes({ snapshot }: { snapshot: CertificateSnapshot }) {
  return (
    <Box title="Notes on the document">
      <ul className="note small-list">
        {snapshot.notes.map((note) => (
          <li key={note}>{note}</li>
        ))}
        <li>{snapshot.caution}</li>
      </ul>
    </Box>
  )
}
