/** How the spread of the readings grows with concentration, and so how much each reading counts. */
export const WEIGHTINGS = ['none', 'inverse-concentration', 'inverse-concentration-squared', 'given'] as const
export type Weighting = (typeof WEIGHTINGS)[number]

/** Weight by the model alone, before scaling; a concentration at or under the lowest standard above zero takes its weight. */
export function modelWeight(weighting: Weighting, concentration: number, lowestAboveZero: number): number {
  const x = Math.max(concentration, lowestAboveZero)
  if (weighting === 'inverse-concentration') return 1 / x
  if (weighting === 'inverse-concentration-squared') return 1 / x / x
  return 1
}

export interface WeightedStandard {
  concentration: number
  weight: number
}

/**
 * Scaled weight of a reading at a concentration that is not a standard. By the model where there is one; given
 * weights are interpolated between the neighbouring standards and kept level beyond the ends.
 */
export function weightAt(
  fit: { weighting: Weighting; weightScale: number; readBack: readonly WeightedStandard[] },
  concentration: number,
): number {
  if (fit.weighting === 'none') return 1
  if (fit.weighting !== 'given') {
    return fit.weightScale * modelWeight(fit.weighting, concentration, lowestAboveZero(fit.readBack))
  }
  const levels = weightLevels(fit.readBack)
  const above = levels.findIndex((level) => level.concentration >= concentration)
  const next = levels[above]
  const before = levels[above - 1]
  if (!next) return levels.at(-1)?.weight ?? 1
  if (!before) return next.weight
  const share = (concentration - before.concentration) / (next.concentration - before.concentration)
  return before.weight + share * (next.weight - before.weight)
}

export function lowestAboveZero(standards: readonly { concentration: number }[]): number {
  return standards.reduce(
    (lowest, { concentration }) => (concentration > 0 ? Math.min(lowest, concentration) : lowest),
    Number.MAX_VALUE,
  )
}

function weightLevels(standards: readonly WeightedStandard[]): WeightedStandard[] {
  const sums = new Map<number, { sum: number; count: number }>()
  for (const { concentration, weight } of standards) {
    const level = sums.get(concentration) ?? { sum: 0, count: 0 }
    sums.set(concentration, { sum: level.sum + weight, count: level.count + 1 })
  }
  return Array.from(sums, ([concentration, { sum, count }]) => ({ concentration, weight: sum / count })).sort(
    (a, b) => a.concentration - b.concentration,
  )
}
