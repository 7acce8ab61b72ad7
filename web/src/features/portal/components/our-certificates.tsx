import { useInfiniteQuery, useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { asProblem, paths, useFilters, useLaboratoryTime } from '../../../lib'
import {
  Box,
  Empty,
  Failed,
  FilterBar,
  FilterText,
  KeyValues,
  Loaded,
  MarginPage,
  SkeletonLines,
  StatusTag,
} from '../../../ui'
import {
  AboveLimit,
  certificatePages,
  certificateQuery,
  CertifiedChanges,
  documentHref,
  ProofBox,
  Replaced,
  Statement,
  type CertificateRow,
  type CertificateView,
} from '../../certificates'
import './portal.css'

/** Our certificates, newest first, each with its document. */
export function OurCertificates() {
  const [filters, change, clear] = useFilters({ number: '' })
  const query = useInfiniteQuery(certificatePages({ state: '', clientId: '', number: filters.number }))
  const rows = query.data?.pages.flatMap((page) => page.items)
  return (
    <>
      <FilterBar onClear={clear}>
        <FilterText
          label="Number"
          value={filters.number}
          onChange={(number) => change({ number })}
          placeholder="C-26-0…"
        />
      </FilterBar>
      {!rows ? (
        query.isError ? (
          <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
        ) : (
          <SkeletonLines />
        )
      ) : (
        <Box>
          {rows.length === 0 ? (
            <Empty
              title={filters.number === '' ? 'No certificate was issued for us yet' : 'No certificate fits'}
            />
          ) : (
            <ul className="own-lines">
              {rows.map((row) => (
                <CertificateLine key={row.id} row={row} />
              ))}
            </ul>
          )}
          {query.hasNextPage && (
            <button
              type="button"
              className="button own-more"
              disabled={query.isFetchingNextPage}
              onClick={() => void query.fetchNextPage()}
            >
              Show more
            </button>
          )}
        </Box>
      )}
    </>
  )
}

function CertificateLine({ row }: { row: CertificateRow }) {
  const { at } = useLaboratoryTime()
  return (
    <li className="own-row">
      <Link className="own-line is-stacked" to={paths.portalCertificate(row.id)}>
        <span className="own-what">
          <span>
            {row.number}, {row.pointName}
          </span>
          <span className="quiet own-small">
            {at(row.issuedAt)} · sample {row.sampleNumber}
            {!row.opened && row.state === 'issued' && ' · not opened yet'}
          </span>
        </span>
        <span className="own-latest">
          {row.state === 'issued' ? (
            <AboveLimit count={row.aboveLimit} />
          ) : (
            <StatusTag mark={STATE_MARKS.certificate[row.state]} />
          )}
        </span>
      </Link>
      {row.rendered && (
        <a
          className="button"
          href={documentHref(row.id)}
          target="_blank"
          rel="noreferrer"
          aria-label={`Open the PDF of ${row.number}`}
        >
          PDF
        </a>
      )}
    </li>
  )
}

const LIST = { to: paths.portalCertificates, label: 'Our certificates' }

export function OurCertificate({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(certificateQuery(id))} skeleton="page" what="certificate" back={LIST}>
      {(certificate) => <CertificateOfOurs certificate={certificate} />}
    </Loaded>
  )
}

function CertificateOfOurs({ certificate }: { certificate: CertificateView }) {
  const { at } = useLaboratoryTime()
  const { snapshot } = certificate
  return (
    <MarginPage
      title={`Certificate ${certificate.number}`}
      subtitle={`${certificate.pointName} · issued ${at(certificate.issuedAt)}`}
      back={LIST}
      state={<StatusTag mark={STATE_MARKS.certificate[certificate.state]} />}
    >
      <Replaced certificate={certificate} to={paths.portalCertificate} />
      <div className="stack">
        {certificate.rendered ? (
          <div className="row">
            <a className="button main" href={documentHref(certificate.id)} target="_blank" rel="noreferrer">
              Open the PDF
            </a>
            <a className="button" href={documentHref(certificate.id)} download={`${certificate.number}.pdf`}>
              Download
            </a>
          </div>
        ) : (
          <p className="quiet" role="status">
            The document is being made; it appears here by itself.
          </p>
        )}
        <Box title="Results as certified">
          <ul className="own-lines">
            {snapshot.results.map((line) => (
              <li key={line.resultId} className="own-line">
                <span className="own-what">
                  <span>{line.determination}</span>
                  <span className="quiet own-small">{[line.method, ...line.flags].join(' · ')}</span>
                </span>
                <span className="own-number">
                  <span>
                    {line.text} {line.unit}
                  </span>
                  <span className="own-small">
                    <Statement line={line} />
                    {line.limitValue !== '' && (
                      <span className="quiet">
                        {' '}
                        {line.limitValue} {line.limitUnit}
                      </span>
                    )}
                  </span>
                </span>
              </li>
            ))}
          </ul>
        </Box>
        <CertifiedChanges snapshot={snapshot} />
        <Box title="Sample">
          <KeyValues
            items={[
              { term: 'Number', detail: snapshot.sample.number },
              { term: 'Point', detail: `${snapshot.sample.point} (${snapshot.sample.pointCode})` },
              {
                term: 'Collected',
                detail: `${at(snapshot.sample.collectedAt)} by ${snapshot.sample.collectedBy}`,
              },
              { term: 'Received', detail: at(snapshot.sample.receivedAt) },
              { term: 'Released', detail: `${at(snapshot.releasedAt)} by ${snapshot.releasedBy}` },
              certificate.amends && {
                term: 'Replaces',
                detail: (
                  <Link to={paths.portalCertificate(certificate.amends.id)}>{certificate.amends.number}</Link>
                ),
              },
            ]}
          />
        </Box>
        <ProofBox certificate={certificate} />
        <p className="note">{snapshot.caution}</p>
      </div>
    </MarginPage>
  )
}
