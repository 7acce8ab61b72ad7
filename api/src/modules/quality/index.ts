export { validationDocument } from './documents/validation-document.js'
export { QualityModule } from './quality.module.js'
