export { AddInstrument } from './components/add-instrument'
export { InstrumentById } from './components/instrument-page'
export { InstrumentsList } from './components/instruments-list'
