import { Injectable } from '@nestjs/common'
import { sql } from 'kysely'
import type { Executor } from '../../platform/index.js'

export interface StoryLot {
  id: string
  number: string
  name: string
  kind: string
  concentration: string | null
  uncertainty: string | null
  certificateRef: string
  producer: string
  expiresOn: string
  parentNumber: string | null
  role: string
}

/** Everything that stands behind one result; each part one query. */
@Injectable()
export class StoryRepository {
  async readings(db: Executor, { batchId, positionId }: { batchId: string; positionId: string }) {
    return db
      .selectFrom('positionReadings as reading')
      .innerJoin('users', 'users.id', 'reading.readBy')
      .leftJoin('positionReadings as later', 'later.supersedesId', 'reading.id')
      .select([
        'reading.id',
        'reading.replicate',
        'reading.absorbanceText',
        'reading.readAt',
        'reading.source',
        'reading.reason',
        'users.name as readBy',
        'later.id as laterId',
        'later.absorbanceText as laterText',
        'later.reason as laterReason',
        'later.readAt as laterAt',
      ])
      .where('reading.batchId', '=', batchId)
      .where('reading.positionId', '=', positionId)
      .orderBy('reading.replicate')
      .orderBy('reading.id')
      .execute()
  }

  async position(db: Executor, id: string) {
    return db
      .selectFrom('positions')
      .innerJoin('batches', 'batches.id', 'positions.batchId')
      .innerJoin('instruments', 'instruments.id', 'batches.instrumentId')
      .leftJoin('users as submitter', 'submitter.id', 'batches.submittedBy')
      .leftJoin('users as releaser', 'releaser.id', 'batches.releasedBy')
      .select([
        'positions.position',
        'positions.dilution',
        'positions.note',
        'batches.id as batchId',
        'batches.number as batchNumber',
        'batches.colourStartedAt',
        'batches.submittedAt',
        'batches.releasedAt',
        'batches.reviewComment',
        'instruments.id as instrumentId',
        'instruments.name as instrumentName',
        'submitter.name as submittedBy',
        'releaser.name as releasedBy',
      ])
      .where('positions.id', '=', id)
      .executeTakeFirstOrThrow()
  }

  async blanks(db: Executor, batchId: string) {
    return db
      .selectFrom('positions')
      .innerJoin('positionReadings as reading', 'reading.positionId', 'positions.id')
      .leftJoin('positionReadings as later', 'later.supersedesId', 'reading.id')
      .select(['positions.kind', 'positions.position', 'reading.absorbanceText'])
      .where('positions.batchId', '=', batchId)
      .where('positions.kind', 'in', ['blank', 'method-blank'])
      .where('later.id', 'is', null)
      .orderBy('positions.position')
      .orderBy('reading.replicate')
      .execute()
  }

  async calibration(db: Executor, id: string) {
    return db
      .selectFrom('calibrations')
      .innerJoin('users as preparer', 'preparer.id', 'calibrations.preparedBy')
      .leftJoin('users as signer', 'signer.id', 'calibrations.signedBy')
      .select([
        'calibrations.id',
        'calibrations.number',
        'calibrations.model',
        'calibrations.weighting',
        'calibrations.cellPathCm',
        'calibrations.stored',
        'calibrations.signedAt',
        'calibrations.stockLotId',
        'preparer.name as preparedBy',
        'signer.name as signedBy',
      ])
      .where('calibrations.id', '=', id)
      .executeTakeFirstOrThrow()
  }

  async standards(db: Executor, calibrationId: string) {
    return db
      .selectFrom('calibrationStandards as standard')
      .leftJoin('calibrationReadings as reading', (join) =>
        join
          .onRef('reading.standardId', '=', 'standard.id')
          .on((eb) =>
            eb.not(
              eb.exists(
                eb
                  .selectFrom('calibrationReadings as later')
                  .whereRef('later.supersedesId', '=', 'reading.id')
                  .select('later.id'),
              ),
            ),
          ),
      )
      .leftJoin('materialLots as lot', 'lot.id', 'standard.lotId')
      .select([
        'standard.id',
        'standard.position',
        'standard.role',
        'standard.concentration',
        'standard.lotId',
        'lot.number as lotNumber',
        'reading.absorbanceText',
      ])
      .where('standard.calibrationId', '=', calibrationId)
      .where('standard.removed', '=', false)
      .orderBy('standard.position')
      .orderBy('reading.replicate')
      .execute()
  }

  /** Lots of the run and of the curve, each back to what it was made from. */
  async lots(db: Executor, given: { batchId: string; calibrationId: string }): Promise<StoryLot[]> {
    const found = await sql<StoryLot>`
      with recursive used (lot_id, role) as (
        select stock_lot_id, 'standard' from calibrations where id = ${given.calibrationId} and stock_lot_id is not null
        union select lot_id, 'standard' from calibration_standards where calibration_id = ${given.calibrationId} and lot_id is not null and not removed
        union select lot_id, 'reagent' from calibration_lots where calibration_id = ${given.calibrationId}
        union select lot_id, 'reagent' from batch_lots where batch_id = ${given.batchId}
        union select lot_id, 'control' from positions where batch_id = ${given.batchId} and lot_id is not null
        union select l.parent_id, u.role from used u join material_lots l on l.id = u.lot_id where l.parent_id is not null
      )
      select l.id, l.number, l.name, l.kind, l.concentration, l.uncertainty, l.certificate_ref, l.producer, l.expires_on,
        p.number as parent_number, u.role
      from used u join material_lots l on l.id = u.lot_id left join material_lots p on p.id = l.parent_id
      order by u.role desc, l.parent_id is not null, l.number`.execute(db)
    return found.rows
  }

  /** The instrument's last check of each kind before the reading. */
  async checks(db: Executor, { instrumentId, at }: { instrumentId: string; at: Date }) {
    return db
      .selectFrom('instrumentChecks')
      .distinctOn('kind')
      .select(['kind', 'nominal', 'found', 'unit', 'passed', 'checkedAt'])
      .where('instrumentId', '=', instrumentId)
      .where('checkedAt', '<=', at)
      .orderBy('kind')
      .orderBy('checkedAt', 'desc')
      .execute()
  }

  async sample(db: Executor, id: string) {
    return db
      .selectFrom('samples')
      .leftJoin('users as receiver', 'receiver.id', 'samples.receivedBy')
      .selectAll('samples')
      .select('receiver.name as receiverName')
      .where('samples.id', '=', id)
      .executeTakeFirstOrThrow()
  }

  async determination(db: Executor, id: string) {
    return db
      .selectFrom('determinations')
      .innerJoin('methods', 'methods.id', 'determinations.methodId')
      .select([
        'determinations.holdingDueAt',
        'determinations.holdingRule',
        'methods.code',
        'methods.edition',
        'methods.wavelengthNm',
        'methods.definition',
      ])
      .where('determinations.id', '=', id)
      .executeTakeFirstOrThrow()
  }

  async certificate(db: Executor, resultId: string) {
    return db
      .selectFrom('certificateResults')
      .innerJoin('certificates', 'certificates.id', 'certificateResults.certificateId')
      .select(['certificates.id', 'certificates.number', 'certificates.state'])
      .where('certificateResults.resultId', '=', resultId)
      .orderBy('certificates.id', 'desc')
      .limit(1)
      .executeTakeFirst()
  }

  /** Changes by hand of the position itself: dilution and note. */
  async positionChanges(db: Executor, positionId: string) {
    return db
      .selectFrom('history')
      .select(['at', 'actorName', 'reason', 'old', 'new'])
      .where('thing', '=', 'positions')
      .where('thingId', '=', positionId)
      .where('operation', '=', 'update')
      .orderBy('at')
      .limit(50)
      .execute()
  }
}
