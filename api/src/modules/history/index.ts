export { HistoryModule } from './history.module.js'
export { VersionCheck, type Versioned } from './version-check.js'
