export { Chart } from './chart'
export { useChartColours, type ChartColours } from './use-chart-colours'
