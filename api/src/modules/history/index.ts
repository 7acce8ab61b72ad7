export { HistoryModule } from './history.module.js'
