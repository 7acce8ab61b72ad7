export { ProgrammesModule } from './programmes.module.js'
export { loadProgrammes } from './load-programmes.js'
export { ProgrammesService } from './programmes.service.js'
