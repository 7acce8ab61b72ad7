import { StatusTag, type Mark } from './status-tag'

/** How a fact of the reference data is known. */
const MARKS: Record<string, Mark> = {
  read: { word: 'read in the source', shape: 'disc', tone: 'quiet' },
  'read-second-hand': { word: 'read second-hand', shape: 'diamond', tone: 'caution' },
  'from-memory': { word: 'from memory: check it', shape: 'diamond', tone: 'caution' },
  computed: { word: 'computed', shape: 'ring', tone: 'quiet' },
  'common-practice': { word: 'common practice', shape: 'ring', tone: 'quiet' },
  constructed: { word: 'set by the laboratory', shape: 'ring', tone: 'quiet' },
}

export const factMark = (mark: string): Mark => MARKS[mark] ?? { word: mark, shape: 'ring', tone: 'quiet' }

interface Sourced {
  source: string
  edition: string
  mark: string
}

/** Where a fact comes from, and how well it is known. */
export function Provenance({ of }: { of: Sourced }) {
  return (
    <span className="provenance note">
      {of.source} ({of.edition}) <StatusTag mark={factMark(of.mark)} />
    </span>
  )
}
