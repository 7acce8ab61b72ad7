import { z } from 'zod'
import { DECISION_RULES, NON_DETECT_RULES } from '../assay/rule-names.js'
import { analyteCode, form, unit } from './common.js'

/**
 * The shipped reference data (`fixtures/reference/`): what laws, standards and papers say, each row with its
 * source, edition, date and a mark that says how well it is known. A row is dated; check the current text.
 */

/** How a fact is known. */
export const factMark = z.enum([
  'read',
  'read-second-hand',
  'from-memory',
  'computed',
  'common-practice',
  'constructed',
])
export type FactMark = z.infer<typeof factMark>

/** year, year-month or day */
const datedTo = z.string().regex(/^\d{4}(-\d{2}(-\d{2})?)?$/, 'A year, a month or a day.')
const code = z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'Small letters, digits and hyphens.')
const sentence = z.string().min(3).max(600)

export const provenance = z.object({
  source: z.string().min(2),
  edition: z.string().min(1),
  /** of the edition, as exactly as it is known */
  date: datedTo,
  mark: factMark,
})
export type Provenance = z.infer<typeof provenance>

const numberFact = provenance.extend({ value: z.number() })
const countFact = provenance.extend({ value: z.number().int().min(1) })
const rangeFact = provenance
  .extend({ low: z.number(), high: z.number() })
  .refine((range) => range.low < range.high, 'The lower end must lie below the upper one.')
const decimalNumber = z.string().regex(/^\d+(\.\d+)?$/, 'A plain decimal number.')

export const analyteDefinition = provenance.extend({
  code: analyteCode,
  element: z.string(),
  symbol: z.string(),
  /** g/mol */
  molarMass: z.number().positive(),
  /** standard uncertainty as printed in brackets, g/mol */
  molarMassUncertainty: z.number().positive(),
  forms: z.array(z.object({ form, name: z.string() })).min(1),
})
export type AnalyteDefinition = z.infer<typeof analyteDefinition>

/** Engine rule of `holdTime`, with where it holds. */
export const holdTimeRuleDefinition = provenance.extend({
  code,
  analytes: z.array(analyteCode).min(1),
  forms: z.array(form).min(1),
  matrix: z.string(),
  container: z.string(),
  /** plain words for the receiving screen */
  text: sentence,
  rule: z.object({
    hours: z.number().positive(),
    conditions: z.array(
      z.object({
        preservation: z.enum(['none', 'nitric-acid', 'ammonium-sulfate-buffer']),
        hours: z.number().positive(),
        minPH: z.number().optional(),
        maxPH: z.number().optional(),
        maxTemperatureC: z.number().optional(),
      }),
    ),
    soonWithinHours: z.number().positive().optional(),
  }),
})
export type HoldTimeRuleDefinition = z.infer<typeof holdTimeRuleDefinition>

export const acceptanceDefinition = z.object({
  minimumStandardsLinear: countFact,
  minimumStandardsQuadratic: countFact,
  /** correlation coefficient r, not its square */
  minimumCorrelation: numberFact,
  minimumCorrelationQuadratic: numberFact,
  /** back-calculated standards, percent either side of nominal */
  readBackPercent: numberFact,
  /** the same for the lowest standard */
  readBackPercentLowest: numberFact,
  relativeStandardErrorPercent: numberFact,
  secondSourcePercent: rangeFact,
  /** continuing verification, percent either side */
  continuingVerificationPercent: numberFact,
  /** a verification at the start, after so many samples, and at the end */
  verificationEvery: countFact,
  /** calibration blank, at most this part of the reporting limit */
  calibrationBlankPart: numberFact,
  /** a method blank fails when it reaches the reporting limit times `reportingLimitPart` and is above `samplePart` of the sample */
  methodBlank: provenance.extend({ reportingLimitPart: z.number(), samplePart: z.number(), text: sentence }),
  duplicatePercent: numberFact,
  controlSamplePercent: rangeFact,
  spikeRecoveryPercent: rangeFact,
  batchSize: countFact,
})
export type AcceptanceDefinition = z.infer<typeof acceptanceDefinition>

export const approval = provenance.extend({
  programme: code,
  analyte: analyteCode,
  form,
  status: z.enum(['approved', 'not-approved', 'ask']),
  /** printed on the receiving screen and the certificate */
  statement: sentence,
})
export type Approval = z.infer<typeof approval>

export const methodDefinition = provenance.extend({
  code,
  title: z.string(),
  availability: z.enum(['standard', 'optional']),
  analyte: analyteCode,
  form,
  /** other forms the same colour reaction can report, each after its own pre-treatment */
  otherForms: z.array(form),
  /** the coloured species */
  species: z.string(),
  reagent: z.string(),
  principle: sentence,
  /** what the eye sees, in words */
  colour: z.string(),
  wavelengthNm: z.number().min(380).max(780),
  /** L mol-1 cm-1, per mole of the analyte */
  molarAbsorptivity: numberFact,
  /** of the light absorbed at the wavelength, kJ/mol */
  transitionEnergyKJPerMol: numberFact,
  /** absorbance per mg/L in a 1 cm cell that the molar absorptivity lets expect */
  slopeInOneCm: numberFact,
  /** for the tint only: a split Gaussian */
  band: provenance.extend({
    peakNm: z.number(),
    widthShortNm: z.number().positive(),
    widthLongNm: z.number().positive(),
  }),
  /** what each cell reads, mg/L of analyte in the coloured solution */
  cells: z.array(rangeFact.safeExtend({ pathCm: z.number().positive() })).min(1),
  /** of the method as published, mg/L */
  range: rangeFact,
  /** null where the source gives none */
  pH: rangeFact.nullable(),
  /** minutes after the colour reagent between which a reading counts */
  development: provenance.extend({
    minMinutes: z.number().nonnegative(),
    maxMinutes: z.number().positive(),
    text: sentence,
  }),
  interferences: z
    .array(
      provenance.extend({
        what: z.string(),
        /** from which amount on; null where the source names none */
        threshold: z
          .object({
            value: z.number().nonnegative(),
            unit: z.enum(['mg/L', 'times-analyte', 'mg-in-sample']),
          })
          .nullable(),
        effect: sentence,
        remedy: z.string(),
      }),
    )
    .min(1),
  preservation: sentence,
  container: z.string(),
  holdTimeRule: code,
  cautions: z.array(provenance.extend({ hazard: z.string(), text: sentence })).min(1),
  acceptance: acceptanceDefinition,
  calibrationMaxAgeDays: numberFact,
  /** absorbances that are read well */
  absorbanceLimits: rangeFact,
  /** how far the slope may lie from the one the molar absorptivity lets expect */
  slopeTolerancePercent: numberFact,
  /** mg/L, until the laboratory has set its own */
  reportingLimit: numberFact,
  approvals: z.array(approval).min(1),
})
export type MethodDefinition = z.infer<typeof methodDefinition>

/**
 * What `methods.definition` holds in the database: the catalogue entry together with what it refers to, so that a
 * method's row stands alone. The seeding command writes it; samples, calibrations and batches read it.
 */
export const methodRecord = methodDefinition.extend({
  /** of the analyte, g/mol */
  molarMass: z.number().positive(),
  /** the rule that `holdTimeRule` names */
  holdTime: holdTimeRuleDefinition,
})
export type MethodRecord = z.infer<typeof methodRecord>

export const limitKind = z.enum([
  'mcl',
  'action-level',
  'secondary',
  'parametric-value',
  'indicator',
  'guideline',
  'aesthetic',
  'health-advisory',
])
export const limitDefinition = provenance
  .extend({
    code,
    place: z.string(),
    analyte: analyteCode,
    form,
    kind: limitKind,
    name: z.string(),
    /** with the zeros that count */
    value: decimalNumber,
    unit,
    /** significant digits the rounded result is compared with */
    digits: z.number().int().min(1).max(6),
    ties: z.enum(['half-up', 'half-even']),
    decisionRule: z.enum(DECISION_RULES),
    guardFactor: z.number().nonnegative().nullable(),
    /** what the law itself compares; a single result above is a finding, not yet an exceedance, unless `single` */
    statistic: z.enum(['single', 'percentile-90', 'running-annual-average']),
    raisesAlert: z.boolean(),
    validFrom: z.iso.date(),
    validUntil: z.iso.date().nullable(),
    note: z.string(),
  })
  .refine(
    (limit) => limit.validUntil === null || limit.validUntil > limit.validFrom,
    'It ends before it begins.',
  )
export type LimitDefinition = z.infer<typeof limitDefinition>

export const programmeDefinition = provenance.extend({
  code,
  name: z.string(),
  jurisdiction: z.string(),
  displayUnit: unit,
  nonDetect: z.enum(NON_DETECT_RULES),
  /** where one analyte follows another rule */
  nonDetectFor: z.array(z.object({ analyte: analyteCode, rule: z.enum(NON_DETECT_RULES) })),
  rounding: z.object({ to: z.literal('significant'), ties: z.enum(['half-up', 'half-even']) }),
  /** digits of a reported result where no limit says how many */
  reportedDigits: z.number().int().min(1).max(6),
  decisionRule: z.enum(DECISION_RULES),
  guardFactor: z.number().nonnegative().nullable(),
  whenPercentileFractional: z.enum(['interpolate', 'round-up', 'round-to-nearest']),
  limits: z.array(code),
  clocks: z.array(code),
  note: z.string(),
})
export type ProgrammeDefinition = z.infer<typeof programmeDefinition>

/** A duty with a number of hours; shown, never decided. */
export const clockDefinition = provenance.extend({
  code,
  kind: z.enum(['notification', 'acknowledgement', 'resampling', 'review']),
  jurisdiction: z.string(),
  duty: sentence,
  who: z.string(),
  whom: z.string(),
  startingEvent: z.enum(['collected', 'received', 'analysed', 'released', 'notified']),
  /** the words of the rule for that event */
  startingEventText: z.string(),
  hours: z.number().positive(),
  appliesTo: z.enum(['any', 'mcl', 'action-level', 'secondary']),
})
export type ClockDefinition = z.infer<typeof clockDefinition>

/** A duty that runs by the calendar, in words. */
export const calendarDutyDefinition = provenance.extend({
  code,
  jurisdiction: z.string(),
  duty: sentence,
  who: z.string(),
  whom: z.string(),
  due: sentence,
})
export type CalendarDutyDefinition = z.infer<typeof calendarDutyDefinition>

/** File name in `fixtures/reference/` to what stands in it; each file of `methods/` holds one `methodDefinition`. */
export const referenceFiles = {
  'analytes.json': z.array(analyteDefinition),
  'hold-time-rules.json': z.array(holdTimeRuleDefinition),
  'limits.json': z.array(limitDefinition),
  'programmes.json': z.array(programmeDefinition),
  'clocks.json': z.array(clockDefinition),
  'calendar-duties.json': z.array(calendarDutyDefinition),
} as const
