import { useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { paths, useCan, useLaboratoryTime } from '../../../lib'
import { Bar, Box, Loaded, MarginPage, StatusTag, Strip } from '../../../ui'
import { DeliveriesTable } from '../../mail'
import { certificateQuery, type CertificateView } from '../api/certificate-queries'
import { CertificateActions } from './certificate-actions'
import { CertifiedChanges, CertifiedNotes, CertifiedSample } from './certified-facts'
import { CertifiedResults } from './certified-results'
import { DocumentBox, ProofBox } from './document-box'
import './certificates.css'

const LIST = { to: paths.certificates, label: 'Certificates' }

/** One certificate, for the laboratory: the document beside its data. */
export function CertificateById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(certificateQuery(id))} skeleton="page" what="certificate" back={LIST}>
      {(certificate) => <CertificateOnPage certificate={certificate} />}
    </Loaded>
  )
}

function CertificateOnPage({ certificate }: { certificate: CertificateView }) {
  const may = useCan()
  const { withOffset, at } = useLaboratoryTime()
  const { snapshot } = certificate
  return (
    <MarginPage
      title={`Certificate ${certificate.number}`}
      subtitle={`${certificate.clientName}, ${certificate.pointName}`}
      back={LIST}
      state={<StatusTag mark={STATE_MARKS.certificate[certificate.state]} />}
      facts={[
        { term: 'Issued', detail: `${withOffset(certificate.issuedAt)} by ${certificate.issuedBy.name}` },
        {
          term: 'Sample',
          detail: may('samples.read') ? (
            <Link to={paths.sample(certificate.sampleId)}>{certificate.sampleNumber}</Link>
          ) : (
            certificate.sampleNumber
          ),
        },
        {
          term: 'Client',
          detail: may('clients.read') ? (
            <Link to={paths.client(certificate.clientId)}>{certificate.clientName}</Link>
          ) : (
            certificate.clientName
          ),
        },
        certificate.amends && {
          term: 'Replaces',
          detail: <Link to={paths.certificate(certificate.amends.id)}>{certificate.amends.number}</Link>,
        },
        certificate.amendedBy && {
          term: 'Replaced by',
          detail: (
            <Link to={paths.certificate(certificate.amendedBy.id)}>{certificate.amendedBy.number}</Link>
          ),
        },
        {
          term: 'Opened by the client',
          detail:
            certificate.openings.length === 0
              ? 'not yet'
              : certificate.openings.map((opening) => `${opening.by}, ${at(opening.at)}`).join('; '),
        },
        { term: 'Engine', detail: snapshot.engineVersion },
      ]}
      foldLabel="Sample, client and openings"
      notes={[snapshot.caution]}
      bar={
        <Bar
          lead="Frozen at issue: the document is made from this data and from nothing else."
          actions={<CertificateActions certificate={certificate} />}
        />
      }
    >
      <Replaced certificate={certificate} to={paths.certificate} />
      <div className="beside">
        <DocumentBox certificate={certificate} />
        <div className="stack">
          <CertifiedResults snapshot={snapshot} />
          <CertifiedChanges snapshot={snapshot} />
          <CertifiedSample snapshot={snapshot} />
          <Box title="Who it was sent to">
            <DeliveriesTable deliveries={certificate.deliveries} label="Messages with this certificate" />
          </Box>
          <ProofBox certificate={certificate} />
          <CertifiedNotes snapshot={snapshot} />
        </div>
      </div>
    </MarginPage>
  )
}

/** Said first where a certificate is no longer the current one. */
export function Replaced({ certificate, to }: { certificate: CertificateView; to: (id: string) => string }) {
  if (certificate.state === 'issued') return null
  if (certificate.state === 'withdrawn') {
    return (
      <Strip tone="above" title="Withdrawn">
        Do not use this certificate. {certificate.withdrawnReason}
      </Strip>
    )
  }
  return (
    <Strip title="Superseded">
      {certificate.amendedBy ? (
        <>
          An amendment took its place:{' '}
          <Link to={to(certificate.amendedBy.id)}>{certificate.amendedBy.number}</Link>.
        </>
      ) : (
        'An amendment took its place.'
      )}
    </Strip>
  )
}
