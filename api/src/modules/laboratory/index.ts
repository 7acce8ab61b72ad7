export { LaboratoryModule } from './laboratory.module.js'
export { LaboratoryService } from './laboratory.service.js'
export type { LaboratoryRow } from './laboratory.repository.js'
