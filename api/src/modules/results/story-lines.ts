import { describeSample, ENGINE_VERSION } from '@weirlight/shared/assay'
import { determinationName, showUnit, type PositionLimit, type StoryView } from '@weirlight/shared/contracts'
import { paths } from '@weirlight/shared/paths'
import type { StoredFit } from '@weirlight/shared/worksheet'
import { showTime } from '../../platform/index.js'
import { toResultRow } from './result-row.js'
import type { ResultRecord } from './results.repository.js'
import type { StoryLot, StoryRepository } from './story.repository.js'
import type { ResultInputs } from './result-inputs.js'

type Rows<K extends keyof StoryRepository> = Awaited<ReturnType<StoryRepository[K]>>
type Change = StoryView['changes'][number]

export function changesOf({
  readings,
  edits,
}: {
  readings: Rows<'readings'>
  edits: Rows<'positionChanges'>
}): Change[] {
  const corrected = readings.flatMap((row) =>
    row.laterId === null
      ? []
      : [
          {
            what: `reading ${row.replicate}`,
            from: row.absorbanceText as string,
            to: (row.laterText ?? '') as string,
            by: readings.find((later) => later.id === row.laterId)?.readBy ?? '',
            at: (row.laterAt ?? row.readAt).toISOString(),
            reason: row.laterReason ?? '',
          },
        ],
  )
  const edited = edits.flatMap((edit) => {
    const before = edit.old as Record<string, unknown> | null
    const after = edit.new as Record<string, unknown> | null
    return ['dilution', 'note'].flatMap((key) =>
      after && key in after
        ? [
            {
              what: key,
              from: String(before?.[key] ?? ''),
              to: String(after[key] ?? ''),
              by: edit.actorName,
              at: edit.at.toISOString(),
              reason: edit.reason ?? '',
            },
          ]
        : [],
    )
  })
  return [...corrected, ...edited].sort((a, b) => a.at.localeCompare(b.at))
}

export function standardsOf(rows: Rows<'standards'>): StoryView['standards'] {
  const standards = new Map<string, StoryView['standards'][number]>()
  for (const row of rows) {
    const standard = standards.get(row.id) ?? {
      position: row.position,
      concentration: row.concentration as string,
      absorbances: [],
      lotId: row.lotId,
      lotNumber: row.lotNumber,
    }
    if (row.absorbanceText !== null) standard.absorbances.push(row.absorbanceText as string)
    standards.set(row.id, standard)
  }
  return [...standards.values()]
}

interface Told {
  timeZone: string
  result: ResultRecord
  inputs: ResultInputs
  readings: Rows<'readings'>
  position: Rows<'position'>
  calibration: Rows<'calibration'>
  stored: StoredFit
  sample: Rows<'sample'>
  determination: Rows<'determination'>
  blanks: Rows<'blanks'>
  lots: StoryLot[]
  checks: Rows<'checks'>
  changes: Change[]
  recomputed: number
}

const minutes = (from: Date, to: Date) => Math.round((to.getTime() - from.getTime()) / 60_000)

/** The story in the order it is asked: from the number on the certificate back to the bottle and the stock. */
export function linesOf(told: Told): StoryView['lines'] {
  return [
    reported(told),
    computed(told),
    fromCurve(told),
    read(told),
    blankAndDilution(told),
    standards(told),
    sampleLine(told),
    between(told),
  ]
}

/** `chromium(VI)`: the numeral keeps its capitals */
const inSentence = (name: string) => name.charAt(0).toLowerCase() + name.slice(1)

const RULE_WORDS: Record<string, string> = {
  simple: 'compared as measured',
  rounded: 'compared after rounding to the digits of the limit',
  guarded: 'compared with an acceptance limit that lies below by the expanded uncertainty',
  'four-zone': 'compared in four zones as wide as the expanded uncertainty',
}

function reported({ result, inputs }: Told): StoryView['lines'][number] {
  const row = toResultRow(result)
  const limit = result.limitSnapshot as unknown as PositionLimit | null
  const uncertainty = row.uncertaintyText === null ? '' : `, U ${row.uncertaintyText} (k = 2)`
  const finding = limit
    ? `${row.verdict?.startsWith('conditional') ? row.verdict.replace('conditional-', 'within uncertainty, ') : row.verdict} ${limit.value} ${showUnit(limit.unit)} (${limit.name}, ${limit.source}), ${RULE_WORDS[limit.rule] ?? limit.rule}`
    : 'no limit applies'
  return {
    heading: 'Reported',
    main: `${row.text} ${showUnit(row.unit)} ${inSentence(determinationName(row.analyte, row.form))}${uncertainty}`,
    detail: `rounded ${inputs.reporting.ties.replaceAll('-', ' ')} to ${inputs.reporting.digits} significant figures; ${finding}`,
    to: null,
  }
}

const majorOf = (version: string) => version.split('.')[0]

function computed({ result, recomputed }: Told): StoryView['lines'][number] {
  const same = Object.is(result.concentration, recomputed)
  const isOtherMajor = majorOf(result.engineVersion) !== majorOf(ENGINE_VERSION)
  const different = isOtherMajor
    ? `engine ${result.engineVersion} is another major version, whose numbers may differ`
    : 'DIFFERENT'
  return {
    heading: 'Computed',
    main: `${Number(result.concentration.toPrecision(6))} mg/L`,
    detail: `stored ${result.concentration} · recomputed ${recomputed} · engine ${result.engineVersion} · ${same ? 'same' : different}`,
    to: null,
  }
}

function fromCurve({ calibration, stored, inputs, timeZone }: Told): StoryView['lines'][number] {
  const readings = inputs.readings.map((reading) => Number(reading.absorbance))
  const mean = readings.length === 0 ? 0 : describeSample(readings).mean
  const short = (value: number) => Number(value.toPrecision(5))
  const times = Number(inputs.dilution) === 1 ? '' : ` × ${inputs.dilution}`
  return {
    heading: 'From the curve',
    main:
      calibration.model === 'quadratic'
        ? `A ${short(mean)} on the quadratic curve${times}`
        : `(${short(mean)} − ${short(stored.intercept)}) / ${short(stored.slope)}${times}`,
    detail: `${calibration.number}, ${calibration.cellPathCm} cm, prepared by ${calibration.preparedBy}, signed by ${calibration.signedBy ?? '–'}${calibration.signedAt ? ` ${showTime(calibration.signedAt, timeZone)}` : ''}`,
    to: paths.calibration(calibration.id),
  }
}

function read({
  readings,
  position,
  determination,
  inputs,
  checks,
  timeZone,
}: Told): StoryView['lines'][number] {
  const used = new Set(inputs.readings.map((reading) => reading.id))
  const counted = readings.filter((row) => used.has(row.id))
  const [first] = counted
  const age =
    position.colourStartedAt && first
      ? `, colour age ${minutes(position.colourStartedAt, first.readAt)} min`
      : ''
  const checked = checks.map(
    (check) =>
      `${check.kind.replace('-', ' ')} check ${showTime(check.checkedAt, timeZone)}, found ${check.found} for ${check.nominal} ${check.unit}${check.passed ? '' : ', FAILED'}`,
  )
  return {
    heading: 'Read',
    main: `A ${counted.map((row) => row.absorbanceText).join(', ')} at ${Number(determination.wavelengthNm)} nm`,
    detail: `position ${position.position} of ${position.batchNumber}, ${[...new Set(counted.map((row) => row.readBy))].join(', ')} ${first ? showTime(first.readAt, timeZone) : ''}${age}, ${position.instrumentName}${checked.length > 0 ? ` (${checked.join('; ')})` : ''}`,
    to: paths.batch(position.batchId),
  }
}

function blankAndDilution({ inputs, blanks }: Told): StoryView['lines'][number] {
  const of = (kind: string) => blanks.filter((row) => row.kind === kind).map((row) => row.absorbanceText)
  const methodBlank = of('method-blank')
  return {
    heading: 'Blank and dilution',
    main: `zeroed on the reagent blank · dilution ${inputs.dilution}`,
    detail:
      methodBlank.length > 0
        ? `method blank A ${methodBlank.join(', ')}; not subtracted`
        : 'no method blank in this run',
    to: null,
  }
}

function standards({ lots }: Told): StoryView['lines'][number] {
  const own = lots.filter((lot) => lot.role === 'standard')
  const stocks = own.filter((lot) => lot.parentNumber === null)
  return {
    heading: 'Standards',
    main: own.map((lot) => lot.number).join(', ') || 'no lots recorded',
    detail: stocks
      .map(
        (lot) =>
          `from ${lot.number}, ${lot.concentration ?? '–'}${lot.uncertainty ? ` ± ${lot.uncertainty}` : ''} mg/L, certificate ${lot.certificateRef || 'not recorded'}, to ${lot.expiresOn}`,
      )
      .join('; '),
    to: stocks[0] ? paths.material(stocks[0].id) : null,
  }
}

function sampleLine({ sample, result, determination, readings, timeZone }: Told): StoryView['lines'][number] {
  const readAt = readings.at(-1)?.readAt ?? result.measuredAt
  const usedHours = Math.round((readAt.getTime() - sample.collectedAt.getTime()) / 3_600_000)
  const ph = sample.ph === '' ? '' : `, pH ${sample.ph}`
  const temperature = sample.temperatureC === '' ? '' : ` at ${sample.temperatureC} °C`
  return {
    heading: 'Sample',
    main: `${result.sampleNumber}, ${result.pointCode} ${result.pointName}`,
    detail: `collected ${showTime(sample.collectedAt, timeZone)} by ${sample.collectedBy}, received ${sample.receivedAt ? showTime(sample.receivedAt, timeZone) : '–'}${temperature}${ph} by ${sample.receiverName ?? '–'} · holding time used ${usedHours} h of ${determination.holdingRule}`,
    to: paths.sample(result.sampleId),
  }
}

function between({ changes, position, timeZone }: Told): StoryView['lines'][number] {
  const main =
    changes.length === 0
      ? 'nothing was changed by hand'
      : changes
          .map((change) => `${change.what}: ${change.from} became ${change.to} (${change.reason})`)
          .join('; ')
  const submitted =
    position.submittedBy && position.submittedAt
      ? `submitted by ${position.submittedBy} ${showTime(position.submittedAt, timeZone)}`
      : 'not submitted'
  const released =
    position.releasedBy && position.releasedAt
      ? `, reviewed and released by ${position.releasedBy} ${showTime(position.releasedAt, timeZone)}`
      : ', not released'
  return { heading: 'Between the reading and you', main, detail: `${submitted}${released}`, to: null }
}
