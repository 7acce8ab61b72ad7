export * from './endpoint.js'
