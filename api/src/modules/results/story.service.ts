import { Injectable } from '@nestjs/common'
import { ENGINE_VERSION } from '@weirlight/shared/assay'
import type { MethodDefinition, StoryView } from '@weirlight/shared/contracts'
import { assessPosition, type StoredFit } from '@weirlight/shared/worksheet'
import { Database } from '../../platform/index.js'
import { LaboratoryService } from '../laboratory/index.js'
import { CAUTION, type ResultInputs } from './result-inputs.js'
import { toResultRow } from './result-row.js'
import { ResultsService } from './results.service.js'
import { changesOf, linesOf, standardsOf } from './story-lines.js'
import { StoryRepository } from './story.repository.js'

/** Pick one number: everything behind it, with the value recomputed by the code that runs now. */
@Injectable()
export class StoryService {
  constructor(
    private readonly db: Database,
    private readonly results: ResultsService,
    private readonly laboratory: LaboratoryService,
    private readonly story: StoryRepository,
  ) {}

  async tell(id: string): Promise<StoryView> {
    const db = this.db.read
    const result = await this.results.get(db, id)
    const inputs = result.inputs as unknown as ResultInputs
    const [
      laboratory,
      readings,
      position,
      calibration,
      standards,
      sample,
      determination,
      certificate,
      edits,
    ] = await Promise.all([
      this.laboratory.get(db),
      this.story.readings(db, { batchId: result.batchId, positionId: result.positionId }),
      this.story.position(db, result.positionId),
      this.story.calibration(db, result.calibrationId),
      this.story.standards(db, result.calibrationId),
      this.story.sample(db, result.sampleId),
      this.story.determination(db, result.determinationId),
      this.story.certificate(db, id),
      this.story.positionChanges(db, result.positionId),
    ])
    const readAt = readings.at(-1)?.readAt ?? result.measuredAt
    const [blanks, lots, checks] = await Promise.all([
      this.story.blanks(db, result.batchId),
      this.story.lots(db, { batchId: result.batchId, calibrationId: result.calibrationId }),
      this.story.checks(db, { instrumentId: position.instrumentId, at: readAt }),
    ])
    const again = recompute(inputs)
    const recomputed = again.concentration ?? Number.NaN
    const changes = changesOf({ readings, edits })
    const definition = determination.definition as unknown as MethodDefinition
    const stored = calibration.stored as unknown as StoredFit
    return {
      result: toResultRow(result),
      certificate: certificate ?? null,
      lines: linesOf({
        timeZone: laboratory.timeZone,
        result,
        inputs,
        readings,
        position,
        calibration,
        stored,
        sample,
        determination,
        blanks,
        lots,
        checks,
        changes,
        recomputed,
      }),
      stored: result.concentration,
      recomputed,
      same: Object.is(result.concentration, recomputed),
      engineVersion:
        result.engineVersion === ENGINE_VERSION
          ? ENGINE_VERSION
          : `${result.engineVersion}, recomputed by ${ENGINE_VERSION}`,
      tint:
        again.meanAbsorbance === null ? null : { absorbance: again.meanAbsorbance, band: bandOf(definition) },
      readings: readings.map((row) => ({
        id: row.id,
        replicate: row.replicate,
        absorbance: row.absorbanceText,
        at: row.readAt.toISOString(),
        by: row.readBy,
        source: row.source,
        superseded: row.laterId !== null,
        reason: row.reason,
      })),
      calibration: {
        id: calibration.id,
        number: calibration.number,
        equation: equationOf(stored),
        signedBy: calibration.signedBy ?? '',
        signedAt: calibration.signedAt?.toISOString() ?? null,
      },
      standards: standardsOf(standards),
      lots: lots.map((lot) => ({
        id: lot.id,
        number: lot.number,
        name: lot.name,
        role: lot.role,
        detail: [
          lot.concentration === null
            ? ''
            : `${lot.concentration}${lot.uncertainty === null ? '' : ` ± ${lot.uncertainty}`} mg/L`,
          lot.parentNumber === null
            ? lot.certificateRef && `certificate ${lot.certificateRef}, ${lot.producer}`
            : `made from ${lot.parentNumber}`,
          `to ${lot.expiresOn}`,
        ]
          .filter(Boolean)
          .join(', '),
      })),
      changes,
      caution: CAUTION,
    }
  }
}

/** The same function, the same inputs, today's code. */
export function recompute(inputs: ResultInputs) {
  return assessPosition(
    {
      kind: 'sample',
      absorbances: inputs.readings.map((reading) => Number(reading.absorbance)),
      dilution: Number(inputs.dilution),
      expected: null,
      added: null,
      parent: null,
      limits: inputs.limits,
      reporting: inputs.reporting,
    },
    inputs.rules,
  )
}

function bandOf({ band }: MethodDefinition) {
  return { peakNm: band.peakNm, widthShortNm: band.widthShortNm, widthLongNm: band.widthLongNm }
}

function equationOf(stored: StoredFit): string {
  const coefficients = (stored.fit['coefficients'] as number[]).map((value) => Number(value.toPrecision(6)))
  const [constant = 0, slope = 0, curve] = coefficients
  const bend = curve === undefined ? '' : ` ${curve < 0 ? '−' : '+'} ${Math.abs(curve)} c²`
  return `A = ${constant} ${slope < 0 ? '−' : '+'} ${Math.abs(slope)} c${bend}`
}
