export { ControlCharts } from './components/control-charts'
