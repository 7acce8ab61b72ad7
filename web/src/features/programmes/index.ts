export { ProgrammesList } from './components/programmes-list'
export { programmesQuery, type Programme } from './api/programme-queries'
export { useProgrammeNames } from './hooks/use-programme-names'
