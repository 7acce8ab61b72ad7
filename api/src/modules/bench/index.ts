export { BenchModule } from './bench.module.js'
export { BenchService } from './bench.service.js'
