export { ProgrammesModule } from './programmes.module.js'
export { loadProgrammes } from './load-programmes.js'
