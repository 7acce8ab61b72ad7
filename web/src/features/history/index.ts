export { HistoryList } from './components/history-list'
export { Seals } from './components/seals'
