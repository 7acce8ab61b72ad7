import {
  absoluteDifference,
  applyDilution,
  AssayError,
  combinedUncertainty,
  compareWithLimit,
  convertUnit,
  describeSample,
  predictConcentration,
  recoveryPercent,
  relativePercentDifference,
  reportValue,
  roundReported,
  spikeRecoveryPercent,
  type CalibrationFit,
  type NonDetectRule,
} from '../assay/index.js'
import type { Assessment, AssessmentRules, PositionLimit, ReportingRules } from '../contracts/index.js'

export interface PositionToAssess {
  kind: 'blank' | 'verification' | 'method-blank' | 'control' | 'sample' | 'duplicate' | 'spike'
  /** as typed; empty cells left out */
  absorbances: readonly number[]
  dilution: number
  /** mg/L, of verification and control */
  expected: number | null
  /** mg/L, of a spike */
  added: number | null
  /** the sample a duplicate or spike belongs to, already assessed */
  parent: Assessment | null
  /** mg/L, of the sample of the run that holds least; null or absent while one of them is not read. For a method blank. */
  leastInSamples?: number | null
  limits: readonly PositionLimit[]
  reporting: ReportingRules
}

const NOTHING: Assessment = {
  meanAbsorbance: null,
  concentration: null,
  standardError: null,
  expandedUncertainty: null,
  reportedText: null,
  uncertaintyText: null,
  numericForCompliance: null,
  unit: null,
  flags: [],
  qcText: null,
  qcValue: null,
  qcPassed: null,
  verdict: null,
  limit: null,
  explanation: '',
}

const VERDICT_WEIGHT = { below: 0, 'conditional-below': 1, 'conditional-above': 2, above: 3 } as const
const OVER = VERDICT_WEIGHT['conditional-above']
const CANNOT_SEE =
  'Not quantified, and the method’s limit lies above the limit to compare with: nothing can be said. Use a longer cell or a more sensitive method.'

/**
 * What the readings of one position of a run come to: mean absorbance, concentration in the sample (mg/L, unrounded),
 * its standard and expanded (k = 2) uncertainty, the reported text, the quality-control figure and the verdict against
 * the client's limits. Composes functions of the engine and holds no formula of its own; the page previews with it and the
 * server computes the official value with it. No readings: everything null. Throws nothing: what the engine
 * refuses becomes the `explanation`.
 */
export function assessPosition(position: PositionToAssess, rules: AssessmentRules): Assessment {
  if (position.absorbances.length === 0) return NOTHING
  try {
    return assess(position, rules)
  } catch (error) {
    if (!(error instanceof AssayError)) throw error
    return { ...NOTHING, flags: ['not-calculable'], explanation: error.message }
  }
}

function assess(position: PositionToAssess, rules: AssessmentRules): Assessment {
  const absorbances = [...position.absorbances]
  // the stored fit is the engine's own object, kept as JSON
  const predicted = predictConcentration(rules.fit as unknown as CalibrationFit, { absorbances })
  const meanAbsorbance = predicted.absorbance
  const inSample = applyDilution({
    concentration: predicted.concentration,
    standardError: predicted.standardError,
    dilutionFactor: position.dilution,
  })
  const diluted = (concentration: number) =>
    applyDilution({ concentration, dilutionFactor: position.dilution }).concentration
  const standardError = inSample.standardError ?? diluted(predicted.standardError)
  const { expandedUncertainty } = combinedUncertainty({
    components: [
      { name: 'inverse prediction', value: standardError, kind: 'absolute' },
      ...rules.uncertaintyComponents,
    ],
    at: Math.abs(inSample.concentration),
    k: 2,
  })
  const { unit } =
    position.reporting.displayUnit === 'ug/L' ? { unit: 'ug/L' as const } : { unit: 'mg/L' as const }
  const shown = (value: number) => convertUnit({ value, from: 'mg/L', to: unit })
  // a curve may see less than the reporting limit promises; then nothing below what it detects is quantified
  const quantification = Math.max(rules.reportingLimit, rules.detectionLimit)
  const reported = reportValue({
    concentration: shown(inSample.concentration),
    expandedUncertainty: shown(expandedUncertainty),
    limits: {
      detection: shown(diluted(rules.detectionLimit)),
      quantification: shown(diluted(quantification)),
    },
    nonDetect: position.reporting.nonDetect as NonDetectRule,
    rounding: { to: 'significant', digits: position.reporting.digits, ties: position.reporting.ties },
    unit,
    outsideRange: predicted.outsideRange === 'above' ? 'above' : null,
  })
  const flags: string[] = [...reported.flags]
  if (meanAbsorbance > rules.readableAbsorbance.high) flags.push('absorbance-high')
  const base: Assessment = {
    ...NOTHING,
    meanAbsorbance,
    concentration: inSample.concentration,
    standardError,
    expandedUncertainty,
    reportedText: reported.valueText,
    uncertaintyText: reported.uncertaintyText,
    numericForCompliance: convertUnit({ value: reported.numericForCompliance, from: unit, to: 'mg/L' }),
    unit,
    flags,
  }
  if (position.kind === 'sample') return { ...base, ...judge(base, position) }
  return { ...base, ...control({ position, rules, concentration: inSample.concentration }) }
}

/** Every limit is compared; shown is the highest one exceeded, or the lowest where none is. */
function judge(base: Assessment, position: PositionToAssess): Partial<Assessment> {
  const isBelowText = base.reportedText?.startsWith('<') ?? false
  const compared = position.limits
    .map((limit) => {
      const toLimit = (value: number) => convertUnit({ value, from: 'mg/L', to: limit.unit })
      const outcome = compareWithLimit({
        value: toLimit(base.numericForCompliance ?? 0),
        expandedUncertainty: toLimit(base.expandedUncertainty ?? 0),
        limit: Number(limit.value),
        rule: limit.rule,
        rounding: { to: 'significant', digits: limit.digits, ties: position.reporting.ties },
      })
      return {
        limit,
        outcome,
        inMilligrams: convertUnit({ value: Number(limit.value), from: limit.unit, to: 'mg/L' }),
      }
    })
    // a "<" that only stands above the limit because the method cannot see it is no finding
    .filter(({ outcome }) => !(isBelowText && VERDICT_WEIGHT[outcome.verdict] >= OVER))
  if (compared.length === 0 && position.limits.length > 0) {
    return { flags: [...base.flags, 'quantification-above-limit'], explanation: CANNOT_SEE }
  }
  const worst = Math.max(...compared.map(({ outcome }) => VERDICT_WEIGHT[outcome.verdict]))
  const isOver = worst >= OVER
  const [shown] = compared
    .filter(({ outcome }) => VERDICT_WEIGHT[outcome.verdict] === worst)
    .sort((a, b) => (isOver ? b.inMilligrams - a.inMilligrams : a.inMilligrams - b.inMilligrams))
  if (!shown) return { explanation: 'No limit applies to this determination under the client’s programme.' }
  return { verdict: shown.outcome.verdict, limit: shown.limit, explanation: shown.outcome.explanation }
}

const percent = (value: number) =>
  `${roundReported(value, { to: 'decimals', digits: 1, ties: 'half-even' })} %`
const milligrams = (value: number) => `${value} mg/L`

function control(given: {
  position: PositionToAssess
  rules: AssessmentRules
  concentration: number
}): Partial<Assessment> {
  const { position, rules, concentration } = given
  switch (position.kind) {
    case 'blank':
      return belowLimit(concentration, rules.verificationBlankLimit ?? rules.blankLimit)
    case 'method-blank':
      return methodBlank({ rules, concentration, leastInSamples: position.leastInSamples ?? null })
    case 'verification':
    case 'control': {
      if (position.expected === null) return { qcText: 'no expected value' }
      const recovery = recoveryPercent({ found: concentration, expected: position.expected })
      const isVerification = position.kind === 'verification'
      const low = isVerification ? 100 - rules.verificationTolerancePercent : rules.controlLowPercent
      const high = isVerification ? 100 + rules.verificationTolerancePercent : rules.controlHighPercent
      return {
        qcValue: recovery,
        qcPassed: recovery >= low && recovery <= high,
        qcText: percent(recovery),
        explanation: `allowed ${low} to ${high} %`,
      }
    }
    case 'duplicate':
      return duplicate({ rules, concentration, parent: position.parent })
    case 'spike':
      return spike({ rules, concentration, parent: position.parent, added: position.added })
    case 'sample':
      return {}
  }
}

function belowLimit(concentration: number, limit: number) {
  const qcPassed = Math.abs(concentration) < limit
  return {
    qcValue: concentration,
    qcPassed,
    qcText: `${qcPassed ? 'below' : 'not below'} ${milligrams(limit)}`,
  }
}

/** What the blank holds does no harm where every sample holds many times as much (Maine chapter 263, section 11, as read). */
function methodBlank(given: {
  rules: AssessmentRules
  concentration: number
  leastInSamples: number | null
}): Partial<Assessment> {
  const { rules, concentration, leastInSamples } = given
  const found = belowLimit(concentration, rules.blankLimit)
  const part = rules.blankSamplePart ?? 0
  if (found.qcPassed || part === 0) return found
  if (leastInSamples !== null && Math.abs(concentration) <= part * leastInSamples) {
    return {
      ...found,
      qcPassed: true,
      qcText: `at most ${part} of every sample`,
      explanation: `${found.qcText}, yet at most ${part} of what any sample of the run holds`,
    }
  }
  return { ...found, explanation: `and more than ${part} of what a sample of the run holds` }
}

function duplicate(given: {
  rules: AssessmentRules
  concentration: number
  parent: Assessment | null
}): Partial<Assessment> {
  const { rules, concentration } = given
  const first = given.parent?.concentration ?? null
  if (first === null) return { qcText: 'its sample is not read yet' }
  // near the quantification limit a relative difference says nothing: the absolute one is judged (common practice)
  if (describeSample([first, concentration]).mean < 5 * rules.reportingLimit) {
    const difference = absoluteDifference(first, concentration)
    return {
      qcValue: difference,
      qcPassed: difference <= rules.reportingLimit,
      qcText: `${roundReported(difference, { to: 'significant', digits: 2, ties: 'half-even' })} mg/L apart`,
      explanation: `near the quantification limit: at most ${milligrams(rules.reportingLimit)} apart`,
    }
  }
  const difference = relativePercentDifference(first, concentration)
  return {
    qcValue: difference,
    qcPassed: difference <= rules.duplicateTolerancePercent,
    qcText: `${percent(difference)} apart`,
    explanation: `allowed ${rules.duplicateTolerancePercent} %`,
  }
}

function spike(given: {
  rules: AssessmentRules
  concentration: number
  parent: Assessment | null
  added: number | null
}): Partial<Assessment> {
  const { rules, concentration, added } = given
  const unspiked = given.parent?.concentration ?? null
  if (unspiked === null || added === null) return { qcText: 'its sample is not read yet' }
  const recovery = spikeRecoveryPercent({ spiked: concentration, unspiked, added })
  // a spike lost in a rich sample says nothing of the matrix (common practice)
  if (unspiked > 4 * added) {
    return {
      qcValue: recovery,
      qcText: percent(recovery),
      explanation: 'not judged: the sample holds more than four times what was added',
    }
  }
  return {
    qcValue: recovery,
    qcPassed: recovery >= rules.spikeLowPercent && recovery <= rules.spikeHighPercent,
    qcText: percent(recovery),
    explanation: `allowed ${rules.spikeLowPercent} to ${rules.spikeHighPercent} %`,
  }
}
