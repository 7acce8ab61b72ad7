export * from './assess-calibration.js'
export * from './assess-position.js'
export * from './find-in-batch.js'
export * from './read-back.js'
