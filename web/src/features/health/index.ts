export { HealthBox } from './components/health-box'
