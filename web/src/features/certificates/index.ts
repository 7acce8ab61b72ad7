export { CertificateById, Replaced } from './components/certificate-page'
export { AboveLimit, CertificatesList } from './components/certificates-list'
export { CertifiedChanges } from './components/certified-facts'
export { Statement } from './components/certified-results'
export { CheckAnswerBox } from './components/check-answer'
export { CheckForm } from './components/check-form'
export { ProofBox } from './components/document-box'
export {
  certificatePages,
  certificateQuery,
  documentHref,
  type CertificateRow,
  type CertificateView,
} from './api/certificate-queries'
