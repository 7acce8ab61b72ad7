import { absoluteDifference } from '../assay/index.js'
import type { Assessment, AssessmentRules } from '../contracts/index.js'

export interface PositionToCheck {
  id: string
  position: number
  kind: 'blank' | 'verification' | 'method-blank' | 'control' | 'sample' | 'duplicate' | 'spike'
  label: string
  /** cells of the run sheet, in order; null where nothing is entered */
  readings: readonly ({ absorbance: number; readAt: string } | null)[]
  assessment: Assessment
  holdingDueAt: string | null
}

export interface Finding {
  id: string
  positionId: string | null
  position: number | null
  what: string
  severity: 'failed' | 'caution'
}

const KIND_NAMES: Record<PositionToCheck['kind'], string> = {
  blank: 'Verification blank',
  verification: 'Verification standard',
  'method-blank': 'Method blank',
  control: 'Control sample',
  sample: 'Sample',
  duplicate: 'Duplicate',
  spike: 'Spike',
}

/** Absorbances of one position further apart than this share of their mean, and than 0.005, are worth a second look (common practice). */
const REPLICATE_SPREAD = { relative: 0.05, absolute: 0.005 }

/**
 * What a reviewer must be told of a run: failed quality control first, then cautions. Pure; the same on the page and on the
 * server. `missingReadings` counts empty cells, which stop a submission.
 */
export function findInBatch(input: {
  positions: readonly PositionToCheck[]
  rules: AssessmentRules
  colour: { startedAt: string; fromMinutes: number; toMinutes: number } | null
}): { findings: Finding[]; missingReadings: number } {
  const findings: Finding[] = []
  let missingReadings = 0
  for (const position of input.positions) {
    missingReadings += position.readings.filter((reading) => reading === null).length
    findings.push(...findInPosition(position, input))
  }
  for (const kind of ['method-blank', 'control', 'verification', 'duplicate'] as const) {
    if (input.positions.some((position) => position.kind === kind)) continue
    findings.push({
      id: `missing-${kind}`,
      positionId: null,
      position: null,
      severity: 'failed',
      what: `${KIND_NAMES[kind]} is missing from this run.`,
    })
  }
  const order = { failed: 0, caution: 1 }
  findings.sort((a, b) => order[a.severity] - order[b.severity] || (a.position ?? 0) - (b.position ?? 0))
  return { findings, missingReadings }
}

function findInPosition(
  position: PositionToCheck,
  {
    rules,
    colour,
  }: { rules: AssessmentRules; colour: { startedAt: string; fromMinutes: number; toMinutes: number } | null },
): Finding[] {
  const found: Finding[] = []
  const say = (code: string, severity: Finding['severity'], what: string) =>
    found.push({
      id: `${code}-${position.id}`,
      positionId: position.id,
      position: position.position,
      severity,
      what,
    })
  const { assessment } = position
  const name = position.kind === 'sample' ? position.label : KIND_NAMES[position.kind]
  const readings = position.readings.flatMap((reading) => (reading ? [reading] : []))
  if (assessment.qcPassed === false) {
    say(
      'control',
      'failed',
      `${name}: ${assessment.qcText ?? ''}${assessment.explanation ? `, ${assessment.explanation}` : ''}.`,
    )
  }
  if (position.kind === 'method-blank' && assessment.qcPassed && assessment.explanation !== '') {
    say('blank', 'caution', `${name}: ${assessment.explanation}.`)
  }
  if (assessment.flags.includes('not-calculable'))
    say('not-calculable', 'failed', `${name}: ${assessment.explanation}`)
  if (assessment.flags.includes('above-range')) {
    say(
      'range',
      'failed',
      `${name} reads above the highest standard: dilute and read again, or it is reported as estimated.`,
    )
  }
  if (assessment.flags.includes('absorbance-high')) {
    say(
      'absorbance',
      'caution',
      `${name} reads above ${rules.readableAbsorbance.high}, where little light is left to measure.`,
    )
  }
  const values = readings.map((reading) => reading.absorbance)
  const mean = assessment.meanAbsorbance ?? 0
  const spread = values.length > 1 ? absoluteDifference(Math.max(...values), Math.min(...values)) : 0
  if (spread > REPLICATE_SPREAD.absolute && spread > Math.abs(mean) * REPLICATE_SPREAD.relative) {
    say('spread', 'caution', `${name}: its readings lie ${spread.toFixed(4)} apart.`)
  }
  const late =
    position.holdingDueAt !== null &&
    readings.some((reading) => Date.parse(reading.readAt) > Date.parse(position.holdingDueAt ?? ''))
  if (late) say('holding', 'failed', `${name} was read after its holding time had run out.`)
  if (colour) {
    const ages = readings.map(
      (reading) => (Date.parse(reading.readAt) - Date.parse(colour.startedAt)) / 60_000,
    )
    if (ages.some((age) => age < colour.fromMinutes))
      say('early', 'caution', `${name} was read before the colour had ${colour.fromMinutes} min to develop.`)
    if (ages.some((age) => age > colour.toMinutes))
      say(
        'late',
        'caution',
        `${name} was read more than ${colour.toMinutes} min after the reagent, when the colour fades.`,
      )
  }
  return found
}
