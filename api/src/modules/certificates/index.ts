export { CertificatesModule } from './certificates.module.js'
