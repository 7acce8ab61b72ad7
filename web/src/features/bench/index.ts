export { Readiness, readinessQuery } from './components/readiness'
