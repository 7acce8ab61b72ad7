export * from './assay-error.js'
export * from './version.js'
