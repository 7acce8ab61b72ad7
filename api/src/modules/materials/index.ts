export { MaterialsModule } from './materials.module.js'
export { MaterialsService, whyUnusable } from './materials.service.js'
export type { MaterialRow } from './materials.repository.js'
