export { todayQuery } from './api/today-api'
export { TodayLines } from './components/today-lines'
