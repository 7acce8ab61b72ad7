export { CertificatesModule } from './certificates.module.js'
export { RenderingService } from './rendering.service.js'
