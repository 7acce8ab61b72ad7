import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { paths, useFilters, useLaboratoryTime } from '../../../lib'
import { DataTable, FilterBar, FilterSelect, FilterText, StatusTag, type Column } from '../../../ui'
import { certificatePages, clientsQuery, type CertificateRow } from '../api/certificate-queries'
import './certificates.css'

export const CERTIFICATE_STATES = (['issued', 'superseded', 'withdrawn'] as const).map((value) => ({
  value,
  label: STATE_MARKS.certificate[value].word,
}))

/** Issued, amended, sent, opened: newest first. */
export function CertificatesList() {
  const [filters, change, clear] = useFilters({ state: '', clientId: '', number: '' })
  const clients = useQuery(clientsQuery)
  const { at } = useLaboratoryTime()
  const columns: Column<CertificateRow>[] = [
    { key: 'number', title: 'Certificate', isNarrow: true, text: (row) => row.number },
    {
      key: 'state',
      title: 'State',
      onPhone: 'corner',
      cell: (row) => <StatusTag mark={STATE_MARKS.certificate[row.state]} />,
    },
    {
      key: 'point',
      title: 'Point',
      cell: (row) => (
        <>
          {row.pointName} <span className="certificate-extra quiet">{row.clientName}</span>
        </>
      ),
    },
    {
      key: 'sample',
      title: 'Sample',
      isNarrow: true,
      cell: (row) => <Link to={paths.sample(row.sampleId)}>{row.sampleNumber}</Link>,
    },
    { key: 'issued', title: 'Issued', isNarrow: true, text: (row) => at(row.issuedAt) },
    { key: 'by', title: 'By', isSecondary: true, text: (row) => row.issuedBy.name },
    { key: 'above', title: 'Findings', cell: (row) => <AboveLimit count={row.aboveLimit} /> },
    { key: 'way', title: 'Sent and opened', cell: (row) => <Way certificate={row} /> },
  ]
  const isFiltered = filters.state !== '' || filters.clientId !== '' || filters.number !== ''
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterText
          label="Number"
          value={filters.number}
          onChange={(number) => change({ number })}
          placeholder="C-26-0…"
        />
        <FilterSelect
          label="State"
          value={filters.state}
          onChange={(state) => change({ state })}
          options={CERTIFICATE_STATES}
        />
        <FilterSelect
          label="Client"
          value={filters.clientId}
          onChange={(clientId) => change({ clientId })}
          options={(clients.data?.items ?? []).map((client) => ({ value: client.id, label: client.name }))}
        />
      </FilterBar>
      <DataTable
        label="Certificates, newest first"
        query={useInfiniteQuery(certificatePages(filters))}
        columns={columns}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.certificate(row.id)}
        empty={
          isFiltered
            ? { title: 'No certificate fits', text: 'Clear the filters to see all of them.' }
            : {
                title: 'No certificate was issued yet',
                text: 'The first one is made with the first release.',
              }
        }
      />
    </>
  )
}

export function AboveLimit({ count }: { count: number }) {
  if (count === 0) return <span className="quiet">none above a limit</span>
  return (
    <StatusTag mark={{ word: 'above', shape: 'triangle', tone: 'above' }}>{count} above a limit</StatusTag>
  )
}

function Way({ certificate: { rendered, mailed, opened } }: { certificate: CertificateRow }) {
  if (!rendered) {
    return <StatusTag mark={{ word: 'being made', shape: 'ring', tone: 'caution' }} />
  }
  if (opened) return <StatusTag mark={{ word: 'opened by the client', shape: 'disc', tone: 'meets' }} />
  return mailed ? (
    <StatusTag mark={{ word: 'mailed', shape: 'diamond', tone: 'weir' }} />
  ) : (
    <StatusTag mark={{ word: 'not mailed', shape: 'ring', tone: 'quiet' }} />
  )
}
