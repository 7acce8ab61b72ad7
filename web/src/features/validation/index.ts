export { ValidationRuns } from './components/validation-runs'
