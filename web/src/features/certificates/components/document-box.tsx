import { useLaboratoryTime } from '../../../lib'
import { Box } from '../../../ui'
import { documentHref, type CertificateView } from '../api/certificate-queries'
import { groupedHash } from '../code-words'
import './certificates.css'

const kilobytes = (bytes: number) => `${Math.max(1, Math.round(bytes / 1024))} kB`

/** The document as issued, in the browser's own viewer where it has one. */
export function DocumentBox({ certificate }: { certificate: CertificateView }) {
  const { id, number, rendered, bytes } = certificate
  const href = documentHref(id)
  if (!rendered) return <BeingMade issuedAt={certificate.issuedAt} />
  const hasViewer = navigator.pdfViewerEnabled
  return (
    <Box title="The document as issued" isFlush={hasViewer}>
      <div className={hasViewer ? 'document-bar' : 'row'}>
        <a className={hasViewer ? 'button' : 'button main'} href={href} target="_blank" rel="noreferrer">
          Open the PDF
        </a>
        <a className="button" href={href} download={`${number}.pdf`}>
          Download
        </a>
        {bytes !== null && <span className="note">{kilobytes(bytes)}</span>}
      </div>
      {hasViewer && (
        <iframe
          className="document-frame"
          src={`${href}#toolbar=0&navpanes=0&view=FitH`}
          title={`Document of ${number}`}
          loading="lazy"
        />
      )}
    </Box>
  )
}

function BeingMade({ issuedAt }: { issuedAt: string }) {
  const { at } = useLaboratoryTime()
  return (
    <Box title="The document is being made">
      <div role="status" className="stack">
        <span className="skeleton" />
        <span className="skeleton" style={{ width: '80%' }} />
        <span className="skeleton" style={{ width: '60%' }} />
        <p className="quiet">
          Issued {at(issuedAt)}. It appears here by itself, usually within a few seconds, and is mailed then.
        </p>
      </div>
    </Box>
  )
}

/** By what anyone can tell that a file is this document. */
export function ProofBox({ certificate }: { certificate: CertificateView }) {
  const { snapshot, sha256 } = certificate
  return (
    <Box title="How anyone can check it">
      <dl className="proof">
        <dt>Verification code</dt>
        <dd>
          <a href={snapshot.checkUrl}>{snapshot.verificationCode}</a>
        </dd>
        <dt>SHA-256 of the file</dt>
        <dd className="hash">{sha256 ? groupedHash(sha256) : 'once it is made'}</dd>
      </dl>
    </Box>
  )
}
