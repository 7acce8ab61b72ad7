import type { FieldProblem } from '@weirlight/shared/errors'
import type { CalibrationAssessment } from '@weirlight/shared/worksheet'
import { countingStandards, nameOf, type CalibrationWhole } from './calibration-whole.js'

/**
 * Everything that stops a draft from being submitted, at once. A criterion that fails does not, but the note must
 * say why: the signer decides. Pure.
 */
export function whyNotSubmit(input: {
  whole: CalibrationWhole
  assessment: CalibrationAssessment
  /** why no reading may be taken on the instrument */
  instrumentObstacle: string | undefined
  unusableLots: readonly { id: string; why: string }[]
  now: Date
}): FieldProblem[] {
  const { whole, assessment, instrumentObstacle, unusableLots, now } = input
  const { row } = whole
  const problems: FieldProblem[] = []
  const say = (path: string, message: string) => problems.push({ path, message })

  if (instrumentObstacle) say('instrumentId', instrumentObstacle)
  for (const { id, why } of unusableLots) say(pathOfLot(whole, id), why)
  if (row.stockLotId === null && whole.standards.some(lacksLot)) {
    say('stockLotId', 'Choose the lot the standards were made from: without it no result can be traced.')
  }
  if (row.colourStartedAt && row.colourStartedAt > now)
    say('colourStartedAt', 'The reagent cannot have been added in the future.')
  problems.push(...missingReadings(whole))
  if (assessment.refusal) say('standards', assessment.refusal)
  const tooFew = assessment.criteria.find(({ code, outcome }) => code === 'standards' && outcome === 'fail')
  if (tooFew)
    say(
      'standards',
      `${tooFew.what} are needed; there ${tooFew.found === '1' ? 'is 1' : `are ${tooFew.found}`}.`,
    )
  const failed = assessment.criteria.filter(({ outcome, code }) => outcome === 'fail' && code !== 'standards')
  if (failed.length > 0 && row.note.trim().length < 3) {
    const names = failed.map(({ what, found }) => `${what} (found ${found})`).join('; ')
    say('note', `Not met: ${names}. Say in the note why the calibration should be used all the same.`)
  }
  return problems
}

const lacksLot = (standard: CalibrationWhole['standards'][number]) =>
  !standard.removed && standard.lotId === null && Number(standard.concentration) > 0

function pathOfLot({ row, standards }: CalibrationWhole, lotId: string): string {
  if (row.stockLotId === lotId) return 'stockLotId'
  const reagent = row.reagentLots.findIndex(({ id }) => id === lotId)
  if (reagent >= 0) return `reagentLotIds.${reagent}`
  const standard = standards.filter(({ removed }) => !removed).findIndex((one) => one.lotId === lotId)
  return `standards.${standard}.lotId`
}

/** Every standard is read as often as the one read most. */
function missingReadings(whole: CalibrationWhole): FieldProblem[] {
  const counted = countingStandards(whole).map(({ standard, cells }) => ({
    standard,
    read: cells.filter(({ absorbanceText }) => absorbanceText !== null).length,
  }))
  const wanted = Math.max(1, ...counted.map(({ read }) => read))
  return counted.flatMap(({ standard, read }, index) => {
    if (standard.leftOutReason !== '' || read === wanted) return []
    const what = read === 0 ? 'was not read' : `has ${read} of ${wanted} readings`
    return [{ path: `standards.${index}.readings`, message: `${nameOf(standard)} ${what}.` }]
  })
}
