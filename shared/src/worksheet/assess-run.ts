import type { Assessment, AssessmentRules } from '../contracts/index.js'
import { assessPosition, type PositionToAssess } from './assess-position.js'

export interface RunPosition extends Omit<PositionToAssess, 'parent' | 'leastInSamples'> {
  id: string
  /** of a duplicate or spike: the sample it belongs to */
  ofPositionId: string | null
}

/**
 * What the readings of every position of a run come to, by position id. A duplicate and a spike are judged by their sample, and a
 * method blank by the sample that holds least, once every sample is read. Pure; the same on the page and on the server.
 */
export function assessRun(
  positions: readonly RunPosition[],
  rules: AssessmentRules,
): ReadonlyMap<string, Assessment> {
  const found = new Map<string, Assessment>()
  const assess = (position: RunPosition, leastInSamples: number | null = null) => {
    const parent = found.get(position.ofPositionId ?? '') ?? null
    found.set(position.id, assessPosition({ ...position, parent, leastInSamples }, rules))
  }
  const isBlank = ({ kind }: RunPosition) => kind === 'method-blank'
  for (const position of positions) if (position.ofPositionId === null && !isBlank(position)) assess(position)
  for (const position of positions) if (position.ofPositionId !== null) assess(position)
  const least = leastOf(
    positions.flatMap(({ id, kind }) => (kind === 'sample' ? [found.get(id)?.concentration ?? null] : [])),
  )
  for (const position of positions) if (isBlank(position)) assess(position, least)
  return found
}

/** null where there is none, or one is not known yet */
function leastOf(concentrations: readonly (number | null)[]): number | null {
  const known = concentrations.filter((each) => each !== null)
  return known.length === 0 || known.length < concentrations.length ? null : Math.min(...known)
}
