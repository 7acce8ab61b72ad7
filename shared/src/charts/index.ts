export * from './calibration-chart.js'
export type { ChartColours } from './chart-frame.js'
export * from './control-chart.js'
export * from './trend-chart.js'
