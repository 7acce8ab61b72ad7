import {
  requireArray,
  requireFinite,
  requireNotNegative,
  requireObject,
  requireOneOf,
  requirePositive,
} from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { describeSample } from './descriptive-statistics.js'
import { gate } from './finite-gate.js'
import { rootOfSquares } from './root-of-squares.js'
import { ENGINE_VERSION } from './version.js'

export interface UncertaintyComponent {
  name: string
  /** standard uncertainty: in the unit of the result, or as a fraction of it (0.02 for 2 %) */
  value: number
  kind: 'absolute' | 'relative'
}

export interface CombinedUncertaintyInput {
  components: readonly UncertaintyComponent[]
  /** the result the uncertainty belongs to */
  at: number
  /** coverage factor; 2 when left out */
  k?: number | undefined
}

/**
 * Combined and expanded uncertainty from independent components of a result.
 *
 * A relative component counts value * |at|; u = sqrt(sum u_i^2), U = k u. The share of a component is that of its
 * variance.
 * Source: JCGM 100:2008 (GUM) section 5.1.2 with unit sensitivity and 6.2.1; EURACHEM/CITAC QUAM:2012, chapter 8.
 *
 * @throws AssayError too-few-values (no component), invalid-argument (negative value, k not above zero), non-finite
 */
export function combinedUncertainty(input: CombinedUncertaintyInput) {
  requireObject(input, 'uncertainty budget')
  const at = requireFinite(input.at, 'result')
  const k = requirePositive(input.k ?? 2, 'coverage factor')
  const given = Array.from(requireArray(input.components, 'components'))
  if (given.length === 0)
    throw new AssayError('too-few-values', 'An uncertainty needs at least one component.')
  const components = given.map((component, index) => {
    requireObject(component, 'component')
    const kind = requireOneOf(component.kind, ['absolute', 'relative'], 'kind of component')
    const value = requireFinite(component.value, 'uncertainty', index)
    if (value < 0) throw new AssayError('invalid-argument', 'An uncertainty cannot be negative.', index)
    return {
      name: String(component.name),
      kind,
      value,
      absolute: kind === 'relative' ? value * Math.abs(at) : value,
    }
  })
  const standardUncertainty = rootOfSquares(components.map((component) => component.absolute))
  return gate({
    standardUncertainty,
    expandedUncertainty: k * standardUncertainty,
    k,
    at,
    /** null for a result of zero */
    relativePercent: at === 0 ? null : 100 * (standardUncertainty / Math.abs(at)),
    components: components.map((component) => ({
      ...component,
      sharePercent: share(component.absolute, standardUncertainty),
    })),
    engineVersion: ENGINE_VERSION,
    method: 'JCGM 100:2008 (GUM), 5.1.2 and 6.2.1',
  })
}

function share(part: number, whole: number): number {
  return whole === 0 ? 0 : 100 * (part / whole) * (part / whole)
}

export interface BiasRun {
  /** mean result less reference, in the unit of withinLabReproducibility (usually percent) */
  bias: number
  /** standard uncertainty of the reference value */
  uReference: number
  /** results behind the bias */
  n?: number | undefined
  /** their standard deviation; withinLabReproducibility when left out */
  standardDeviation?: number | undefined
}

export interface TopDownUncertaintyInput {
  /** standard deviation u(Rw) from control samples, absolute or in percent */
  withinLabReproducibility: number
  biasRuns: readonly BiasRun[]
  /** coverage factor; 2 when left out */
  k?: number | undefined
}

/**
 * Measurement uncertainty from a laboratory's own control and bias data.
 *
 * u_c = sqrt(u(Rw)^2 + u(bias)^2). Several reference materials or proficiency rounds: u(bias) = sqrt(RMS_bias^2 +
 * u(Cref)^2), u(Cref) the mean of the reference uncertainties. One run: u(bias) = sqrt(bias^2 + s^2 / n + u(Cref)^2),
 * where n is given. Everything in one unit, percent or absolute.
 * Source: Nordtest Technical Report 537 (ed. 4, 2017), sections 3 to 7.
 *
 * @throws AssayError too-few-values (no bias run), invalid-argument (negative uncertainty, n below 1), non-finite
 */
export function topDownUncertainty(input: TopDownUncertaintyInput) {
  requireObject(input, 'top-down uncertainty')
  const uRw = requireNotNegative(input.withinLabReproducibility, 'within-laboratory reproducibility')
  const k = requirePositive(input.k ?? 2, 'coverage factor')
  const given = Array.from(requireArray(input.biasRuns, 'bias runs'))
  const [only] = given
  if (only === undefined) throw new AssayError('too-few-values', 'At least one bias run is needed.')
  const runs = given.map((run, index) => {
    requireObject(run, 'bias run')
    const bias = requireFinite(run.bias, 'bias', index)
    const uReference = requireNotNegative(run.uReference, 'uncertainty of the reference')
    const n = run.n === undefined ? null : requirePositive(run.n, 'number of results')
    if (n !== null && n < 1)
      throw new AssayError('invalid-argument', 'A bias needs at least one result.', index)
    const deviation = requireNotNegative(run.standardDeviation ?? uRw, 'standard deviation of the bias')
    return { bias, uReference, meanError: n === null ? 0 : deviation / Math.sqrt(n) }
  })
  const rmsBias = rootOfSquares(runs.map((run) => run.bias)) / Math.sqrt(runs.length)
  const uReference = describeSample(runs.map((run) => run.uReference)).mean
  const meanError = runs.length === 1 ? (runs[0]?.meanError ?? 0) : 0
  const uBias = rootOfSquares([rmsBias, uReference, meanError])
  const standardUncertainty = rootOfSquares([uRw, uBias])
  return gate({
    uRw,
    rmsBias,
    uReference,
    uBias,
    standardUncertainty,
    expandedUncertainty: k * standardUncertainty,
    k,
    engineVersion: ENGINE_VERSION,
    method: 'Nordtest TR 537',
  })
}
