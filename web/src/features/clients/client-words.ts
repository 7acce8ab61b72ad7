import type { SamplingPoint } from './api/client-queries'

export const POINT_KINDS: Record<SamplingPoint['kind'], string> = {
  source: 'Source',
  raw: 'Raw water',
  treated: 'Treated water',
  distribution: 'Distribution',
  tap: 'Tap',
  waste: 'Waste water',
}
export const POINT_KIND_OPTIONS = Object.entries(POINT_KINDS).map(([value, label]) => ({ value, label }))

const ACTIVE = { word: 'In use', shape: 'disc', tone: 'meets' } as const
const CLOSED = { word: 'Closed', shape: 'diamond', tone: 'quiet' } as const
export const activeMark = (thing: { active: boolean }) => (thing.active ? ACTIVE : CLOSED)
