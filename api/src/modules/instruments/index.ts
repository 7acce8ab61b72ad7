export { InstrumentsModule } from './instruments.module.js'
export { InstrumentsService, whyNotUsable } from './instruments.service.js'
export type { InstrumentRow } from './instruments.repository.js'
